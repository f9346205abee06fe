import { readFileSync } from 'node:fs';

const names = new Map<string, string>();
for (const language of ['en', 'es']) {
  const file = JSON.parse(readFileSync(`shared/messages/columns.${language}.json`, 'utf8')) as Record<string, string>;
  for (const [key, head] of Object.entries(file)) {
    if (!names.has(head)) names.set(head, key.slice('column.'.length));
  }
}

/** The lines of a CSV by the names that their columns have in the API, whatever language their heads are in. */
export function linesByName(text: string): Record<string, string>[] {
  return readCsv(text).lines.map((line) =>
    Object.fromEntries(Object.entries(line).map(([head, cell]) => [names.get(head) ?? head, cell])),
  );
}

/** RFC 4180, as a spreadsheet reads it: each line by the names of the head. */
export function readCsv(text: string): { head: string[]; lines: Record<string, string>[] } {
  const rows: string[][] = [[]];
  let cell = '';
  let quoted = false;
  for (let index = 0; index < text.length; index++) {
    const sign = text[index];
    if (quoted && sign === '"' && text[index + 1] === '"') {
      cell += '"';
      index += 1;
    } else if (sign === '"') quoted = !quoted;
    else if (!quoted && (sign === ',' || sign === '\n')) {
      rows.at(-1)?.push(cell.replace(/\r$/, ''));
      cell = '';
      if (sign === '\n') rows.push([]);
    } else cell += sign;
  }
  const [head = [], ...lines] = rows.slice(0, -1);
  return { head, lines: lines.map((line) => Object.fromEntries(head.map((name, at) => [name, line[at] ?? '']))) };
}
