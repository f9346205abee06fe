import type { EntityManager } from 'typeorm';
import type { VerificationResult } from '../../shared/proof/proof.schema.ts';
import { Chain, Fault, type Found, type KnownBefore, nodeTools } from '../../shared/proof/verify.mjs';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { messageFor } from '../messages/translate.ts';
import { findCurrentKey, type Head, readHead } from '../seals/seal.repository.ts';
import { heldKey, sealSecrets } from '../seals/seal-chain.ts';
import { findOtherRegisterRow } from './register-checks.ts';
import {
  countRecords,
  countRowsTold,
  findDifference,
  findOtherBook,
  findOtherHolder,
  findOtherWords,
  findRowWithoutRecord,
  NO_ROWS,
  planForRanges,
  readChain,
} from './verification.repository.ts';

/** Records read at a time: what is held in memory, whatever the length of the log. */
const AT_ONCE = 2_000;

export interface Verifying extends KnownBefore {
  onProgress(checked: number, of: number): void;
  /** The one who asked has gone: nothing more is read. */
  isGone(): boolean;
}

/** What only the server can find wrong: a table that says otherwise than the log. */
class LogFault extends Error {
  constructor(
    readonly code: string,
    readonly sequence: number | null,
    readonly values: Record<string, string | number>,
  ) {
    super(code);
  }
}

/**
 * Checks a firm's whole log as it stands in the database, in one snapshot and in constant memory: the chain and its
 * seals as the verifier of a package does, and that every table still says what the texts say.
 */
export function verifyLog(parts: Parts, actor: Actor, options: Verifying): Promise<VerificationResult> {
  const check = new Verification(parts, actor, options);
  return inFirm(parts.dataSource, actor, (manager) => check.run(manager), 'REPEATABLE READ');
}

class Verification {
  private readonly parts: Parts;
  private readonly actor: Actor;
  private readonly options: Verifying;
  private told = { ...NO_ROWS };
  private checked = 0;
  private bytes = 0;

  constructor(parts: Parts, actor: Actor, options: Verifying) {
    this.parts = parts;
    this.actor = actor;
    this.options = options;
  }

  async run(manager: EntityManager): Promise<VerificationResult> {
    await planForRanges(manager);
    const head = await readHead(manager);
    try {
      const found = await this.checkChain(manager, head);
      if (found === null) return this.result('brokenOff', head, null, null);
      await this.checkHead(manager, head, found);
      await this.checkKey(manager, found);
      await this.checkTables(manager);
      return this.result('intact', head, found, null);
    } catch (error) {
      if (!(error instanceof Fault || error instanceof LogFault)) throw error;
      return this.result('notIntact', head, null, error);
    }
  }

  /** Null when nobody waits for the answer any more. */
  private async checkChain(manager: EntityManager, head: Head): Promise<Found | null> {
    const { keyFingerprint, knownHead } = this.options;
    const chain = new Chain(await nodeTools(), { firmId: this.actor.firmId, keyFingerprint, knownHead });
    for (;;) {
      if (this.options.isGone()) return null;
      const rows = await readChain(manager, this.checked, AT_ONCE);
      const last = Number(rows.at(-1)?.sequence ?? 0);
      if (rows.length === 0) return chain.finish();
      let chainFault: unknown = null;
      let intactUpTo = this.checked;
      try {
        for (const { sequence, hash, content, contentHash } of rows) {
          const bytes = Buffer.from(content, 'utf8');
          this.bytes += bytes.length;
          chain.add(Number(sequence), hash, bytes, contentHash);
          intactUpTo = Number(sequence);
        }
      } catch (error) {
        chainFault = error;
      }
      // Texts up to there are what was recorded, so that the tables can be held against them: the first wrong one counts.
      await this.checkColumns(manager, intactUpTo);
      if (chainFault) throw chainFault;
      this.checked = last;
      this.options.onProgress(this.checked, head.sequence);
    }
  }

  private async checkColumns(manager: EntityManager, upTo: number): Promise<void> {
    const different = await findDifference(manager, this.checked, upTo);
    const words = await findOtherWords(manager, this.checked, upTo);
    if (words && words.sequence <= (different?.sequence ?? words.sequence))
      throw new Fault('wordsChanged', words.sequence);
    if (different) {
      const { sequence, ...values } = different;
      throw new LogFault(values.column === '' ? 'rowMissing' : 'columnDiffers', sequence, values);
    }
    const counts = await countRowsTold(manager, this.checked, upTo);
    for (const table of Object.keys(counts) as (keyof typeof counts)[]) this.told[table] += counts[table];
  }

  private async checkHead(manager: EntityManager, head: Head, found: Found): Promise<void> {
    if (found.head.sequence === head.sequence && (found.head.hash === head.hash || head.sequence === 0)) return;
    const values = { found: await countRecords(manager), told: head.sequence };
    throw new LogFault('headDiffers', Math.min(values.found, values.told) + 1, values);
  }

  private async checkKey(manager: EntityManager, found: Found): Promise<void> {
    const current = await findCurrentKey(manager);
    if (!current || heldKey(sealSecrets(this.parts), this.actor.firmId, current.content)) return;
    throw new LogFault('keyNotOurs', found.keys.at(-1)?.record ?? null, {});
  }

  private async checkTables(manager: EntityManager): Promise<void> {
    const row = await findRowWithoutRecord(manager, this.told);
    if (row) throw new LogFault('rowWithoutRecord', null, row);
    const book = await findOtherBook(manager);
    if (book) throw new LogFault('booksDiffer', null, book);
    const register = (await findOtherRegisterRow(manager)) ?? (await findOtherHolder(manager));
    if (!register) return;
    const { sequence, table, column, id } = register;
    if (sequence === null) throw new LogFault('rowWithoutRecord', null, { table, id });
    throw new LogFault(column === '' ? 'rowMissing' : 'columnDiffers', sequence, { table, column });
  }

  private result(
    result: VerificationResult['result'],
    head: Head,
    found: Found | null,
    fault: Fault | LogFault | null,
  ): VerificationResult {
    const { locale } = this.actor;
    return {
      result,
      records: this.checked,
      head,
      seals: found?.seals ?? 0,
      sealedUpTo: found?.sealed?.sequence ?? null,
      fault: fault && {
        code: fault.code,
        sequence: fault.sequence,
        values: { ...fault.values },
        message: messageFor(`proof.fault.${fault.code}`, locale, { ...fault.values, sequence: fault.sequence }),
      },
      bytes: this.bytes,
    };
  }
}
