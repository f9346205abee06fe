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
