#!/usr/bin/env node
/**
 * Checks a Tarewright proof package. One file, plain Node.js 20 or newer, no packages, no network:
 *
 *   node verify.mjs [package.zip or unpacked folder] [--key-fingerprint F] [--known-head SEQUENCE:HASH] [--es]
 *
 * Without a path it checks the folder that it lies in. --key-fingerprint is the fingerprint of the firm's public key, and
 * --known-head a record's number and hash, both from an earlier print or mail: only what you hold already can show that
 * somebody signed the whole log anew, or cut off its end. Exit status: 0 intact, 1 not intact, 2 could not be checked.
 *
 * What is in a package
 *   proof.json          format, firm, what it is about, number of records, hash of the last
 *   records.jsonl       every record of the firm's log, in order, one a line:
 *                       {"sequence":12,"hash":"...","content":{...}}        a record that the package is about, whole
 *                       {"sequence":13,"hash":"...","contentHash":"..."}    any other: nothing but hashes
 *                       {"words":12,"field":"note","salt":"...","content":"..."}  words beside record 12, if included
 *   seals.jsonl, public-keys.jsonl   the seals and public keys once more by themselves, as records.jsonl holds them
 *
 * What is checked
 *   hash(n) = SHA-256(n as 8 bytes big-endian, hash(n-1), SHA-256(content)); 32 zero bytes stand for hash(0); content is
 *   the bytes of the JSON as they stand (RFC 8785). A seal, itself a record, signs (Ed25519) the RFC 8785 text of
 *   {"at","firmId","hash","keyId","sequence"} of the record before it; keyId is SHA-256 of the public key (SPKI, DER). A
 *   new key is signed by the one before it. Words: SHA-256(salt, words) stands in the record as <field>Hash. A package
 *   ends with a seal.
 *
 * The program itself imports these checks, in the browser and on the server; only `main` needs Node.js.
 */

const HASH = /^[0-9a-f]{64}$/;
const UUID = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/;
const INSTANT = /^\d{4}-\d\d-\d\dT\d\d:\d\d:\d\d\.\d{3}Z$/;
const COUNT = /^[1-9]\d{0,14}$/;
const KEY = { at: INSTANT, firmId: UUID, keyId: HASH, previousKeyId: HASH, publicKey: /^[A-Za-z\d+/]{59}=$/ };
const SEAL = { at: INSTANT, firmId: UUID, hash: HASH, keyId: HASH, sequence: COUNT };
const SPKI_OF_ED25519 = '302a300506032b6570032100';

/** What is wrong: `code` is a key of FAULTS, `sequence` the first record that is not as it was. */
export class Fault extends Error {
  name = 'Fault';
  constructor(code, sequence = null, values = {}) {
    super(code);
    this.code = code;
    this.sequence = sequence;
    this.values = values;
  }
}

const utf8 = new TextEncoder();
const textOf = (bytes) => new TextDecoder().decode(bytes);
const bytesOfBase64 = (base64) => Uint8Array.from(atob(base64), (letter) => letter.charCodeAt(0));
const bytesOfHex = (hex) => Uint8Array.from(hex.match(/../g) ?? [], (pair) => Number.parseInt(pair, 16));
const DIGITS = new Int8Array(256).fill(-1);
for (const digit of '0123456789abcdef') DIGITS[digit.charCodeAt(0)] = Number.parseInt(digit, 16);

/** Writes the 32 bytes that 64 hexadecimal digits of a line stand for; false where there are none. */
function readHashAt(line, from, target, at) {
  let all = 0;
  for (let index = 0; index < 32; index++) {
    const high = DIGITS[line[from + 2 * index]];
    const low = DIGITS[line[from + 2 * index + 1]];
    all |= high | low;
    target[at + index] = (high << 4) | low;
  }
  return all >= 0;
}
function isSame(first, second) {
  for (let index = 0; index < 32; index++) if (first[index] !== second[index]) return false;
  return first.length === second.length;
}
function standsAt(line, from, text) {
  for (let index = 0; index < text.length; index++) if (line[from + index] !== text[index]) return false;
  return true;
}
const PAIRS = Array.from({ length: 256 }, (_, byte) => byte.toString(16).padStart(2, '0'));
function hexOf(bytes) {
  if (bytes.hexSlice) return bytes.hexSlice(0, bytes.length);
  let hex = '';
  for (let index = 0; index < bytes.length; index++) hex += PAIRS[bytes[index]];
  return hex;
}
const ofType = (type) => utf8.encode(`"type":"${type}"}`);
const SEAL_END = ofType('seal');
const KEY_END = ofType('sealKey');
const endsWith = (bytes, ending) => standsAt(bytes, bytes.length - ending.length, ending);

