import { spawnSync } from 'node:child_process';
import { cpSync, mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { describe, expect, it } from 'vitest';

interface Diagnostic {
  category: string;
  location: { path: string };
}

/**
 * Plants files under the checkout's own lint configuration and tells which rules speak about each. Every file gets a
 * number in front of its name, so that many may have one place.
 */
function lint(files: { place: string; content: string }[]): string[][] {
  const folder = mkdtempSync(path.join(tmpdir(), 'tarewright-lint-'));
  try {
    for (const configuration of ['.biome.json', '.biome'])
      cpSync(configuration, path.join(folder, configuration), { recursive: true });
    const planted = files.map(({ place, content }, index) => {
      const relative = path.join(path.dirname(place), `${index}-${path.basename(place)}`);
      mkdirSync(path.join(folder, path.dirname(place)), { recursive: true });
      writeFileSync(path.join(folder, relative), content);
      return relative;
    });
    const biome = path.resolve('node_modules/@biomejs/biome/bin/biome');
    const words = [biome, 'lint', '--reporter=json', '--max-diagnostics=none', '.'];
    const { stdout } = spawnSync(process.execPath, words, { cwd: folder, encoding: 'utf8' });
    const { diagnostics } = JSON.parse(stdout) as { diagnostics: Diagnostic[] };
    return planted.map((relative) =>
      diagnostics.filter(({ location }) => location.path.endsWith(relative)).map(({ category }) => category),
    );
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

const importing = ([place, specifier]: string[]) => ({
  place: place ?? '',
  content: `import { thing } from '${specifier}';\nexport const kept = thing;\n`,
});
const spokenOf = (cases: string[][], said: string[][]) => cases.map((words, index) => [...words, said[index]]);

describe('The import rules of DEVELOPERS.md, kept by lint', () => {
  const refused = [
    ['shared/charge/rate.ts', '../../server/app.ts'],
    ['shared/charge/rate.ts', '../../src/lib/dates.ts'],
    ['shared/charge/rate.ts', '../../tests/support/database.ts'],
    ['shared/charge/rate.ts', 'node:fs'],
    ['shared/charge/rate.ts', 'react'],
    ['shared/charge/rate.ts', 'express'],
    ['shared/charge/rate.ts', 'typeorm'],
    ['server/units/units.service.ts', '../../src/lib/dates.ts'],
    ['server/units/units.service.ts', '../../tests/support/database.ts'],
    ['server/units/units.service.ts', '../sites/sites.router.ts'],
    ['server/units/units.service.ts', '../sites/site.entity.ts'],
    ['server/units/units.router.ts', './units.repository.ts'],
    ['server/units/units.router.ts', './unit.entity.ts'],
    ['server/units/units.repository.ts', './units.service.ts'],
    ['server/units/units.repository.ts', '../sites/site.entity.ts'],
    ['src/features/units/unit-page.tsx', '../../../server/app.ts'],
    ['src/features/units/unit-page.tsx', '../cylinders/cylinder-page.tsx'],
    ['src/features/units/unit-page.tsx', '../../app/session.tsx'],
    ['src/features/units/unit-page.tsx', '../../routes.tsx'],
    ['src/api/units.ts', '../features/units/unit-page.tsx'],
    ['src/api/units.ts', '../ui/field.tsx'],
    ['src/ui/field.tsx', '../api/units.ts'],
    ['src/ui/field.tsx', '../features/units/unit-page.tsx'],
    ['src/lib/dates.ts', '../ui/field.tsx'],
    ['src/lib/dates.ts', '../api/units.ts'],
  ];
  const allowed = [
    ['shared/charge/rate.ts', '../units/mass.ts'],
    ['shared/charge/rate.ts', 'zod'],
    ['shared/charge/rate.test.ts', 'node:fs'],
    ['server/app.ts', './units/units.router.ts'],
    ['server/units/units.router.ts', './units.service.ts'],
    ['server/units/units.service.ts', '../sites/sites.repository.ts'],
    ['server/units/units.service.ts', '../../shared/units/mass.ts'],
    ['server/units/units.repository.ts', './unit.entity.ts'],
    ['server/database/data-source.ts', '../units/unit.entity.ts'],
    ['src/routes.tsx', './features/units/unit-page.tsx'],
    ['src/features/units/unit-page.tsx', './unit-form.tsx'],
    ['src/features/units/unit-page.tsx', '../../api/units.ts'],
    ['src/features/units/unit-page.tsx', '../../../shared/units/mass.ts'],
    ['src/ui/field.tsx', '../lib/dates.ts'],
    ['tests/e2e/job.test.ts', '../../server/main.ts'],
  ];

  it('refuse each way that the table forbids', () => {
    const said = lint(refused.map(importing));
    const rule = ['lint/style/noRestrictedImports'];
    expect(spokenOf(refused, said)).toEqual(refused.map((words) => [...words, rule]));
  });

  it('leave the ways open that the table allows', () => {
    const said = lint(allowed.map(importing));
    expect(spokenOf(allowed, said)).toEqual(allowed.map((words) => [...words, []]));
  });
});

describe('The habits of DEVELOPERS.md, kept by lint', () => {
  it('refuse the clock and randomness below the outermost parts', () => {
    const places = ['shared/charge/rate.ts', 'server/units/units.service.ts', 'src/features/units/unit-page.tsx'];
    const readings = ['Date.now()', 'new Date()', 'Math.random()', 'performance.now()'];
    const files = places.flatMap((place) =>
      readings.map((reading) => ({ place, content: `export const kept = ${reading};\n` })),
    );
    expect(lint(files)).toEqual(files.map(() => ['plugin']));
  });

  it('allow a date made of something handed in, and the clock in the outermost parts', () => {
    const madeOfText = {
      place: 'shared/charge/rate.ts',
      content: 'export const kept = (at: string) => new Date(at);\n',
    };
    const outermost = { place: 'server/main.ts', content: 'export const kept = () => new Date();\n' };
    expect(lint([madeOfText, outermost])).toEqual([[], []]);
  });

  it('refuse a promise that nobody waits for', () => {
    const content = 'async function post() {}\nexport function save() {\n  post();\n}\n';
    expect(lint([{ place: 'server/units/units.service.ts', content }])).toEqual([['lint/nursery/noFloatingPromises']]);
  });
});
