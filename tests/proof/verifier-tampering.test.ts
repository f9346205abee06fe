import { createHash, generateKeyPairSync, type KeyObject, sign } from 'node:crypto';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { pathToFileURL } from 'node:url';
import canonicalize from 'canonicalize';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { SealRow } from '../../shared/proof/proof.schema.ts';
import { grouped } from '../../shared/proof/verify.mjs';
import { startTestApp, type TestApp } from '../support/app.ts';
import { type History, startHistory } from './history.ts';
import {
  bench,
  download,
  editFile,
  editLines,
  type JournalJson,
  journalOf,
  newFolder,
  pack,
  packageOf,
  rehashed,
  replaceJournal,
  runVerifier,
  unpack,
} from './packages.ts';

/**
 * Somebody with full rights on the database, its triggers switched off, or with the package in their hands. The verifier
 * holds what was printed before: the fingerprint of the key (`KNOWN_KEY`) and a head (`KNOWN_HEAD`).
 */
const home = mkdtempSync(path.join(tmpdir(), 'tarewright-tampering-'));
let app: TestApp;
let history: History;
let other: History;
/** The journal as it was, sealed up to its last record but one. */
let rows: JournalJson[];
let otherRows: JournalJson[];
let sealed: SealRow;
beforeAll(async () => {
  app = await startTestApp({ environment: { TAREWRIGHT_HOME: home } });
  history = await startHistory(app);
  other = await startHistory(app);
  sealed = (await history.client.post<SealRow>('/journal/seals')).body;
  await other.client.post('/journal/seals');
  rows = await journalOf(history);
  otherRows = await journalOf(other);
});
afterAll(async () => {
  await app.close();
  rmSync(home, { recursive: true, force: true });
  rmSync(bench, { recursive: true, force: true });
});

const knownKey = () => ['--key-fingerprint', grouped(sealed.keyId)];
const knownHead = () => ['--known-head', `${sealed.sequence}:${sealed.hash}`];
/** The last of the first two seals: known from an earlier mail. */
const earlierHead = () => ['--known-head', `${history.seals.second.sequence}:${history.seals.second.hash}`];
const everything = 'from=2000-01-01&to=2099-12-31';

