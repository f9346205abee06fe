/** White modules around a code, ISO/IEC 18004 (memory, the text was not re-read): four. */
const QUIET = 4;

/**
 * A QR code as one SVG path in a square of `size` modules, its quiet zone included. Level Q: a quarter of a tag may be
 * scratched or dirty.
 */
export async function qrPath(text: string): Promise<{ size: number; path: string }> {
  const { create } = await import('qrcode');
  const { modules } = create(text, { errorCorrectionLevel: 'Q' });
  const runs: string[] = [];
  for (let row = 0; row < modules.size; row += 1) {
    for (let column = 0; column < modules.size; column += 1) {
      let width = 0;
      while (column + width < modules.size && modules.get(row, column + width)) width += 1;
      if (width > 0) runs.push(`M${column + QUIET} ${row + QUIET}h${width}v1h-${width}z`);
      column += width;
    }
  }
  return { size: modules.size + 2 * QUIET, path: runs.join('') };
}
