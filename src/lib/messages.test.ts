import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { beforeAll, describe, expect, it } from 'vitest';
import { cutSentence } from '../../shared/messages/sentence-pieces.ts';
import { hasMessage, loadMessages, startMessages, translate } from './messages.ts';
import { changePreferences, preferencesFor } from './preferences.ts';

const FOLDER = 'shared/messages';
const files = readdirSync(FOLDER).filter((name) => name.endsWith('.json'));
const parts = [...new Set(files.map((name) => name.replace(/\.(en|es)\.json$/, '')))];
const read = (part: string, language: string): Record<string, string> =>
  JSON.parse(readFileSync(path.join(FOLDER, `${part}.${language}.json`), 'utf8'));
/** Spanish has one plural form more (`many`, for millions); English need not have it. */
const comparable = (messages: Record<string, string>) => Object.keys(messages).filter((key) => !key.endsWith('_many'));
const params = (message: string) => [...message.matchAll(/\{\{(\w+)/g)].map(([, name]) => name).sort();

describe.each(parts)('The messages of %s', (part) => {
  it('are the same in English and Spanish', () => {
    expect(comparable(read(part, 'es')).sort()).toEqual(comparable(read(part, 'en')).sort());
  });

  it('take the same values in both languages', () => {
    const es = read(part, 'es');
    for (const [key, message] of Object.entries(read(part, 'en'))) {
      expect([key, ...new Set(params(es[key] ?? ''))]).toEqual([key, ...new Set(params(message))]);
    }
  });
});

describe('Every message that a screen asks for by its key', () => {
  const known = new Set(parts.flatMap((part) => Object.keys(read(part, 'en'))));
  const sources = readdirSync('src', { recursive: true, encoding: 'utf8' }).filter(
    (name) => /\.tsx?$/.test(name) && !/\.test\./.test(name),
  );

  it.each(sources)('is in the catalogue: %s', (name) => {
    const text = readFileSync(path.join('src', name), 'utf8');
    const asked = [...text.matchAll(/\b(?:t|translate)\(\s*'([^']+)'/g)].map(([, key]) => key as string);
    const missing = asked.filter((key) => !known.has(key) && !known.has(`${key}_other`));
    expect(missing).toEqual([]);
  });

  it.each(sources)('has at least one continuation where its end is chosen at run time: %s', (name) => {
    const text = readFileSync(path.join('src', name), 'utf8');
    const asked = [...text.matchAll(/\b(?:t|translate)\(\s*`([^`$]+)\$\{/g)].map(([, start]) => start as string);
    const missing = asked.filter((start) => ![...known].some((key) => key.startsWith(start)));
    expect(missing).toEqual([]);
  });
});

describe('Every sentence of the catalogue', () => {
  it.each(parts)('can be said with its values and a plural form alone: %s', (part) => {
    const texts = ['en', 'es'].flatMap((language) => Object.values(read(part, language)));
    expect(texts.filter((text) => cutSentence(text) === null)).toEqual([]);
  });
});

describe('A message', () => {
  beforeAll(async () => {
    changePreferences(preferencesFor('en-GB'));
    await startMessages();
  });

  it('has the plural form of its count', () => {
    expect(translate('frame.onHand', { count: 1 })).toBe('on hand in 1 cylinder');
    expect(translate('frame.onHand', { count: 38 })).toBe('on hand in 38 cylinders');
  });

  it('of a part that nobody has loaded is its key, until it is', async () => {
    expect([translate('log.title'), hasMessage('log.title')]).toEqual(['log.title', false]);
    await loadMessages('log-screen');
    expect([translate('log.title'), hasMessage('log.title')]).toEqual(['Log', true]);
  });

  it('is said in the other language for every loaded part, once the preference changes', async () => {
    changePreferences(preferencesFor('es-ES'));
    await loadMessages('log-screen');
    await expect.poll(() => document.documentElement.lang).toBe('es-ES');
    expect(translate('frame.onHand', { count: 1 })).toBe('existencias en 1 cilindro');
    expect(translate('log.title')).toBe(read('log-screen', 'es')['log.title']);
  });
});
