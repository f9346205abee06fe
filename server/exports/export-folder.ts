import { createHash } from 'node:crypto';
import { createReadStream, createWriteStream } from 'node:fs';
import { mkdir, open, readdir, rename, rm, stat } from 'node:fs/promises';
import path from 'node:path';
import { Transform, type Writable } from 'node:stream';

/** The disk refused: full, read-only, no folder where one should be. Nobody's request is wrong. */
export class FolderRefusal extends Error {
  override readonly name = 'FolderRefusal';
}
const OF_THE_DISK = new Set([
  'EACCES',
  'EPERM',
  'EROFS',
  'ENOSPC',
  'EDQUOT',
  'ENOTDIR',
  'EEXIST',
  'ENOENT',
  'EIO',
  'EMFILE',
]);

export const isOfTheDisk = (error: unknown): boolean => {
  const { code, syscall } = error as NodeJS.ErrnoException;
  return syscall !== undefined && syscall !== 'connect' && OF_THE_DISK.has(String(code));
};

export interface WrittenFile {
  sizeBytes: number;
  /** Hex. */
  sha256: string;
}

/** One attempt at an export: only this one writes and removes its file, whoever else works on the same export. */
export interface AttemptFile {
  firmId: string;
  id: string;
  attempt: number;
}

const UUID = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/;
/** `<export>.<attempt>`, `.part` behind it while it is not finished; without an attempt, as an earlier version wrote it. */
const FILE = /^([0-9a-f]{8}(?:-[0-9a-f]{4}){3}-[0-9a-f]{12})(?:\.(\d+))?(?:\.part)?$/;

/** Finished files by the ids of firm and export and the attempt; what is not finished ends in `.part`. */
export function exportFolder(home: string) {
  const root = path.join(home, 'exports');
  const fileOf = ({ firmId, id, attempt }: AttemptFile) => path.join(root, firmId, `${id}.${attempt}`);
  return {
    /**
     * Writes a file whole or not at all: hashed on the way, synced, then renamed. `fill` hands the stream over to what
     * writes and ends it.
     * @throws FolderRefusal when the disk refuses
     */
    async write<T>(of: AttemptFile, fill: (stream: Writable) => Promise<T>): Promise<{ file: WrittenFile; value: T }> {
      const target = fileOf(of);
      const part = `${target}.part`;
      try {
        await mkdir(path.dirname(target), { recursive: true, mode: 0o700 });
        const handle = await open(part, 'w', 0o600);
        await handle.close();
        const hash = createHash('sha256');
        let sizeBytes = 0;
        const hashing = new Transform({
          transform(chunk: Buffer, _encoding, done) {
            hash.update(chunk);
            sizeBytes += chunk.length;
            done(null, chunk);
          },
        });
        const disk = createWriteStream(part, { flush: true });
        const written = new Promise<void>((resolve, reject) => {
          disk.once('close', resolve);
          disk.once('error', (error) => {
            hashing.destroy(error);
            reject(error);
          });
          hashing.once('error', (error) => {
            disk.destroy();
            reject(error);
          });
        });
        written.catch(() => undefined);
        hashing.pipe(disk);
        let value: T;
        try {
          value = await fill(hashing);
        } catch (error) {
          hashing.destroy();
          disk.destroy();
          throw error;
        }
        await written;
        await rename(part, target);
        return { file: { sizeBytes, sha256: hash.digest('hex') }, value };
      } catch (error) {
        await rm(part, { force: true }).catch(() => undefined);
        if (isOfTheDisk(error)) throw new FolderRefusal((error as Error).message, { cause: error });
        throw error;
      }
    },
    /** Null when the file is gone. */
    async read(of: AttemptFile) {
      for (const file of [fileOf(of), path.join(root, of.firmId, of.id)]) {
        const found = await stat(file).catch(() => null);
        if (found) return { sizeBytes: found.size, stream: () => createReadStream(file) };
      }
      return null;
    },
    async remove(of: AttemptFile): Promise<void> {
      await rm(fileOf(of), { force: true }).catch(() => undefined);
    },
    /** Everything that lies here, finished or not, by firm. Files of somebody else's making are left alone. */
    async list(): Promise<{ firmId: string; files: { name: string; id: string; attempt: number | null }[] }[]> {
      const firmIds = (await namesIn(root)).filter((name) => UUID.test(name));
      const found = await Promise.all(
        firmIds.map(async (firmId) => {
          const files = (await namesIn(path.join(root, firmId))).flatMap((name) => {
            const [, id, attempt] = FILE.exec(name) ?? [];
            return id === undefined ? [] : [{ name, id, attempt: attempt === undefined ? null : Number(attempt) }];
          });
          return { firmId, files };
        }),
      );
      return found.filter(({ files }) => files.length > 0);
    },
    async removeNamed(firmId: string, name: string): Promise<void> {
      await rm(path.join(root, firmId, name), { force: true }).catch(() => undefined);
    },
  };
}
export type ExportFolder = ReturnType<typeof exportFolder>;

const namesIn = (folder: string): Promise<string[]> => readdir(folder).catch(() => []);
