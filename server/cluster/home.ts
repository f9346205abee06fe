import { randomBytes } from 'node:crypto';
import {
  accessSync,
  chmodSync,
  constants,
  existsSync,
  mkdirSync,
  readFileSync,
  renameSync,
  rmSync,
  statSync,
  writeFileSync,
} from 'node:fs';
import path from 'node:path';
import { z } from 'zod';
import { StartRefusal } from '../commands/bootstrap/start-refusal.mjs';

/**
 * Makes the data folder and checks that this process can use it. Others may pass through it but not list it (0711):
 * PostgreSQL refuses root and runs inside as another user; what is secret in it has its own mode.
 * @throws StartRefusal with one line
 */
export function prepareHome(folder: string): void {
  try {
    makeFolders(folder);
    accessSync(folder, constants.R_OK | constants.W_OK | constants.X_OK);
    const probe = path.join(folder, `.probe-${process.pid}`);
    writeFileSync(probe, ''); // a read-only file system passes the check of rights for root
    rmSync(probe);
  } catch (error) {
    const { code, message } = error as NodeJS.ErrnoException;
    throw new StartRefusal(
      `The data folder ${folder} cannot be read and written (${code ?? message}): give it to this user, or set TAREWRIGHT_HOME to another folder.`,
    );
  }
}

/** Node.js' own `recursive` never ends where the system says ENOENT to everything, as in /proc. */
function makeFolders(folder: string): void {
  if (existsSync(folder)) return;
  if (path.dirname(folder) !== folder) makeFolders(path.dirname(folder));
  mkdirSync(folder, { mode: 0o711 });
}

const secret = z.string().min(20);
const secretsFile = z.strictObject({
  superuser: secret,
  owner: secret,
  app: secret,
  jobs: secret,
  backup: secret,
  session: secret,
  /** Shown at each start: the demo people's, made anew for each installation, so that no published password opens one. */
  demo: z.string().min(8),
});
/** Passwords of PostgreSQL's superuser and the four roles, the key that signs session cookies, the demo people's password. */
export type Secrets = z.output<typeof secretsFile>;

function makeSecrets(): Secrets {
  const random = () => randomBytes(24).toString('base64url');
  return {
    superuser: random(),
    owner: random(),
    app: random(),
    jobs: random(),
    backup: random(),
    session: random(),
    demo: `demo-${randomBytes(5).toString('hex')}`,
  };
}

/**
 * The generated secrets in `<home>/secrets.json` (mode 600), made on the first start.
 * @param recordsExist whether a database that needs the old ones is there: then they are never made anew
 * @throws StartRefusal when the file is lost, not readable or not what was written
 */
export function readSecrets(home: string, { recordsExist }: { recordsExist: boolean }): Secrets {
  const file = path.join(home, 'secrets.json');
  let text: string;
  try {
    text = readFileSync(file, 'utf8');
  } catch (error) {
    const { code } = error as NodeJS.ErrnoException;
    if (code !== 'ENOENT') throw new StartRefusal(`${file} cannot be read (${code}): give it back to this user.`);
    if (recordsExist)
      throw new StartRefusal(`${file} is missing, and the database beside it needs it: put it back from a backup.`);
    const secrets = makeSecrets();
    writeDurably(file, `${JSON.stringify(secrets, null, 2)}\n`, 0o600);
    return secrets;
  }
  const read = secretsFile.safeParse(parseJson(text));
  if (!read.success) throw new StartRefusal(`${file} is damaged: put it back from a backup.`);
  if ((statSync(file).mode & 0o077) !== 0) chmodSync(file, 0o600);
  return read.data;
}

export function parseJson(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return null;
  }
}

/** Whole or not at all, also through a power cut. */
export function writeDurably(file: string, text: string, mode: number): void {
  const beside = `${file}.new`;
  rmSync(beside, { force: true });
  writeFileSync(beside, text, { mode, flush: true });
  renameSync(beside, file);
}
