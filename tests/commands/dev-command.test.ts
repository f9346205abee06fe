import { chmodSync, existsSync, mkdtempSync, rmSync } from 'node:fs';
import path from 'node:path';
import { expect, it } from 'vitest';
import { ownServer, runCommand } from '../support/command.ts';

it('npm run dev serves client sources and API under one address, and ends cleanly', async () => {
  const home = mkdtempSync('/tmp/tarewright-home-');
  chmodSync(home, 0o711);
  const variables = await ownServer(home);
  const command = runCommand(['dev'], variables);
  try {
    await command.until('Ctrl-C stops it.');
    const address = `http://127.0.0.1:${variables.PORT}`;
    expect((await fetch(`${address}/api/v1/ready`)).status).toBe(200);
    expect(await (await fetch(address)).text()).toContain('/@vite/client'); // without it nothing reloads
    expect((await fetch(`${address}/src/main.tsx`)).headers.get('content-type')).toContain('javascript');
    command.child.kill('SIGINT');
    expect(await command.ended).toBe(0);
    expect(existsSync(path.join(home, 'lock'))).toBe(false);
  } finally {
    if (command.child.exitCode === null) command.child.kill('SIGTERM');
    await command.ended;
    rmSync(home, { recursive: true, force: true });
  }
});
