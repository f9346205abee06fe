import path from 'node:path';
import PDFDocument from 'pdfkit';
import { gramsText } from '../../shared/ledger/grams-text.ts';
import type { SealStatement } from '../../shared/proof/seal-record.schema.ts';
import { grouped, type ProofManifest } from '../../shared/proof/verify.mjs';
import type { Locale } from '../../shared/session/session.schema.ts';
import { projectRoot } from '../commands/project-root.ts';
import { type MessageValues, messageFor } from '../messages/translate.ts';
import type { ShownEntry } from './package.repository.ts';

export interface Summary {
  manifest: ProofManifest;
  counts: { records: number; whole: number };
  seal: SealStatement;
  madeBy: string;
  verifierSha256: string;
  /** The firm's. */
  timeZone: string;
  locale: Locale;
  paper: 'A4' | 'Letter';
  /** One more than are shown says that there are more. */
  entries: readonly (ShownEntry & { from: string; to: string })[];
  shownAtMost: number;
}

const FONTS = {
  text: 'archivo-400',
  strong: 'archivo-600',
  narrow: 'archivo-condensed-500',
  wide: 'archivo-wide-800',
  code: 'spline-sans-mono-400',
};
type Font = keyof typeof FONTS;
const MARGIN = 54;
const FOOT = 40;

/** What is in the package, for people: monochrome, so that a copy of a copy can be read. Proves nothing by itself. */
export function summaryPdf(summary: Summary): Promise<Buffer> {
  const { manifest, locale, paper } = summary;
  const say = (key: string, values: MessageValues = {}) => messageFor(`proof.pdf.${key}`, locale, values);
  const doc = new PDFDocument({
    size: paper === 'A4' ? 'A4' : 'LETTER',
    margins: { top: MARGIN, left: MARGIN, right: MARGIN, bottom: MARGIN + FOOT },
    bufferPages: true,
    tagged: true,
    pdfVersion: '1.7',
    lang: locale,
    displayTitle: true,
    info: {
      Title: `${say('title')} – ${manifest.about.label}`,
      Author: manifest.firmName,
      CreationDate: new Date(manifest.madeAt),
    },
  });
  for (const [name, file] of Object.entries(FONTS))
    doc.registerFont(name, path.join(projectRoot, 'fonts', `${file}.ttf`));
  const chunks: Buffer[] = [];
  const written = new Promise<Buffer>((resolve, reject) => {
    doc.on('data', (chunk: Buffer) => chunks.push(chunk));
    doc.on('end', () => resolve(Buffer.concat(chunks)));
    doc.on('error', reject);
  });
  const page = new Sheet(doc);
  page.head(manifest.firmName, say('title'), say(`about.${manifest.about.kind}`, { label: manifest.about.label }));
  for (const [name, value, font] of factsOf(summary, say)) page.fact(name, value, font);
  page.paragraphs(say('howTitle'), [say('how'), say('notTold')]);
  page.table(
    say('entries'),
    [say('no'), say('when'), say('from'), say('to'), say('refrigerant'), say('mass')],
    summary.entries.slice(0, summary.shownAtMost).map((entry) => entryCells(entry, locale)),
  );
  if (summary.entries.length === 0) page.note(say('noEntries'));
  if (summary.entries.length > summary.shownAtMost) page.note(say('moreEntries', { shown: summary.shownAtMost }));
  page.foot((number, of) =>
    say('foot', { sequence: summary.seal.sequence, hash: summary.seal.hash.slice(0, 16), number, of }),
  );
  doc.end();
  return written;
}

function factsOf(summary: Summary, say: (key: string, values?: MessageValues) => string): [string, string, Font][] {
  const { manifest, counts, seal, locale, timeZone } = summary;
  const number = new Intl.NumberFormat(locale);
  return [
    [say('madeAt'), `${instantIn(new Date(manifest.madeAt), locale, timeZone)}, ${summary.madeBy}`, 'text'],
    [
      say('records'),
      say('counts', { records: number.format(counts.records), whole: number.format(counts.whole) }),
      'text',
    ],
    [
      say('sealed'),
      say('sealedUpTo', {
        sequence: number.format(Number(seal.sequence)),
        at: instantIn(new Date(seal.at), locale, timeZone),
      }),
      'text',
    ],
    [say('head'), `${seal.sequence}:${seal.hash}`, 'code'],
    [say('fingerprint'), grouped(seal.keyId), 'code'],
    [say('verifier'), summary.verifierSha256, 'code'],
  ];
}

function entryCells(entry: Summary['entries'][number], locale: Locale): Cells {
  const grams = Number(gramsText(BigInt(entry.mass)));
  return {
    cells: [
      entry.sequence,
      instantIn(entry.occurredAt, locale, entry.timeZone),
      entry.from,
      entry.to,
      entry.refrigerant,
      new Intl.NumberFormat(locale, { maximumFractionDigits: 3 }).format(grams),
    ],
    isStruck: entry.isReversed,
  };
}
interface Cells {
  cells: string[];
  isStruck: boolean;
}

