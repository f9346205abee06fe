import { copyFileSync, symlinkSync } from 'node:fs';
import path from 'node:path';
import { describe, expect, it } from 'vitest';
import { newFolder, runVerifier, trustedVerifier } from './packages.ts';

describe('The verifier under another name', () => {
  it.each(['check.mjs', 'verify (1).mjs', 'prüfen ✓.mjs', 'verify.mjs'])(
    'says what it found, and never passes over it in silence: %s',
    async (name) => {
      const verifier = path.join(newFolder(), name);
      copyFileSync(trustedVerifier, verifier);
      const noPackage = await runVerifier(newFolder(), [], verifier);
      expect(noPackage.status).not.toBe(0);
      expect(noPackage.lines[0]).not.toBe('');
      expect((await runVerifier('--what', [], verifier)).lines[0]).toContain('node verify.mjs');
    },
  );

  it('runs through a link too', async () => {
    const link = path.join(newFolder(), 'linked.mjs');
    symlinkSync(trustedVerifier, link);
    expect((await runVerifier(newFolder(), [], link)).status).not.toBe(0);
  });

  it('does nothing where another program imports it', async () => {
    const importer = path.join(newFolder(), 'verify.mjs');
    const { writeFileSync } = await import('node:fs');
    writeFileSync(importer, `await import(${JSON.stringify(trustedVerifier)}); console.log('nothing else');`);
    expect(await runVerifier('--what', [], importer)).toEqual({ status: 0, lines: ['nothing else'] });
  });
});
