import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { cutSentence, sayPieces } from '../../shared/messages/sentence-pieces.ts';

const FOLDER = path.resolve(import.meta.dirname, '../../shared/messages');

export type Words = (key: string, values?: Record<string, string | number>) => string;

/** The sentences of the screens in one language, so that one walk through them serves both. A missing key throws. */
export function wordsIn(locale: 'en-GB' | 'es-ES'): Words {
  const language = locale.slice(0, 2);
  const texts = new Map<string, string>();
  for (const name of readdirSync(FOLDER).filter((each) => each.endsWith(`.${language}.json`))) {
    const file = JSON.parse(readFileSync(path.join(FOLDER, name), 'utf8')) as Record<string, string>;
    for (const [key, text] of Object.entries(file)) texts.set(key, text);
  }
  return (key, values = {}) => {
    const sentence = cutSentence(texts.get(key) ?? '');
    if (!sentence || sentence.length === 0) throw new Error(`no sentence ${key} in ${language}`);
    return sayPieces(sentence, locale, values);
  };
}