function parsed(bytes, fault) {
  try {
    return JSON.parse(textOf(bytes));
  } catch {
    throw fault;
  }
}

/** The object, if it has exactly these names and each value is a text of this form (null only where `orNull` says so). */
function shaped(object, shape, fault, orNull = null) {
  const names = Object.keys(object ?? {});
  const fits = (name) => {
    const value = object[name];
    return name in shape && (value === null ? name === orNull : typeof value === 'string' && shape[name].test(value));
  };
  if (names.length !== Object.keys(shape).length || !names.every(fits)) throw fault;
  return object;
}

/** RFC 8785 of an object that `shaped` let through: ASCII texts that need no escape. */
const signedText = (object) => utf8.encode(JSON.stringify(object, Object.keys(object).sort()));

/**
 * The chain of one firm, record after record, in constant memory. `tools.sha256(bytes)` gives 32 bytes,
 * `tools.verify(publicKey, message, signature)` is Ed25519 over raw bytes.
 */
export class Chain {
  /** Seal and key records as texts, for the copies beside. */
  seals = [];
  keys = [];
  #tools;
  #options;
  #block = new Uint8Array(72);
  #view = new DataView(this.#block.buffer);
  #hash = new Uint8Array(32);
  #sequence = 0;
  #content = null;
  #key = null;
  #vouched = false;
  #lostAt = null;
  #found = { records: 0, whole: 0, words: 0, erased: 0, seals: 0, sealed: null, keys: [], unsignedKeys: [] };

  constructor(tools, options = {}) {
    this.#tools = tools;
    this.#options = options;
  }