/** Everything that is found wrong here, for the self-test below: a package and what the verifier was told. */
const tampered: { folder: string; words: string[] }[] = [];
async function expectFault(folder: string, sentence: RegExp, words: string[] = []): Promise<void> {
  tampered.push({ folder, words });
  const { status, lines } = await runVerifier(folder, words);
  expect([lines[0], status]).toEqual(['NOT INTACT', 1]);
  expect(lines[1]).toMatch(sentence);
}
const record = (sequence: number) => new RegExp(`\\brecord ${sequence}\\b`, 'i');
const at = (sequence: number): JournalJson => rows[sequence - 1] as JournalJson;
const sealRecords = () => rows.filter(({ type }) => type === 'seal').map(({ sequence }) => sequence);
const withContent = (row: JournalJson, change: (content: string) => string): JournalJson => {
  const content = change(row.content);
  if (content === row.content) throw new Error('nothing was changed');
  return { ...row, content };
};
/** The journal with one record's text changed, and nothing else. */
const textChanged = (sequence: number): JournalJson[] =>
  rows.map((row) => (row.sequence === sequence ? withContent(row, (text) => text.replace(/"id":"0/, '"id":"1')) : row));
/** An entry well before the first seal. */
const early = () => rows.find(({ type }) => type === 'entry')?.sequence as number;
const rewrittenFrom = /written anew/;

describe('What was not touched', () => {
  it('is intact: the server’s own package, as a zip and unpacked, with and without what was known before', async () => {
    const zip = await download(app.url, other, everything);
    const folder = await unpack(zip);
    for (const target of [zip, folder, await pack(folder, undefined, false)]) {
      const { status, lines } = await runVerifier(target);
      expect([lines[0], status]).toEqual(['intact', 0]);
    }
    const key = await runVerifier(folder, ['--key-fingerprint', other.seals.first.keyId]);
    expect([key.lines[0], key.status]).toEqual(['intact', 0]);
    const head = await runVerifier(folder, ['--known-head', `${other.seals.first.sequence}:${other.seals.first.hash}`]);
    expect([head.lines[0], head.status]).toEqual(['intact', 0]);
    expect((await runVerifier(folder, ['--es'])).lines[0]).toBe('intacto');
  });

  it('is intact as this test packs it, so that what is found below is what was done below', async () => {
    for (const words of [[], knownKey(), knownHead(), [...knownKey(), ...earlierHead()]])
      expect(await runVerifier(packageOf(history.firm.id, rows), words)).toMatchObject({ status: 0 });
  });
});

describe('With full rights on the database, before the server packs', () => {
  const cases: [string, () => JournalJson[], () => RegExp][] = [
    ['a changed text is named', () => textChanged(early()), () => record(early())],
    [
      'a text changed together with its own hash is named at the record that stands on it',
      () => {
        const remade = rehashed(textChanged(early()))[early() - 1] as JournalJson;
        return rows.map((row) => (row.sequence === early() ? remade : row));
      },
      () => record(early() + 1),
    ],
    ['a removed record is named', () => rows.filter(({ sequence }) => sequence !== early()), () => record(early())],
    [
      'a removed record is named when the rest was moved up',
      () => rows.filter(({ sequence }) => sequence !== early()).map((row, index) => ({ ...row, sequence: index + 1 })),
      () => record(early()),
    ],
    [
      'a record put in is named',
      () => {
        const put = {
          ...withContent(at(early()), (text) => text.replace(/"id":"0/, '"id":"1')),
          record_id: app.parts.newId(),
        };
        return [...rows.slice(0, early()), put, ...rows.slice(early())].map((row, index) => ({
          ...row,
          sequence: index + 1,
        }));
      },
      () => record(early() + 1),
    ],
    [
      'a record entered twice is named',
      () => {
        const twice = { ...at(early()), record_id: app.parts.newId() };
        return [...rows.slice(0, early()), twice, ...rows.slice(early())].map((row, index) => ({
          ...row,
          sequence: index + 1,
        }));
      },
      () => record(early() + 1),
    ],
    [
      'two records that changed places are named at the first',
      () => {
        const swapped = [...rows];
        swapped[early() - 1] = { ...at(early() + 1), sequence: early() };
        swapped[early()] = { ...at(early()), sequence: early() + 1 };
        return swapped;
      },
      () => record(early()),
    ],
    [
      'the log written anew from a record on is named by the seal that it does not fit',
      () => rehashed(textChanged(early())),
      () => rewrittenFrom,
    ],
    [
      'the last records before a seal, taken out with the rest moved up and hashed anew, are named',
      () => rehashed(rows.filter(({ sequence }) => sequence !== (sealRecords()[1] as number) - 1)),
      () => new RegExp(`From record ${(sealRecords()[0] as number) + 1} on`),
    ],
    [
      'a seal whose date was changed is named, hashed anew or not',
      () =>
        rehashed(
          rows.map((row) =>
            row.sequence === sealRecords()[0]
              ? withContent(row, (text) => text.replace(/("seal":\{"at":"20)26/, '$125'))
              : row,
          ),
        ),
      () => record(sealRecords()[0] as number),
    ],
    [
      'a seal exchanged for another firm’s is named',
      () => {
        const foreign = otherRows.find(({ type }) => type === 'seal') as JournalJson;
        return rehashed(
          rows.map((row) => (row.sequence === sealRecords()[0] ? { ...row, content: foreign.content } : row)),
        );
      },
      () => /another firm/,
    ],
    [
      'a seal that was given the hash of the log written anew is named, for it is signed no more',
      () =>
        rehashed(textChanged(early()), (row, previous) =>
          row.type === 'seal'
            ? { ...row, content: row.content.replace(/"hash":"[0-9a-f]{64}"/, `"hash":"${previous}"`) }
            : row,
        ),
      () => record(sealRecords()[0] as number),
    ],
    [
      'records of another firm in the middle of the log are named',
      () => rehashed([...rows.slice(0, early()), ...otherRows.slice(early(), early() + 3), ...rows.slice(early())]),
      () => rewrittenFrom,
    ],
    [
      'another firm’s whole log in place of ours is named',
      () => otherRows.map((row) => ({ ...row, firm_id: history.firm.id })),
      () => /another firm/,
    ],
  ];
  it.each(cases)('%s', async (_name, change, sentence) => {
    const folder = packageOf(history.firm.id, change());
    await expectFault(folder, sentence());
    for (const words of [knownKey(), knownHead()]) expect((await runVerifier(folder, words)).status).toBe(1);
  });

  it('what the server itself packs afterwards says the same: changed, hidden and changed, removed, exchanged', async () => {
    const inUnit = `unitId=${history.unit.id}`;
    const entryOfOther = rows.find(({ type, content }) => type === 'entry' && content.includes(history.otherUnit.id));
    const attacks: [JournalJson[], string, RegExp][] = [
      [textChanged(early()), everything, record(early())],
      [textChanged(Number(entryOfOther?.sequence)), inUnit, record(Number(entryOfOther?.sequence))],
      [rows.filter(({ sequence }) => sequence !== early()), inUnit, record(early())],
      [rehashed(textChanged(early())), everything, rewrittenFrom],
    ];
    for (const [attack, query, sentence] of attacks) {
      await replaceJournal(history, attack);
      await expectFault(await unpack(await download(app.url, history, query)), sentence, knownKey());
    }
    await replaceJournal(history, rows);
    expect(
      (await runVerifier(await download(app.url, history, everything), [...knownKey(), ...knownHead()])).status,
    ).toBe(0);
  });
});

interface Forger {
  keyId: string;
  spki: string;
  key: KeyObject;
}
function forger(): Forger {
  const { publicKey, privateKey } = generateKeyPairSync('ed25519');
  const der = publicKey.export({ format: 'der', type: 'spki' });
  return { keyId: createHash('sha256').update(der).digest('hex'), spki: der.toString('base64'), key: privateKey };
}
const signature = (statement: object, { key }: Forger) =>
  sign(null, Buffer.from(canonicalize(statement) as string), key).toString('base64');

/** Every key and seal made anew with a key of one's own, over whatever the log now says. */
function resigned(held: readonly JournalJson[], by: Forger): JournalJson[] {
  return rehashed(held, (row, previous) => {
    if (row.type !== 'seal' && row.type !== 'sealKey') return row;
    const content = JSON.parse(row.content);
    if (row.type === 'sealKey') content.key = { ...content.key, keyId: by.keyId, publicKey: by.spki };
    else {
      content.seal = { ...content.seal, keyId: by.keyId, hash: previous };
      content.signature = signature(content.seal, by);
    }
    return { ...row, content: canonicalize(content) as string };
  });
}

describe('With a key of one’s own', () => {
  it('the whole log, sealed anew, is found by the fingerprint, or by the head; without both it says that it cannot know', async () => {
    const folder = packageOf(history.firm.id, resigned(textChanged(early()), forger()));
    const { status, lines } = await runVerifier(folder);
    expect([lines[0], status]).toEqual(['intact', 0]);
    expect(lines.join('\n')).toMatch(/What this cannot tell:\n- who signed/);
    await expectFault(folder, /somebody else signed/, knownKey());
    await expectFault(folder, /head that you know/, knownHead());
  });

  it('a public key put in place of ours is named, as it is or named after itself', async () => {
    const by = forger();
    const replaced = (change: (key: Record<string, unknown>) => object) =>
      packageOf(
        history.firm.id,
        rehashed(
          rows.map((row) => {
            if (row.type !== 'sealKey') return row;
            const content = JSON.parse(row.content);
            return { ...row, content: canonicalize({ ...content, key: change(content.key) }) as string };
          }),
        ),
      );
    await expectFault(
      replaced((key) => ({ ...key, publicKey: by.spki })),
      /public key in record/,
    );
    await expectFault(
      replaced((key) => ({ ...key, publicKey: by.spki, keyId: by.keyId })),
      /by a key that was not the current one/,
    );
  });

  it('the whole log, sealed anew by a key that calls itself ours, is named without knowing more', async () => {
    const by = { ...forger(), keyId: sealed.keyId };
    await expectFault(
      packageOf(history.firm.id, resigned(textChanged(early()), by)),
      /public key in record/,
      knownKey(),
    );
  });

  it('a key handed on to oneself is named: without a signature, with one’s own, and with the fingerprint if there is none', async () => {
    const by = forger();
    const handedOn = (signedBy: Forger | null) => {
      const before = rows.filter(({ type }) => type === 'sealKey').at(-1) as JournalJson;
      const first = JSON.parse(before.content);
      const key = { ...first.key, keyId: by.keyId, publicKey: by.spki, previousKeyId: first.key.keyId };
      const content = {
        ...first,
        id: app.parts.newId(),
        key,
        generation: '2',
        signature: signedBy && signature(key, signedBy),
      };
      const put: JournalJson = { ...before, record_id: content.id, content: canonicalize(content) as string };
      const cut = rows.slice(0, sealRecords().at(-2));
      const changed = rehashed([...cut, put]);
      const seal = {
        at: first.recordedAt,
        firmId: history.firm.id,
        hash: changed.at(-1)?.hash.slice(2),
        keyId: by.keyId,
        sequence: String(changed.length),
      };
      const end = {
        id: app.parts.newId(),
        recordedAt: first.recordedAt,
        recordedBy: first.recordedBy,
        seal,
        signature: signature(seal, by),
        type: 'seal',
      };
      return rehashed([...changed, { ...before, type: 'seal', content: canonicalize(end) as string }]);
    };
    const sequence = (sealRecords().at(-2) as number) + 1;
    await expectFault(
      packageOf(history.firm.id, handedOn(by)),
      new RegExp(`record ${sequence} is not signed by the key before`),
    );
    const unsigned = packageOf(history.firm.id, handedOn(null));
    expect((await runVerifier(unsigned)).lines.join('\n')).toContain(`who made the new key in record ${sequence}`);
    await expectFault(unsigned, new RegExp(`From record ${sequence} on`), knownKey());
    await expectFault(unsigned, /cut off|head that you know/, knownHead());
  });

  it('an end of one’s own after the last seal is named: nothing seals it', async () => {
    const more = {
      ...at(early()),
      record_id: app.parts.newId(),
      content: at(early()).content.replace(/"id":"0/, '"id":"1'),
    };
    await expectFault(packageOf(history.firm.id, rehashed([...rows, more])), /No seal covers/);
  });
});

describe('The end cut off', () => {
  it('at an earlier seal is known by the head alone, and the verifier says so', async () => {
    const folder = packageOf(history.firm.id, rows.slice(0, sealRecords()[1]));
    const { status, lines } = await runVerifier(folder, knownKey());
    expect([lines[0], status]).toEqual(['intact', 0]);
    expect(lines.join('\n')).toMatch(/- whether records after the last seal were cut off/);
    await expectFault(folder, /its end was cut off/, knownHead());
  });

  it('anywhere else is named', async () => {
    const sequence = (sealRecords()[1] as number) - 1;
    await expectFault(packageOf(history.firm.id, rows.slice(0, sequence)), /No seal covers/);
    const folder = packageOf(history.firm.id, rows);
    editLines(folder, 'records.jsonl', (lines) => lines.slice(0, sealRecords()[1]));
    await expectFault(folder, /says that it holds/);
  });
});

describe('With the package in one’s hands', () => {
  const tamper = (change: (folder: string) => void, hidden: number[] = []) => {
    const folder = packageOf(history.firm.id, rows, hidden);
    change(folder);
    return folder;
  };
  const inRecords = (change: (lines: string[]) => string[], hidden: number[] = []) =>
    tamper((folder) => editLines(folder, 'records.jsonl', change), hidden);
  const line = (sequence: number) => sequence - 1;

  it('one changed byte of any line is named at its record', async () => {
    for (const row of rows) {
      const folder = inRecords((lines) => {
        const place = line(row.sequence);
        const text = lines[place] as string;
        const middle = text.indexOf('recordedAt') + 16; // inside of a time
        lines[place] = `${text.slice(0, middle)}${text[middle] === '1' ? '2' : '1'}${text.slice(middle + 1)}`;
        return lines;
      });
      await expectFault(folder, record(row.sequence));
    }
  });

  it('a changed hash of a hidden record is named, of its content as of the chain', async () => {
    const flip = (name: string) => (lines: string[]) =>
      lines.map((text, index) =>
        index === line(early())
          ? text.replace(new RegExp(`("${name}":")(.)`), (_, head, digit) => head + (digit === '0' ? '1' : '0'))
          : text,
      );
    await expectFault(inRecords(flip('contentHash'), [early()]), record(early()));
    await expectFault(inRecords(flip('hash'), [early()]), record(early()));
  });

  it('a line taken out, doubled or moved is named', async () => {
    await expectFault(
      inRecords((lines) => lines.filter((_, index) => index !== line(early()))),
      record(early()),
    );
    await expectFault(
      inRecords((lines) => lines.flatMap((text, index) => (index === line(early()) ? [text, text] : [text]))),
      record(early() + 1),
    );
    await expectFault(
      inRecords((lines) => [...lines.slice(1, 3), lines[0] as string, ...lines.slice(3)]),
      record(1),
    );
  });

  it('a content with a second one smuggled in before it is named: what is hashed is what a reader would see', async () => {
    const folder = inRecords((lines) =>
      lines.map((text, index) =>
        index === line(early()) ? text.replace('"content":', '"content":{"type":"entry"},"content":') : text,
      ),
    );
    await expectFault(folder, record(early()));
  });

  it('records of another firm’s package are named', async () => {
    const folder = tamper((place) => {
      for (const name of ['records.jsonl', 'seals.jsonl', 'public-keys.jsonl'])
        writeFileSync(path.join(place, name), readFileSync(path.join(packageOf(other.firm.id, otherRows), name)));
    });
    await expectFault(folder, /another firm/);
  });

  it('a package that says something else of itself is named', async () => {
    const inProof = (change: (text: string) => string) => tamper((folder) => editFile(folder, 'proof.json', change));
    await expectFault(
      inProof((text) => text.replace(history.firm.id, other.firm.id)),
      /another firm/,
    );
    await expectFault(
      inProof((text) => text.replace(/"records":\d+/, '"records":9')),
      /says that it holds 9/,
    );
    await expectFault(
      inProof((text) => text.replace(/"hash":"./, '"hash":"x')),
      /says that it holds/,
    );
    await expectFault(
      inProof((text) => text.replace('proof-1', 'proof-2')),
      /proof.json cannot be read/,
    );
  });

  it('seals and keys that are not those of the records are named', async () => {
    await expectFault(
      tamper((folder) => editLines(folder, 'seals.jsonl', (lines) => lines.slice(1))),
      /seals.jsonl does not say/,
    );
    await expectFault(
      tamper((folder) =>
        editFile(folder, 'public-keys.jsonl', (text) => text.replace('"generation":"1"', '"generation":"2"')),
      ),
      /public-keys.jsonl does not say/,
    );
    await expectFault(
      tamper(() => undefined, sealRecords().slice(0, 1)),
      /seals.jsonl does not say/,
    );
    await expectFault(
      tamper(() => undefined, sealRecords().slice(-1)),
      /No seal covers/,
    );
  });

  it('a file that is missing, damaged or no package is said to be so', async () => {
    const folder = packageOf(history.firm.id, rows);
    await expectFault(
      await pack(folder, ['proof.json', 'seals.jsonl', 'public-keys.jsonl']),
      /records.jsonl is missing/,
    );
    await expectFault(newFolder(), /proof.json is missing/);
    const zip = readFileSync(await pack(folder));
    const damaged = path.join(newFolder(), 'package.zip');
    for (const [name, bytes] of [
      ['cut', zip.subarray(0, zip.length - 200)],
      ['cut in the middle', zip.subarray(0, Math.floor(zip.length / 2))],
      ['with a hole', Buffer.concat([zip.subarray(0, 200), Buffer.alloc(100), zip.subarray(300)])],
      ['empty', Buffer.alloc(0)],
    ] as const) {
      writeFileSync(damaged, bytes);
      const { status, lines } = await runVerifier(damaged);
      expect([name, lines[0], status]).toEqual([name, 'NOT INTACT', 1]);
    }
    await expectFault(
      inRecords((lines) => [...lines.slice(0, 3), 'not a record', ...lines.slice(3)]),
      /records.jsonl:4 cannot be read/,
    );
    expect((await runVerifier(path.join(bench, 'nowhere'))).status).toBe(2);
    expect((await runVerifier(folder, ['--known-head', 'x'])).status).toBe(2);
    expect((await runVerifier(folder, ['--key-fingerprint'])).status).toBe(2);
  });

  it('words beside a record that are not those it holds the hash of are named; erased ones are not', async () => {
    const zip = await download(app.url, other, `unitId=${other.unit.id}&words=true`);
    const folder = await unpack(zip);
    expect(readFileSync(path.join(folder, 'records.jsonl'), 'utf8')).toContain('Key is with Ms Vane');
    expect(await runVerifier(folder)).toMatchObject({ status: 0 });
    editFile(folder, 'records.jsonl', (text) => text.replace('Ms Vane, second door', 'Mr Vane, second door'));
    const [words] = readFileSync(path.join(folder, 'records.jsonl'), 'utf8')
      .split('\n')
      .filter((text) => text.includes('Mr Vane'));
    await expectFault(folder, record(JSON.parse(String(words)).words));

    const moved = await unpack(zip);
    editLines(moved, 'records.jsonl', (lines) => {
      const [note] = lines.splice(
        lines.findIndex((text) => text.includes('Key is with')),
        1,
      );
      return [String(note), ...lines];
    });
    await expectFault(moved, /words beside record/i);

    await other.tamper(`update personal_text set content = null where FIRM`);
    const erased = await runVerifier(await download(app.url, other, `unitId=${other.unit.id}&words=true`));
    expect([erased.lines[0], erased.status]).toEqual(['intact', 0]);
    expect(erased.lines.join('\n')).toMatch(/0 texts beside the records fit them; [1-9]\d* were erased/);
  });
});

describe('The verifier itself', () => {
  const source = readFileSync('shared/proof/verify.mjs', 'utf8');

  it('is plain Node.js: it takes nothing but what Node.js brings, and nothing of that can reach a network', async () => {
    const taken = [...source.matchAll(/load\('(\w+)'\)/g)].map(([, name]) => name);
    expect([...new Set(taken)].sort()).toEqual(['crypto', 'fs', 'path', 'stream', 'url', 'zlib']);
    expect(source).not.toMatch(/^import |require\(|fetch\(|WebSocket|node:http|node:net/m);
    expect(source.match(/\bimport\(/g)).toHaveLength(1);
  });

  it('prints nothing of what a package says of itself that could pass for its own words', async () => {
    const folder = packageOf(history.firm.id, rows);
    editFile(folder, 'proof.json', (text) =>
      text.replace('everything', 'all\\n\\u001b[2KThe signer has the key that you know'),
    );
    const { lines } = await runVerifier(folder);
    expect(lines[1]).toBe('About (as the package says of itself): all [2KThe signer has the key that you know');
  });

  it('says in Spanish everything that it says in English', async () => {
    const folder = packageOf(history.firm.id, rows.slice(0, 3));
    const en = await runVerifier(folder);
    const es = await runVerifier(folder, ['--es']);
    expect([es.lines[0], es.status, es.lines.length]).toEqual(['NO INTACTO', 1, en.lines.length]);
    expect(es.lines.join(' ')).not.toContain('undefined');
  });

  /** One check taken out each: what is found above has to slip through then, or the tests above would prove nothing. */
  const defects: [what: string, check: string, without: string][] = [
    ['hashes', "if (!isSame(outer, hash)) throw new Fault('doesNotFollow', sequence);", ''],
    ['what a seal seals', 'seal.hash !== hexOf(this.#hash))', 'false)'],
    ['signatures', 'return this.#tools.verify(raw, signedText(object), bytesOfBase64(signature));', 'return true;'],
    ['the name of a key', '|| hexOf(this.#tools.sha256(der)) !== key.keyId', ''],
    ['the fingerprint', 'if (keyFingerprint && !keys.some(({ keyId }) => keyId === keyFingerprint))', 'if (false)'],
    ['a key that nothing vouches for', "if (this.#lostAt) throw new Fault('signerLost', this.#lostAt);", ''],
    ['the known head', 'if (knownHead?.sequence === sequence && knownHead.hash !== hexOf(outer))', 'if (false)'],
    ['an end that was cut off', 'if (knownHead && knownHead.sequence > this.#sequence)', 'if (false)'],
    ['the firm', 'this.#options.firmId ??', ''],
    ['the seal at the end', 'if (found.sealed?.record !== sequence)', 'if (false)'],
    ['words', 'if (!textOf(this.#content).includes(', 'if (false && textOf(this.#content).includes('],
    ['copies', 'if (whole !== copies', 'if (false && copies'],
  ];
  it.each(defects)('without its check of %s, lets through what is found with it', async (_what, check, without) => {
    expect(source).toContain(check);
    const planted = path.join(newFolder(), 'planted.mjs');
    writeFileSync(
      planted,
      source.replaceAll(check, () => without),
    );
    const { checkPackage, openPath, nodeTools, readHash, readHead } = await import(pathToFileURL(planted).href);
    const tools = await nodeTools();
    const missed: string[] = [];
    for (const { folder, words } of tampered) {
      const told = (word: string) => (words.includes(word) ? words[words.indexOf(word) + 1] : null);
      const keyFingerprint = told('--key-fingerprint') && readHash(told('--key-fingerprint'));
      const knownHead = told('--known-head') && readHead(told('--known-head'));
      try {
        await checkPackage(await openPath(folder, tools), tools, { keyFingerprint, knownHead });
        missed.push(folder);
      } catch {
        // found by another check
      }
    }
    expect(tampered.length).toBeGreaterThan(40);
    expect(missed).not.toEqual([]);
  });
});
