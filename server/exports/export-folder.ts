import { createHash } from 'node:crypto';
import { createReadStream, createWriteStream } from 'node:fs';
import { mkdir, open, rename, rm, stat } from 'node:fs/promises';
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

/** Finished files by the ids of firm and export; what is not finished ends in `.part`. */
export function exportFolder(home: string) {
  const fileOf = (firmId: string, id: string) => path.join(home, 'exports', firmId, id);
  return {
    /**
     * Writes a file whole or not at all: hashed on the way, synced, then renamed. `fill` hands the stream over to what
     * writes and ends it.
     * @throws FolderRefusal when the disk refuses
     */
    async write<T>(
      firmId: string,
      id: string,
      fill: (stream: Writable) => Promise<T>,
    ): Promise<{ file: WrittenFile; value: T }> {
      const target = fileOf(firmId, id);
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
    async read(firmId: string, id: string) {
      const file = fileOf(firmId, id);
      const found = await stat(file).catch(() => null);
      return found ? { sizeBytes: found.size, stream: () => createReadStream(file) } : null;
    },
    async remove(firmId: string, id: string): Promise<void> {
      await rm(fileOf(firmId, id), { force: true }).catch(() => undefined);
    },
  };
}
export type ExportFolder = ReturnType<typeof exportFolder>;