  /**
   * `hash` and `contentHash` are 32 bytes each. `content`: bytes of the record's text, or null with `contentHash` where only
   * that is known. Given both, both count.
   */
  add(sequence, hash, content, contentHash = null) {
    const due = this.#sequence + 1;
    if (sequence > due) throw new Fault('missing', due, { found: sequence });
    if (sequence < due) throw new Fault('repeated', due, { found: sequence });
    const inner = content ? this.#tools.sha256(content) : contentHash;
    if (content && contentHash && !isSame(inner, contentHash)) throw new Fault('textChanged', sequence);
    this.#view.setUint32(0, Math.floor(sequence / 2 ** 32));
    this.#view.setUint32(4, sequence >>> 0);
    this.#block.set(inner, 40);
    const outer = this.#tools.sha256(this.#block);
    if (!isSame(outer, hash)) throw new Fault('doesNotFollow', sequence);
    if (content && endsWith(content, SEAL_END)) this.#addSeal(sequence, content);
    if (content && endsWith(content, KEY_END)) this.#addKey(sequence, content);
    const { knownHead } = this.#options;
    if (knownHead?.sequence === sequence && knownHead.hash !== hexOf(outer))
      throw new Fault('notTheKnownHead', this.#firstUnsealed(), { to: sequence });
    this.#block.set(outer, 8);
    this.#hash = outer;
    this.#sequence = sequence;
    this.#content = content;
    this.#found.records++;
    if (content) this.#found.whole++;
  }

  /** Words that stand beside the record added last; null: erased, and their hash stays in the record. */
  addWords(sequence, field, salt, content) {
    const fault = new Fault('wordsChanged', sequence);
    if (sequence !== this.#sequence || !this.#content) throw fault;
    if (content === null) {
      this.#found.erased++;
      return;
    }
    const hash = hexOf(this.#tools.sha256(Uint8Array.of(...bytesOfHex(salt), ...utf8.encode(content))));
    if (!textOf(this.#content).includes(`"${field}Hash":"${hash}"`)) throw fault;
    this.#found.words++;
  }

  #firstUnsealed = () => (this.#found.sealed?.record ?? 0) + 1;

  #addKey(sequence, content) {
    const fault = new Fault('keyFalse', sequence);
    const { key, signature } = parsed(content, fault);
    shaped(key, KEY, fault, 'previousKeyId');
    if (key.firmId !== (this.#options.firmId ?? key.firmId)) throw new Fault('ofAnotherFirm', sequence);
    const der = bytesOfBase64(key.publicKey);
    const isItself = der.length === 44 && hexOf(der).startsWith(SPKI_OF_ED25519);
    if (!isItself || hexOf(this.#tools.sha256(der)) !== key.keyId) throw fault;
    if (key.previousKeyId !== (this.#key?.keyId ?? null)) throw fault;
    const isHandedOn = this.#key !== null && signature !== null;
    if (isHandedOn && !this.#isSigned(key, this.#key, signature)) throw new Fault('keyNotSigned', sequence);
    if (this.#key !== null && !isHandedOn) this.#found.unsignedKeys.push(sequence);

    const isKnown = key.keyId === this.#options.keyFingerprint;
    if (this.#vouched && !isHandedOn && !isKnown) this.#lostAt = sequence;
    this.#vouched = isKnown || (this.#vouched && isHandedOn);
    if (this.#vouched) this.#lostAt = null;
    this.#key = { keyId: key.keyId, raw: der.subarray(12) };
    this.#found.keys.push({ keyId: key.keyId, at: key.at, record: sequence });
    this.keys.push(textOf(content));
  }

  #addSeal(sequence, content) {
    const fault = new Fault('sealNotSigned', sequence, { from: this.#firstUnsealed() });
    const { seal, signature } = parsed(content, fault);
    shaped(seal, SEAL, fault);
    if (seal.firmId !== (this.#options.firmId ?? seal.firmId)) throw new Fault('ofAnotherFirm', sequence);
    if (seal.keyId !== this.#key?.keyId) throw new Fault('sealKeyUnknown', sequence);
    if (!this.#isSigned(seal, this.#key, signature)) throw fault;
    if (Number(seal.sequence) !== this.#sequence || seal.hash !== hexOf(this.#hash))
      throw new Fault('sealedOtherwise', this.#firstUnsealed(), { to: sequence, at: seal.at, sealed: seal.sequence });
    this.#found.seals++;
    this.#found.sealed = {
      sequence: this.#sequence,
      hash: seal.hash,
      at: seal.at,
      keyId: seal.keyId,
      record: sequence,
    };
    this.seals.push(textOf(content));
  }

  #isSigned(object, { raw }, signature) {
    if (typeof signature !== 'string' || !/^[A-Za-z\d+/]{86}==$/.test(signature)) return false;
    return this.#tools.verify(raw, signedText(object), bytesOfBase64(signature));
  }

  /** What was found, after the last record. */
  finish() {
    const { keyFingerprint, knownHead } = this.#options;
    const { keys, sealed } = this.#found;
    if (knownHead && knownHead.sequence > this.#sequence)
      throw new Fault('cutOff', this.#sequence + 1, { known: knownHead.sequence });
    if (keyFingerprint && !keys.some(({ keyId }) => keyId === keyFingerprint))
      throw new Fault('otherSigner', keys[0]?.record ?? 1);
    if (this.#lostAt) throw new Fault('signerLost', this.#lostAt);
    return {
      ...this.#found,
      head: { sequence: this.#sequence, hash: hexOf(this.#hash) },
      signer: keyFingerprint && sealed ? 'checked' : 'notChecked',
      end: knownHead ? 'checked' : 'notChecked',
    };
  }
}

const [WORDS, SEQUENCE, HASH_NAME, CONTENT, CONTENT_HASH] = [
  '{"words":',
  '{"sequence":',
  ',"hash":"',
  '","content":',
  '","contentHash":"',
].map((text) => utf8.encode(text));
const LONGEST_LINE = 8_000_000;
const hashOfLine = new Uint8Array(32);
const contentHashOfLine = new Uint8Array(32);

/** One line of records.jsonl. The content is taken as the bytes that stand there, not read and written again. */
function addLine(chain, line, fault) {
  if (standsAt(line, 0, WORDS)) return addWords(chain, parsed(line, fault()), fault);
  if (!standsAt(line, 0, SEQUENCE)) throw fault();
  let at = SEQUENCE.length;
  let sequence = 0;
  for (; line[at] >= 0x30 && line[at] <= 0x39 && at < SEQUENCE.length + 15; at++)
    sequence = sequence * 10 + line[at] - 0x30;
  if (!standsAt(line, at, HASH_NAME) || !readHashAt(line, at + HASH_NAME.length, hashOfLine, 0)) throw fault();
  at += HASH_NAME.length + 64;
  if (standsAt(line, at, CONTENT)) {
    const from = at + CONTENT.length;
    if (line[from] !== 0x7b || line[line.length - 1] !== 0x7d) throw fault();
    return chain.add(sequence, hashOfLine, line.subarray(from, line.length - 1));
  }
  const from = at + CONTENT_HASH.length;
  const isHash = standsAt(line, at, CONTENT_HASH) && readHashAt(line, from, contentHashOfLine, 0);
  if (!isHash || line.length !== from + 66 || line[from + 64] !== 0x22 || line[from + 65] !== 0x7d) throw fault();
  chain.add(sequence, hashOfLine, null, contentHashOfLine);
}

function addWords(chain, { words, field, salt, content }, fault) {
  const isText = typeof content === 'string' && /^[0-9a-f]{2,200}$/.test(salt);
  if (!/^\w{1,60}$/.test(field) || !(isText || content === null)) throw fault();
  chain.addWords(words, field, salt, content);
}

function joined(first, second) {
  if (globalThis.Buffer) return Buffer.concat([first, second]);
  const both = new Uint8Array(first.length + second.length);
  both.set(first);
  both.set(second, first.length);
  return both;
}

/** Calls `take` with each line, which lies in the chunk itself: it is not copied. */
async function eachLine(chunks, take) {
  let rest = null;
  for await (const chunk of chunks) {
    const bytes = rest ? joined(rest, chunk) : chunk;
    let from = 0;
    for (let to = bytes.indexOf(10); to !== -1; to = bytes.indexOf(10, from)) {
      take(bytes.subarray(from, to));
      from = to + 1;
    }
    rest = from < bytes.length ? bytes.subarray(from) : null;
    if (rest && rest.length > LONGEST_LINE) throw new Fault('notReadable');
  }
  if (rest) take(rest);
}

/** `files.open(name)` gives a file's bytes in chunks, or null where there is none. */
async function readWhole(files, name, longest = 200_000_000) {
  const chunks = files.open(name);
  if (!chunks) throw new Fault('noFile', null, { file: name });
  let whole = new Uint8Array(0);
  for await (const chunk of chunks) {
    whole = joined(whole, chunk);
    if (whole.length > longest) throw new Fault('notReadable', null, { file: name });
  }
  return whole;
}

/**
 * Checks a package. Throws the first Fault; otherwise says what was found, and what could not be checked for want of a
 * fingerprint (`signer`) or a known head (`end`).
 * @param options `keyFingerprint` (64 hexadecimal digits), `knownHead` ({ sequence, hash }), `onProgress(records, of)`
 */
export async function checkPackage(files, tools, { keyFingerprint, knownHead, onProgress } = {}) {
  const unreadable = new Fault('notReadable', null, { file: 'proof.json' });
  const proof = parsed(await readWhole(files, 'proof.json', 1_000_000), unreadable);
  if (proof?.format !== 'tarewright-proof-1' || !UUID.test(proof.firmId) || !Number.isSafeInteger(proof.records))
    throw unreadable;

  const chain = new Chain(tools, { firmId: proof.firmId, keyFingerprint, knownHead });
  const records = files.open('records.jsonl');
  if (!records) throw new Fault('noFile', null, { file: 'records.jsonl' });
  let lines = 0;
  const unreadableLine = () => new Fault('notReadable', null, { file: `records.jsonl:${lines}` });
  await eachLine(records, (line) => {
    lines++;
    addLine(chain, line, unreadableLine);
    if (lines % 20_000 === 0) onProgress?.(lines, proof.records);
  });
  const found = chain.finish();
  const { sequence, hash } = found.head;
  if (sequence !== proof.records || hash !== proof.hash)
    throw new Fault('notThatMany', sequence + 1, { told: proof.records });
  if (found.sealed?.record !== sequence) throw new Fault('noSealAtEnd', (found.sealed?.record ?? 0) + 1);
  for (const [file, copies] of [
    ['seals.jsonl', chain.seals],
    ['public-keys.jsonl', chain.keys],
  ]) {
    const whole = textOf(await readWhole(files, file));
    if (whole !== copies.map((copy) => `${copy}\n`).join('')) throw new Fault('copyDiffers', null, { file });
  }
  return { ...found, proof };
}

/**
 * The files of a zip, read from its directory at the end. `source` has `size`, `read(from, to)` and `stream(from, to)`;
 * `tools.inflate(chunks)` undoes "deflate". Stored and deflated files, sizes past 4 GB too; nothing else is needed.
 */
export async function openZip(source, tools) {
  const unreadable = new Fault('notReadable', null, { file: 'zip' });
  const view = async (from, to) => {
    const bytes = await source.read(from, Math.min(to, source.size));
    return { bytes, data: new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength) };
  };
  const tailFrom = Math.max(0, source.size - 65_557);
  const tail = await view(tailFrom, source.size);
  let at = tail.bytes.length - 22;
  while (at >= 0 && tail.data.getUint32(at, true) !== 0x06054b50) at--;
  if (at < 0) throw unreadable;
  let count = tail.data.getUint16(at + 10, true);
  let size = tail.data.getUint32(at + 12, true);
  let offset = tail.data.getUint32(at + 16, true);
  if (at >= 20 && tail.data.getUint32(at - 20, true) === 0x07064b50) {
    const end = Number(tail.data.getBigUint64(at - 12, true));
    const { data } = await view(end, end + 56);
    if (data.byteLength < 56 || data.getUint32(0, true) !== 0x06064b50) throw unreadable;
    [count, size, offset] = [32, 40, 48].map((place) => Number(data.getBigUint64(place, true)));
  }
  if (count > 1000 || size > 1_000_000 || offset + size > source.size) throw unreadable;
  const entries = new Map();
  const { bytes, data } = await view(offset, offset + size);
  for (let from = 0; from + 46 <= bytes.length && data.getUint32(from, true) === 0x02014b50; ) {
    const [nameLength, extraLength, commentLength] = [28, 30, 32].map((place) => data.getUint16(from + place, true));
    const name = textOf(bytes.subarray(from + 46, from + 46 + nameLength));
    const entry = {
      method: data.getUint16(from + 10, true),
      packed: data.getUint32(from + 20, true),
      unpacked: data.getUint32(from + 24, true),
      header: data.getUint32(from + 42, true),
    };
    let extra = from + 46 + nameLength;
    for (const end = extra + extraLength; extra + 4 <= end; extra += 4 + data.getUint16(extra + 2, true)) {
      if (data.getUint16(extra, true) !== 1) continue;
      let place = extra + 4;
      for (const field of ['unpacked', 'packed', 'header']) {
        if (entry[field] !== 0xffffffff) continue;
        entry[field] = Number(data.getBigUint64(place, true));
        place += 8;
      }
    }
    if (entries.has(name)) throw unreadable;
    entries.set(name, entry);
    from += 46 + nameLength + extraLength + commentLength;
  }
  if (entries.size !== count) throw unreadable;
  async function* chunksOf({ method, packed, header }) {
    const local = await view(header, header + 30);
    if (local.data.byteLength < 30 || local.data.getUint32(0, true) !== 0x04034b50) throw unreadable;
    const from = header + 30 + local.data.getUint16(26, true) + local.data.getUint16(28, true);
    const chunks = source.stream(from, from + packed);
    if (method !== 0 && method !== 8) throw unreadable;
    try {
      yield* method === 0 ? chunks : tools.inflate(chunks);
    } catch (error) {
      throw error instanceof Fault ? error : unreadable;
    }
  }
  return { open: (name) => (entries.has(name) ? chunksOf(entries.get(name)) : null) };
}

const FAULTS = {
  en: {
    missing: 'Record {sequence} is missing: record {found} stands in its place.',
    repeated: 'Record {found} stands where record {sequence} is due: put in twice, or out of order.',
    textChanged: 'The text of record {sequence} is not the one that was hashed.',
    doesNotFollow:
      'The hash of record {sequence} does not follow from its content and the record before it: changed, put in, taken out or exchanged.',
    sealedOtherwise: 'From record {sequence} on, up to {to}, the records are not those sealed on {at}: written anew.',
    sealNotSigned:
      'The seal in record {sequence} is not signed by its key: the seal, or something from record {from} on, was written anew.',
    sealKeyUnknown: 'The seal in record {sequence} is by a key that was not the current one.',
    ofAnotherFirm: 'Record {sequence} is of another firm.',
    keyFalse:
      'The public key in record {sequence} is not the one that it is named after, or does not follow the key before.',
    keyNotSigned: 'The new public key in record {sequence} is not signed by the key before it.',
    otherSigner:
      'No key has the fingerprint that you gave: somebody else signed this (first key in record {sequence}).',
    signerLost: 'From record {sequence} on, a key signs that the one you know does not vouch for.',
    notTheKnownHead:
      'From record {sequence} on, up to {to}, the records are not those of the head that you know: written anew.',
    cutOff: 'The log ends before record {sequence}, and you know of record {known}: its end was cut off.',
    notThatMany: 'The package says that it holds {told} records and ends otherwise, before record {sequence}.',
    noSealAtEnd: 'No seal covers record {sequence} and what follows: the end was cut off or added to.',
    wordsChanged: 'The words beside record {sequence} are not those that it holds the hash of.',
    copyDiffers: '{file} does not say what the records say.',
    noFile: '{file} is missing.',
    notReadable: '{file} cannot be read: damaged, or no proof package.',
  },
  es: {
    missing: 'Falta el apunte {sequence}: en su lugar está el apunte {found}.',
    repeated: 'El apunte {found} está donde corresponde el {sequence}: repetido o fuera de orden.',
    textChanged: 'El texto del apunte {sequence} no es el que se resumió.',
    doesNotFollow:
      'El resumen del apunte {sequence} no se sigue de su contenido y del apunte anterior: cambiado, añadido, quitado o intercambiado.',
    sealedOtherwise:
      'Desde el apunte {sequence} hasta el {to}, los apuntes no son los sellados el {at}: escritos de nuevo.',
    sealNotSigned:
      'El sello del apunte {sequence} no está firmado por su clave: el sello, o algo desde el apunte {from}, se escribió de nuevo.',
    sealKeyUnknown: 'El sello del apunte {sequence} es de una clave que no era la vigente.',
    ofAnotherFirm: 'El apunte {sequence} es de otra empresa.',
    keyFalse: 'La clave pública del apunte {sequence} no es la que su nombre dice, o no sigue a la anterior.',
    keyNotSigned: 'La clave pública nueva del apunte {sequence} no está firmada por la anterior.',
    otherSigner: 'Ninguna clave tiene la huella indicada: firmó otra persona (primera clave en el apunte {sequence}).',
    signerLost: 'Desde el apunte {sequence} firma una clave que la que usted conoce no avala.',
    notTheKnownHead:
      'Desde el apunte {sequence} hasta el {to}, los apuntes no son los del final que usted conoce: escritos de nuevo.',
    cutOff: 'El registro termina antes del apunte {sequence} y usted conoce el apunte {known}: se cortó el final.',
    notThatMany: 'El paquete dice contener {told} apuntes y termina de otro modo, antes del apunte {sequence}.',
    noSealAtEnd: 'Ningún sello cubre el apunte {sequence} ni lo que sigue: se cortó o se añadió el final.',
    wordsChanged: 'Las palabras junto al apunte {sequence} no son aquellas cuyo resumen contiene.',
    copyDiffers: '{file} no dice lo que dicen los apuntes.',
    noFile: 'Falta {file}.',
    notReadable: '{file} no se puede leer: dañado, o no es un paquete de prueba.',
  },
};
const SENTENCES = {
  en: {
    intact: 'intact',
    notIntact: 'NOT INTACT',
    about: 'About (as the package says of itself): {about}',
    counts: '{records} records, {whole} of them whole, the others as hashes only.',
    words: '{words} texts beside the records fit them; {erased} were erased since.',
    sealed: 'Sealed up to record {sequence} at {at}; {seals} seals.',
    key: 'Key that signed last: {key}',
    head: 'Head: {sequence}:{hash}',
    signerChecked: 'The signer has the key that you know, or one that it vouches for.',
    endChecked: 'The head that you know is in it.',
    cannot: 'What this cannot tell:',
    signer: '- who signed: compare the key with one from an earlier print or mail (--key-fingerprint).',
    end: '- whether records after the last seal were cut off: give a head that you know (--known-head).',
    unsigned: '- who made the new key in record {record}: the key before it did not sign it.',
    clock: '- whether the clocks were right: times are those of the server, and those that people gave.',
    truth:
      '- whether what was recorded is true, and what the records stand for that are hashes here; PDF and README are for reading only.',
    usage: 'node verify.mjs [package.zip or folder] [--key-fingerprint F] [--known-head SEQUENCE:HASH] [--es]',
  },
  es: {
    intact: 'intacto',
    notIntact: 'NO INTACTO',
    about: 'Trata de (según el propio paquete): {about}',
    counts: '{records} apuntes, {whole} de ellos completos, los demás solo como resúmenes.',
    words: '{words} textos junto a los apuntes concuerdan; {erased} se borraron después.',
    sealed: 'Sellado hasta el apunte {sequence} el {at}; {seals} sellos.',
    key: 'Clave que firmó la última vez: {key}',
    head: 'Final: {sequence}:{hash}',
    signerChecked: 'Quien firmó tiene la clave que usted conoce, o una que ella avala.',
    endChecked: 'El final que usted conoce está incluido.',
    cannot: 'Lo que esto no puede decir:',
    signer: '- quién firmó: compare la clave con la de un impreso o correo anterior (--key-fingerprint).',
    end: '- si se cortaron apuntes después del último sello: indique un final que conozca (--known-head).',
    unsigned: '- quién hizo la clave nueva del apunte {record}: la anterior no la firmó.',
    clock: '- si los relojes estaban bien: las horas son las del servidor y las que dieron las personas.',
    truth:
      '- si lo anotado es cierto, ni qué dicen los apuntes que aquí son resúmenes; PDF y README son solo para leer.',
    usage: 'node verify.mjs [paquete.zip o carpeta] [--key-fingerprint H] [--known-head NÚMERO:RESUMEN] [--es]',
  },
};

/** Everything that can be wrong. */
export const FAULT_CODES = Object.keys(FAULTS.en);

/** 64 hexadecimal digits in groups of four, as fingerprints are printed. */
export const grouped = (hex) => (hex.match(/.{1,4}/g) ?? []).join('-');
/** What a person typed or pasted of a fingerprint or hash: 64 digits in lower case, or null. */
export function readHash(typed) {
  const hash = String(typed)
    .replaceAll(/[\s:.-]/g, '')
    .toLowerCase();
  return HASH.test(hash) ? hash : null;
}
/** `SEQUENCE:HASH`, or null. */
export function readHead(typed) {
  const [, sequence, rest] = /^\s*(\d{1,15})\s*:(.*)$/s.exec(String(typed)) ?? [];
  const hash = readHash(rest);
  return hash && Number(sequence) > 0 ? { sequence: Number(sequence), hash } : null;
}

const filled = (sentence, values) => sentence.replaceAll(/\{(\w+)\}/g, (_, name) => String(values[name] ?? '?'));

/** What a package says of itself, in one line and without anything that would move a terminal's cursor. */
const plain = (said) =>
  String(said)
    .replaceAll(/\p{C}+/gu, ' ')
    .slice(0, 200);

/** What is printed, line by line; `found` is a Fault or what `checkPackage` says. */
export function report(found, language = 'en') {
  const say = (key, values = {}) => filled(SENTENCES[language][key], values);
  if (found instanceof Fault)
    return [say('notIntact'), filled(FAULTS[language][found.code], { ...found.values, sequence: found.sequence })];
  const { sealed, signer, end, proof, unsignedKeys } = found;
  return [
    say('intact'),
    say('about', { about: plain(proof.about?.label) }),
    say('counts', found),
    ...(found.words + found.erased > 0 ? [say('words', found)] : []),
    say('sealed', { ...sealed, seals: found.seals }),
    say('key', { key: grouped(sealed.keyId) }),
    say('head', found.head),
    ...(signer === 'checked' ? [say('signerChecked')] : []),
    ...(end === 'checked' ? [say('endChecked')] : []),
    say('cannot'),
    ...(signer === 'checked' ? [] : [say('signer')]),
    ...(end === 'checked' ? [] : [say('end')]),
    ...unsignedKeys.map((record) => say('unsigned', { record })),
    say('clock'),
    say('truth'),
  ];
}

/** Node.js' own hashing, signatures, files and zlib, loaded when asked for, so that a browser never looks for them. */
const load = (name) => import(/* @vite-ignore */ `node:${name}`);

export async function nodeTools() {
  const [crypto, zlib, { Readable }] = await Promise.all([load('crypto'), load('zlib'), load('stream')]);
  const keyOf = (raw) =>
    crypto.createPublicKey({ key: joined(bytesOfHex(SPKI_OF_ED25519), raw), format: 'der', type: 'spki' });
  return {
    sha256: crypto.hash
      ? (bytes) => crypto.hash('sha256', bytes, 'buffer')
      : (bytes) => crypto.createHash('sha256').update(bytes).digest(),
    verify: (raw, message, signature) => crypto.verify(null, message, keyOf(raw), signature),
    inflate: (chunks) => Readable.from(chunks).pipe(zlib.createInflateRaw({ chunkSize: 262_144 })),
  };
}

/** The files of a package on disk: a zip or the folder that it was unpacked to. */
export async function openPath(path, tools) {
  const fs = await load('fs');
  if (fs.statSync(path).isDirectory()) {
    const place = (name) => `${path}/${name}`;
    return {
      open: (name) =>
        fs.existsSync(place(name)) ? fs.createReadStream(place(name), { highWaterMark: 262_144 }) : null,
    };
  }
  const descriptor = fs.openSync(path, 'r');
  const read = (from, to) => {
    const bytes = Buffer.alloc(Math.max(0, to - from));
    return bytes.subarray(0, fs.readSync(descriptor, bytes, 0, bytes.length, from));
  };
  const stream = (start, to) =>
    to > start ? fs.createReadStream(path, { start, end: to - 1, highWaterMark: 262_144 }) : [];
  return openZip({ size: fs.fstatSync(descriptor).size, read, stream }, tools);
}

/** What was typed behind the program's name, or null where it is not usable. */
function readWords(words) {
  const options = { path: null };
  const readers = { '--key-fingerprint': ['keyFingerprint', readHash], '--known-head': ['knownHead', readHead] };
  const rest = words.filter((word) => word !== '--es');
  while (rest.length > 0) {
    const word = rest.shift();
    const [name, read] = readers[word] ?? ['path', (text) => (text.startsWith('--') ? null : text)];
    const value = read(readers[word] ? rest.shift() : word);
    if (value === null || options[name]) return null;
    options[name] = value;
  }
  return options;
}

async function main(words) {
  const language = words.includes('--es') ? 'es' : 'en';
  const options = readWords(words);
  if (!options) return { lines: [SENTENCES[language].usage], status: 2 };
  try {
    const [{ dirname }, { fileURLToPath }, tools] = await Promise.all([load('path'), load('url'), nodeTools()]);
    const files = await openPath(options.path ?? dirname(fileURLToPath(import.meta.url)), tools);
    return { lines: report(await checkPackage(files, tools, options), language), status: 0 };
  } catch (error) {
    if (error instanceof Fault) return { lines: report(error, language), status: 1 };
    return { lines: [String(error?.message)], status: 2 };
  }
}

/** Whatever this file is called, and through whatever link: started by itself, and not imported by another program. */
async function isStarted() {
  const started = globalThis.process?.argv?.[1];
  if (!started) return false;
  const [{ readFileSync, realpathSync }, { fileURLToPath }] = await Promise.all([load('fs'), load('url')]);
  try {
    const file = realpathSync(started);
    // A program that this file was packed into lies in one file with it, and does not begin as it does.
    return (
      file === realpathSync(fileURLToPath(import.meta.url)) &&
      /^#!.*\r?\n\/\*\*\r?\n \* Checks a Tarewright proof package/.test(readFileSync(file, 'utf8'))
    );
  } catch {
    return false;
  }
}

void isStarted().then(async (isProgram) => {
  if (!isProgram) return;
  const { lines, status } = await main(process.argv.slice(2));
  for (const line of lines) console.log(line);
  process.exitCode = status;
});
