import { createHash, randomBytes } from 'node:crypto';
import { chmodSync, mkdirSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { StartRefusal } from '../commands/bootstrap/start-refusal.mjs';

/** One line of the key file. The id is public and stands in the records of the keys that are derived from it. */
export interface SealSecret {
  id: string;
  bytes: Buffer;
}

const LINE = /^[0-9a-f]{64}$/;

const secretOf = (hex: string): SealSecret => {
  const bytes = Buffer.from(hex, 'hex');
  const id = createHash('sha256').update('tarewright seal secret').update(bytes).digest('hex').slice(0, 16);
  return { id, bytes };
};

/**
 * Reads the key file, outside of database and dump: 32 random bytes a line in hexadecimal, `#` before a remark. New keys
 * come from the last line; earlier lines stay for as long as keys derived from them are to be handed on. It is made,
 * readable by this user alone, where there is none: on the first start. Several servers share one (SEAL_KEY_FILE).
 * @throws StartRefusal with one line when it cannot be read or is not what was written
 */
export function readSealSecrets(file: string): SealSecret[] {
  let text: string;
  try {
    text = readOrMake(file);
    if ((statSync(file).mode & 0o077) !== 0) chmodSync(file, 0o600);
  } catch (error) {
    const { code, message } = error as NodeJS.ErrnoException;
    throw new StartRefusal(
      `The key file ${file} cannot be read or made (${code ?? message}): give it to this user, or set SEAL_KEY_FILE to another one.`,
    );
  }
  const lines = text
    .split('\n')
    .map((line) => line.trim())
    .filter((line) => line !== '' && !line.startsWith('#'));
  if (lines.length === 0 || !lines.every((line) => LINE.test(line)))
    throw new StartRefusal(`The key file ${file} is damaged: put it back from a backup.`);
  return lines.map(secretOf);
}

const REMARK =
  '# Signs the seals of the log. Keep a copy apart from the database, and let nobody read it. Never change a line:\n' +
  '# to replace it, add a new one below (openssl rand -hex 32), start again, and let each owner make a new key.\n';

function readOrMake(file: string): string {
  try {
    return readFileSync(file, 'utf8');
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code !== 'ENOENT') throw error;
  }
  mkdirSync(path.dirname(file), { recursive: true, mode: 0o700 });
  try {
    // Never over an existing one: of two servers that start at once, one makes it and the other reads it.
    writeFileSync(file, `${REMARK}${randomBytes(32).toString('hex')}\n`, { mode: 0o600, flag: 'wx', flush: true });
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code !== 'EEXIST') throw error;
  }
  return readFileSync(file, 'utf8');
}
