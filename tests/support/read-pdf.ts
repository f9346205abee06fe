import { getDocument, OPS } from 'pdfjs-dist/legacy/build/pdf.mjs';

export interface ReadPage {
  /** In points, hundredths rounded. */
  size: { width: number; height: number };
  /** In the order of drawing, with a blank between pieces of one line and a line feed between lines. */
  text: string;
}

const COLOURS: ReadonlySet<number> = new Set([
  OPS.setFillRGBColor,
  OPS.setStrokeRGBColor,
  OPS.setFillGray,
  OPS.setStrokeGray,
  OPS.setFillColorN,
  OPS.setStrokeColorN,
  OPS.setFillColor,
  OPS.setStrokeColor,
]);

/** Opens a PDF as a reader does: its pages, their text, and every colour that is drawn with (`0 0 0`). */
export async function readPdf(bytes: Buffer): Promise<{ pages: ReadPage[]; colours: Set<string> }> {
  const task = getDocument({
    data: new Uint8Array(bytes),
    verbosity: 0,
    isEvalSupported: false,
    disableFontFace: true,
  });
  const pdf = await task.promise;
  const pages: ReadPage[] = [];
  const colours = new Set<string>();
  for (let number = 1; number <= pdf.numPages; number++) {
    const page = await pdf.getPage(number);
    const { width, height } = page.getViewport({ scale: 1 });
    let text = '';
    let lastY: number | null = null;
    for (const item of (await page.getTextContent()).items) {
      if (!('str' in item)) continue;
      const y = Math.round(Number(item.transform[5]));
      if (lastY !== null) text += Math.abs(y - lastY) > 4 ? '\n' : ' ';
      text += item.str;
      lastY = y;
    }
    pages.push({ size: { width: rounded(width), height: rounded(height) }, text: text.replaceAll(/ +/g, ' ') });
    const { fnArray, argsArray } = await page.getOperatorList();
    fnArray.forEach((operator, index) => {
      if (COLOURS.has(operator)) colours.add(Array.from(argsArray[index] as ArrayLike<number>).join(' '));
    });
  }
  await task.destroy();
  return { pages, colours };
}

const rounded = (points: number): number => Math.round(points * 100) / 100;
