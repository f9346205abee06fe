import path from 'node:path';
import type { Writable } from 'node:stream';
import { finished } from 'node:stream/promises';
import { projectRoot } from '../commands/project-root.ts';
import { ARROW_WIDTH, FACES, type Face, runsOf, SUB, wrapText } from './rich-text.ts';

type Pdf = InstanceType<typeof import('pdfkit')>;

/** Points: 72 to the inch. */
const MARGIN = { top: 48, side: 48, bottom: 62 } as const;
const HAIRLINE = 0.6;
const LEADING = 1.32;

export interface PaperOptions {
  size: 'A4' | 'LETTER';
  /** BCP 47, for readers that speak. */
  language: string;
  title: string;
  author: string;
  at: Date;
  /** Stands at the foot of each page, left; the page's number stands right. */
  footer: readonly string[];
  pageWords: (page: number, pages: number) => string;
  stream: Writable;
}

export interface TextStyle {
  face?: Face;
  size?: number;
  align?: 'left' | 'right' | 'center';
  /** Ruled through: what was reversed. */
  struck?: boolean;
}

export interface TableColumn {
  head: string;
  /** Part of the width. */
  width: number;
  align?: 'left' | 'right';
}
export interface TableRow {
  cells: readonly string[];
  struck?: boolean;
  strong?: boolean;
}

/** A page of paper, black on white, written from the top down. Nothing on it is grey, so that copies of copies can be read. */
export class Paper {
  y: number = MARGIN.top;
  readonly left = MARGIN.side;
  readonly width: number;
  readonly #bottom: number;
  readonly #pdf: Pdf;
  readonly #options: PaperOptions;

  private constructor(pdf: Pdf, options: PaperOptions) {
    this.#pdf = pdf;
    this.#options = options;
    this.width = pdf.page.width - 2 * MARGIN.side;
    this.#bottom = pdf.page.height - MARGIN.bottom;
  }

  static async open(options: PaperOptions): Promise<Paper> {
    // A third of a second that only who prints pays.
    const { default: PdfDocument } = await import('pdfkit');
    const pdf = new PdfDocument({
      size: options.size,
      margin: 0,
      bufferPages: true,
      lang: options.language,
      displayTitle: true,
      pdfVersion: '1.7',
      info: { Title: options.title, Author: options.author, Producer: 'Tarewright', CreationDate: options.at },
    });
    for (const [face, file] of Object.entries(FACES)) pdf.registerFont(face, path.join(projectRoot, 'fonts', file));
    pdf.pipe(options.stream);
    return new Paper(pdf, options);
  }

