import { expect, it } from 'vitest';
import { runCommand } from '../support/command.ts';

const lastLine = (output: string) => output.trimEnd().split('\n').at(-1);

it('npm test runs one file alone, and ends with its count and a true exit status', async () => {
  const command = runCommand(['test', 'server/commands/test-tally.test.ts'], {});
  expect(await command.ended).toBe(0);
  expect(lastLine(command.output())).toMatch(/^[1-9]\d* passed, 0 failed$/);
  expect(command.output()).not.toContain('Lint');
});

it('npm test fails when what it was to run does not exist', async () => {
  const command = runCommand(['test', 'shared/no-such-file.test.ts'], {});
  expect(await command.ended).toBe(1);
  expect(lastLine(command.output())).toBe('0 passed, 1 failed');
});
