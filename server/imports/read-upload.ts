import { createHash } from 'node:crypto';
import busboy from 'busboy';
import type { Request } from 'express';
import { IMPORT_LIMITS, importKind, sizesInMegabytes } from '../../shared/imports/import.schema.ts';
import type { ImportKind } from '../../shared/imports/import-fields.ts';
import { Problem, problemOfRefusals } from '../http/problem.ts';
import { readCsv } from './read-csv.ts';
import { readXlsx } from './read-xlsx.ts';
import { refusedFile, type Table } from './table.ts';

export interface Upload {
  kind: ImportKind;
  fileName: string;
  sizeBytes: number;
  /** Of the file as it came, in hex. */
  sha256: string;
  table: Table;
}

/** `multipart/form-data` with `kind` and then `file`. What the file is follows from its bytes, not from its name. */
export async function readUpload(req: Request): Promise<Upload> {
  const { kind, fileName, bytes } = await readParts(req);
  const parsed = importKind.safeParse(kind);
  if (!parsed.success) throw problemOfRefusals([{ code: 'required', path: '/kind' }]);
  if (bytes === null) throw problemOfRefusals([{ code: 'required', path: '/file' }]);
  if (bytes.length === 0) throw refusedFile('importEmpty');
  const isZip = bytes.subarray(0, 4).equals(Buffer.from([0x50, 0x4b, 0x03, 0x04]));
  const table = isZip ? await readXlsx(bytes) : readCsv(bytes);
  const sha256 = createHash('sha256').update(bytes).digest('hex');
  return { kind: parsed.data, fileName, sizeBytes: bytes.length, sha256, table };
}

interface Parts {
  kind: string | null;
  fileName: string;
  bytes: Buffer | null;
}

function readParts(req: Request): Promise<Parts> {
  if (!req.is('multipart/form-data')) throw new Problem('unsupportedMediaType');
  return new Promise((resolve, reject) => {
    const found: Parts = { kind: null, fileName: '', bytes: null };
    let isTooLarge = false;
    let received = 0;
    req.on('data', (chunk: Buffer) => {
      received += chunk.length;
    });
    const form = busboy({
      headers: req.headers,
      defParamCharset: 'utf8',
      limits: { fileSize: IMPORT_LIMITS.fileBytes, files: 1, fields: 2, fieldSize: 100, parts: 3 },
    });
    form.on('field', (name, value) => {
      if (name === 'kind') found.kind = value;
    });
    form.on('file', (_name, stream, { filename }) => {
      const chunks: Buffer[] = [];
      found.fileName = String(filename ?? '')
        .replace(/[\p{Cc}\p{Cs}]/gu, '')
        .slice(0, 200);
      stream.on('data', (chunk: Buffer) => chunks.push(chunk));
      stream.on('limit', () => {
        isTooLarge = true;
        chunks.length = 0;
      });
      stream.on('end', () => {
        found.bytes = Buffer.concat(chunks);
      });
    });
    form.on('error', () => reject(new Problem('malformedRequest')));
    form.on('close', () => (isTooLarge ? reject(tooLarge(received)) : resolve(found)));
    req.on('aborted', () => reject(new Problem('malformedRequest')));
    req.pipe(form);
  });
}

/** The whole request is a little larger than its file. */
function tooLarge(bytes: number): Problem {
  const params = sizesInMegabytes(bytes);
  return new Problem('importTooLarge', {
    params,
    errors: [{ code: 'importTooLarge', path: '/file', ...params, params }],
  });
}
