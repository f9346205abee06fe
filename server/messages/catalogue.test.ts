import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { describe, expect, it } from 'vitest';
import { catalogueEn } from '../../shared/messages/catalogue-en.ts';
import { catalogueEs } from '../../shared/messages/catalogue-es.ts';
import { PROBLEM_STATUS } from '../../shared/problems/problem-codes.ts';
import { findMessage, messageFor } from './translate.ts';

const root = path.resolve(import.meta.dirname, '../..');
/** `items_one` and `items_other` are one sentence; a language has the plural forms that it needs. */
const sentenceOf = (key: string) => key.replace(/_(zero|one|two|few|many|other)$/, '');
const placeholdersOf = (text: string) => [...text.matchAll(/\{\{\s*(\w+)/g)].map((match) => String(match[1]));

function placeholdersBySentence(catalogue: Readonly<Record<string, string>>): Record<string, string[]> {
  const bySentence: Record<string, Set<string>> = {};
  for (const [key, text] of Object.entries(catalogue)) {
    bySentence[sentenceOf(key)] ??= new Set();
    for (const name of placeholdersOf(text)) bySentence[sentenceOf(key)]?.add(name);
  }
  return Object.fromEntries(Object.entries(bySentence).map(([key, names]) => [key, [...names].sort()]));
}

const folder = path.join(root, 'shared/messages');
const filesOf = (language: string) => readdirSync(folder).filter((name) => name.endsWith(`.${language}.json`));
const read = (name: string) => JSON.parse(readFileSync(path.join(folder, name), 'utf8')) as Record<string, string>;
/** The server's and the screens' sentences alike. */
const everySentence = (language: string) => Object.assign({}, ...filesOf(language).map(read)) as Record<string, string>;

describe('The message catalogue', () => {
  it('has every sentence in both languages, with the same values in it', () => {
    expect(placeholdersBySentence(everySentence('es'))).toEqual(placeholdersBySentence(everySentence('en')));
  });

  it('has no key in two files', () => {
    const keys = filesOf('en').flatMap((name) => Object.keys(read(name)));
    expect(keys.filter((key, index) => keys.indexOf(key) !== index)).toEqual([]);
  });

  it('has no empty sentence', () => {
    const sentences = [...Object.entries(everySentence('en')), ...Object.entries(everySentence('es'))];
    expect(sentences.filter(([, text]) => text.trim() === '')).toEqual([]);
  });

  it('gives the server the same keys in both languages', () => {
    expect(Object.keys(catalogueEs).map(sentenceOf).sort()).toEqual(Object.keys(catalogueEn).map(sentenceOf).sort());
  });

  it('says something for every whole-request refusal and every status it can have', () => {
    const keys = Object.entries(PROBLEM_STATUS).flatMap(([code, status]) => [
      `problem.${code}`,
      `problemTitle.${status}`,
    ]);
    expect(keys.filter((key) => !(key in catalogueEn))).toEqual([]);
  });

  it('says something for every code that appears in the code', () => {
    const sources = ['shared', 'server'].flatMap((folder) =>
      readdirSync(path.join(root, folder), { recursive: true, encoding: 'utf8' })
        .filter((name) => name.endsWith('.ts') && !name.endsWith('.test.ts'))
        .map((name) => path.join(root, folder, name)),
    );
    const codes = new Set(
      sources.flatMap((file) =>
        [...readFileSync(file, 'utf8').matchAll(/(?:\bcode: |new Problem\(\s*|refuse\(ctx, )'([a-z]\w+)'/g)].map(
          (match) => String(match[1]),
        ),
      ),
    );
    expect(codes.size).toBeGreaterThan(20);
    const known = (code: string) =>
      ['problem', 'warning', 'caution', 'policy', 'step', 'source', 'flag'].some(
        (kind) => `${kind}.${code}` in catalogueEn,
      );
    const zodCodes = new Set(['custom', 'invalid_union']);
    expect([...codes].filter((code) => !known(code) && !zodCodes.has(code)).sort()).toEqual([]);
  });
});

describe('A sentence', () => {
  it('writes numbers and lists in the form of the caller’s region', () => {
    expect(messageFor('problem.tooLarge', 'en-US', { given: 5, allowed: 1234.5 })).toContain('1,234.5');
    expect(messageFor('problem.tooLarge', 'es-ES', { given: 5, allowed: 12345.5 })).toContain('12.345,5');
    expect(messageFor('problem.notAllowedValue', 'en-US', { allowed: ['up', 'down'] })).toContain('up or down');
    expect(messageFor('problem.notAllowedValue', 'es-ES', { allowed: ['up', 'down'] })).toContain('up o down');
  });

  it('leaves what a person typed as it is, with nothing in it read as a placeholder or as markup', () => {
    expect(messageFor('problem.tooSmall', 'en-US', { given: '<b>{{allowed}}</b> & $t(x)', allowed: 3 })).toContain(
      '<b>{{allowed}}</b> & $t(x) is below the smallest value, 3',
    );
  });

  it('that does not exist is null and not another one', () => {
    expect(findMessage('problem.noSuchCode', 'es-ES')).toBeNull();
  });
});