  /** Goes on on a new page unless so much room is left. @returns whether it did */
  ensure(height: number): boolean {
    if (this.y + height <= this.#bottom) return false;
    this.newPage();
    return true;
  }

  newPage(): void {
    this.#pdf.addPage();
    this.y = MARGIN.top;
  }

  space(height: number): void {
    this.y += height;
  }

  widthOf(text: string, { face = 'text', size = 9 }: TextStyle = {}): number {
    return runsOf(text).reduce((sum, run) => {
      if (run.kind === 'arrow') return sum + ARROW_WIDTH * size;
      this.#pdf.font(face).fontSize(run.kind === 'sub' ? size * SUB.size : size);
      return sum + this.#pdf.widthOfString(run.text, { features: ['tnum'] });
    }, 0);
  }

  /** One line at a place, without moving on. `x` is the left, right or middle by `align`. */
  line(text: string, x: number, y: number, style: TextStyle = {}): void {
    const { face = 'text', size = 9, align = 'left', struck = false } = style;
    const width = this.widthOf(text, style);
    const start = align === 'right' ? x - width : align === 'center' ? x - width / 2 : x;
    let at = start;
    for (const run of runsOf(text)) {
      if (run.kind === 'arrow') {
        this.#arrow(at, y + size * 0.62, size, run.right);
        at += ARROW_WIDTH * size;
        continue;
      }
      const isSub = run.kind === 'sub';
      const runSize = isSub ? size * SUB.size : size;
      this.#pdf.font(face).fontSize(runSize).fillColor('black');
      this.#pdf.text(run.text, at, isSub ? y + size * SUB.drop : y, { lineBreak: false, features: ['tnum'] });
      at += this.#pdf.widthOfString(run.text, { features: ['tnum'] });
    }
    if (struck && width > 0) this.#stroke(start, y + size * 0.6, start + width, y + size * 0.6);
  }

  /** As many lines as it takes; a new page where there is no room. */
  paragraph(text: string, style: TextStyle & { indent?: number } = {}): void {
    const { size = 9, indent = 0 } = style;
    for (const line of wrapText(text, this.width - indent, (part) => this.widthOf(part, style))) {
      this.ensure(size * LEADING);
      this.line(line, this.left + indent, this.y, style);
      this.y += size * LEADING;
    }
  }

  /** Kept together with the first lines below it. */
  heading(text: string): void {
    // With the head and the first row of a table under it.
    this.ensure(90);
    this.space(14);
    this.line(text, this.left, this.y, { face: 'strong', size: 11 });
    this.y += 17;
    this.rule();
    this.space(4);
  }

  rule(weight: number = HAIRLINE): void {
    this.#stroke(this.left, this.y, this.left + this.width, this.y, weight);
  }

  /** Names and values in columns, each name above its value. A gap stays a gap: a line to write on. */
  facts(facts: readonly (readonly [name: string, value: string | null])[], columns = 3, width = this.width): void {
    const cell = width / columns;
    for (let first = 0; first < facts.length; first += columns) {
      const row = facts.slice(first, first + columns).map(([name, value]) => ({
        name,
        lines: value === null ? null : wrapText(value, cell - 12, (part) => this.widthOf(part, { size: 10 })),
      }));
      const most = Math.max(...row.map(({ lines }) => lines?.length ?? 1));
      this.ensure(most * 13 + 15);
      row.forEach(({ name, lines }, index) => {
        const x = this.left + index * cell;
        this.line(name, x, this.y, { face: 'condensed', size: 8 });
        if (lines === null) this.#stroke(x, this.y + 21, x + cell - 16, this.y + 21);
        lines?.forEach((line, at) => {
          this.line(line, x, this.y + 10 + at * 13, { size: 10 });
        });
      });
      this.y += most * 13 + 15;
    }
  }

  /** Rows under a head that stands again on each page. Rows stay whole. */
  table(columns: readonly TableColumn[], rows: Iterable<TableRow>): void {
    const total = columns.reduce((sum, { width }) => sum + width, 0);
    const widths = columns.map(({ width }) => (width / total) * this.width);
    const lefts = widths.map((_, index) => this.left + widths.slice(0, index).reduce((sum, width) => sum + width, 0));
    const gap = 9;
    const draw = (cells: readonly string[], style: TextStyle): void => {
      const { size = 9 } = style;
      const lines = cells.map((cell, at) =>
        wrapText(cell, (widths[at] ?? 0) - gap, (part) => this.widthOf(part, style)),
      );
      const height = Math.max(1, ...lines.map(({ length }) => length)) * size * LEADING + 4;
      if (this.ensure(height) && !style.face?.startsWith('condensed')) head();
      lines.forEach((cell, at) => {
        const isRight = columns[at]?.align === 'right';
        const x = (lefts[at] ?? 0) + (isRight ? (widths[at] ?? 0) - gap : 0);
        cell.forEach((line, index) => {
          this.line(line, x, this.y + 2 + index * size * LEADING, { ...style, align: isRight ? 'right' : 'left' });
        });
      });
      this.y += height;
      this.rule(style.face === 'condensed' ? 1 : 0.35);
    };
    const head = (): void => {
      draw(
        columns.map((column) => column.head),
        { face: 'condensed', size: 8 },
      );
    };
    this.ensure(48);
    head();
    for (const { cells, struck = false, strong = false } of rows) {
      draw(cells, { face: strong ? 'strong' : 'text', size: 8.5, struck });
    }
  }

  /** A QR code (ISO/IEC 18004) of squares, error correction M, with its quiet zone inside `size`. */
  async qr(text: string, x: number, y: number, size: number): Promise<void> {
    const { default: qrcode } = await import('qrcode');
    const { modules } = qrcode.create(text, { errorCorrectionLevel: 'M' });
    const quiet = 4;
    const module = size / (modules.size + 2 * quiet);
    for (let row = 0; row < modules.size; row++)
      for (let column = 0; column < modules.size; column++)
        if (modules.get(row, column))
          this.#pdf.rect(x + (column + quiet) * module, y + (row + quiet) * module, module, module);
    this.#pdf.fill('black');
  }

  box(x: number, y: number, width: number, height: number, weight = 1): void {
    this.#pdf.lineWidth(weight).strokeColor('black').rect(x, y, width, height).stroke();
  }

  /** Foots of all pages, then the end. Resolves when the stream has everything. */
  async end(): Promise<number> {
    const { start, count } = this.#pdf.bufferedPageRange();
    const { footer, pageWords, stream } = this.#options;
    for (let page = start; page < start + count; page++) {
      this.#pdf.switchToPage(page);
      const top = this.#pdf.page.height - MARGIN.bottom + 14;
      this.#stroke(this.left, top, this.left + this.width, top);
      footer.forEach((line, index) => {
        this.line(line, this.left, top + 5 + index * 10, { face: index === 0 ? 'condensed' : 'mono', size: 7.5 });
      });
      const words = pageWords(page - start + 1, count);
      this.line(words, this.left + this.width, top + 5, { face: 'condensed', size: 8, align: 'right' });
    }
    this.#pdf.end();
    await finished(stream, { readable: false });
    return count;
  }

  #stroke(fromX: number, fromY: number, toX: number, toY: number, weight: number = HAIRLINE): void {
    this.#pdf.lineWidth(weight).strokeColor('black').moveTo(fromX, fromY).lineTo(toX, toY).stroke();
  }

  #arrow(x: number, y: number, size: number, right: boolean): void {
    const [from, to] = [x + 0.12 * size, x + 0.83 * size];
    const tip = right ? to : from;
    const back = right ? to - 0.22 * size : from + 0.22 * size;
    this.#pdf
      .lineWidth(size * 0.07)
      .strokeColor('black')
      .moveTo(from, y)
      .lineTo(to, y)
      .stroke();
    this.#pdf
      .moveTo(back, y - 0.17 * size)
      .lineTo(tip, y)
      .lineTo(back, y + 0.17 * size)
      .stroke();
  }
}