const instantIn = (at: Date, locale: Locale, timeZone: string): string =>
  new Intl.DateTimeFormat(locale, {
    year: 'numeric',
    month: 'short',
    day: 'numeric',
    hour: '2-digit',
    minute: '2-digit',
    timeZone,
    timeZoneName: 'short',
  }).format(at);

const COLUMNS = [0.09, 0.25, 0.22, 0.22, 0.11, 0.11];
const IS_FIGURE = [true, false, false, false, false, true];

/** Lines and ruled rows from the top down, on as many pages as it takes. */
class Sheet {
  private readonly doc: PDFKit.PDFDocument;
  private readonly width: number;

  constructor(doc: PDFKit.PDFDocument) {
    this.doc = doc;
    this.width = doc.page.width - 2 * MARGIN;
  }

  head(above: string, title: string, below: string): void {
    this.doc.font('narrow').fontSize(10).text(above, MARGIN, MARGIN, { width: this.width });
    this.doc.font('wide').fontSize(22).text(title, { width: this.width });
    this.doc.moveDown(0.2).font('strong').fontSize(12).text(below, { width: this.width });
    this.doc.moveDown(0.8);
    this.rule(1);
  }

  fact(name: string, value: string, font: Font): void {
    const { doc } = this;
    const indent = 120;
    const size = font === 'code' ? 7.6 : 10;
    const top = doc.y + 5;
    doc
      .font(font)
      .fontSize(size)
      .text(value, MARGIN + indent, top, { width: this.width - indent });
    const bottom = Math.max(doc.y, top + 12);
    doc
      .font('narrow')
      .fontSize(9.5)
      .text(name, MARGIN, top, { width: indent - 10 });
    doc.x = MARGIN;
    doc.y = Math.max(bottom, doc.y) + 4;
    this.rule(0.3);
  }

  paragraphs(title: string, texts: string[]): void {
    this.doc.moveDown(0.9).font('strong').fontSize(11).text(title, MARGIN, this.doc.y, { width: this.width });
    for (const text of texts)
      this.doc.moveDown(0.3).font('text').fontSize(9.5).text(text, { width: this.width, lineGap: 1.5 });
  }

  note(text: string): void {
    this.doc.moveDown(0.5).font('text').fontSize(9.5).text(text, MARGIN, this.doc.y, { width: this.width });
  }

  /** Placed by hand: pdfkit's own tables take longer than their rows. */
  table(title: string, heads: string[], rows: Cells[]): void {
    this.doc.moveDown(1).font('strong').fontSize(11).text(title, MARGIN, this.doc.y, { width: this.width });
    this.doc.moveDown(0.4);
    if (rows.length === 0) return;
    this.heads(heads);
    for (const row of rows) {
      if (this.doc.y + 16 > this.doc.page.height - MARGIN - FOOT) {
        this.doc.addPage();
        this.doc.y = MARGIN;
        this.heads(heads);
      }
      this.line(row.cells, 'text', 8.5, row.isStruck);
      this.rule(0.3);
    }
  }

  private heads(heads: string[]): void {
    this.line(heads, 'narrow', 8.5, false);
    this.rule(0.8);
  }

  private line(cells: string[], font: Font, size: number, isStruck: boolean): void {
    const { doc } = this;
    const top = doc.y + 3;
    let left = MARGIN;
    cells.forEach((cell, index) => {
      const width = (COLUMNS[index] ?? 0) * this.width;
      doc.font(font).fontSize(size);
      doc.text(shortened(doc, cell, width - 6), left, top, {
        width: width - 6,
        lineBreak: false,
        align: IS_FIGURE[index] && index > 0 ? 'right' : 'left',
        strike: isStruck,
      });
      left += width;
    });
    doc.x = MARGIN;
    doc.y = top + size + 4;
  }

  private rule(thickness: number): void {
    const { doc } = this;
    doc
      .moveTo(MARGIN, doc.y)
      .lineTo(MARGIN + this.width, doc.y)
      .lineWidth(thickness)
      .stroke();
  }

  foot(say: (number: number, of: number) => string): void {
    const { start, count } = this.doc.bufferedPageRange();
    for (let index = 0; index < count; index++) {
      this.doc.switchToPage(start + index);
      // Below the margin, where text would otherwise begin a page of its own.
      this.doc.page.margins.bottom = 0;
      const top = this.doc.page.height - MARGIN;
      this.doc
        .font('code')
        .fontSize(7.5)
        .text(say(index + 1, count), MARGIN, top, { width: this.width, lineBreak: false });
    }
  }
}

/** Cut so that it fits in one line, and saying so. */
function shortened(doc: PDFKit.PDFDocument, text: string, width: number): string {
  if (doc.widthOfString(text) <= width) return text;
  let length = text.length;
  while (length > 1 && doc.widthOfString(`${text.slice(0, length)}…`) > width) length--;
  return `${text.slice(0, length)}…`;
}
