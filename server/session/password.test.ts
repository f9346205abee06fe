import { verify } from '@node-rs/argon2';
import { beforeEach, describe, expect, it, vi } from 'vitest';
import { hashPassword, verifyPassword } from './password.ts';

vi.mock('@node-rs/argon2', { spy: true });

describe('A password', () => {
  beforeEach(() => vi.clearAllMocks());

  it('is kept as argon2id with 19 MiB, two passes and one lane (OWASP Password Storage Cheat Sheet)', async () => {
    expect(await hashPassword('correct horse battery')).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/);
  });

  it('fits only its own hash', async () => {
    const kept = await hashPassword('correct horse battery');
    expect(await verifyPassword(kept, 'correct horse battery')).toBe(true);
    expect(await verifyPassword(kept, 'correct horse batter')).toBe(false);
    expect(await verifyPassword('no hash at all', 'correct horse battery')).toBe(false);
  });

  it('fits in whatever Unicode form the keyboard sends it', async () => {
    const kept = await hashPassword('contraseña larga número uno'.normalize('NFC'));
    expect(await verifyPassword(kept, 'contraseña larga número uno'.normalize('NFD'))).toBe(true);
  });

  it('of an account that does not exist is verified too, against a hash of the same cost, and never fits', async () => {
    expect(await verifyPassword(null, 'correct horse battery')).toBe(false);
    expect(vi.mocked(verify)).toHaveBeenCalledOnce();
    expect(vi.mocked(verify).mock.calls[0]?.[0]).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/);
  });
});
