const CYLINDER_PATH = /^\/cylinders\/([0-9a-f]{8}(?:-[0-9a-f]{4}){3}-[0-9a-f]{12})\/?$/i;

/**
 * The cylinder that a scanned code speaks of; null: it is no tag of a cylinder. Whatever host the code names, only the id
 * is taken: a tag printed under an earlier address still opens here, and a foreign one leads nowhere.
 */
export function cylinderOfCode(text: string): string | null {
  let path: string;
  try {
    const url = new URL(text.trim());
    if (url.protocol !== 'https:' && url.protocol !== 'http:') return null;
    path = url.pathname;
  } catch {
    return null;
  }
  return CYLINDER_PATH.exec(path)?.[1]?.toLowerCase() ?? null;
}

/** Finds the text of a QR code in one picture of the camera; null: none is in it. */
export type CodeReader = (video: HTMLVideoElement) => Promise<string | null>;

interface Detector {
  detect(source: HTMLVideoElement): Promise<{ rawValue: string }[]>;
}
type DetectorClass = {
  new (options: { formats: string[] }): Detector;
  getSupportedFormats(): Promise<string[]>;
};

/** The browser's own reader where it has one, else one that is loaded now. */
export async function openCodeReader(): Promise<CodeReader> {
  const Own = (globalThis as { BarcodeDetector?: DetectorClass }).BarcodeDetector;
  if (Own && (await Own.getSupportedFormats().catch(() => [] as string[])).includes('qr_code')) {
    const detector = new Own({ formats: ['qr_code'] });
    return async (video) => (await detector.detect(video))[0]?.rawValue ?? null;
  }
  const { default: readPixels } = await import('jsqr');
  const canvas = document.createElement('canvas');
  const context = canvas.getContext('2d', { willReadFrequently: true });
  return async (video) => {
    if (!context || video.videoWidth === 0) return null;
    // 640 px across are plenty for a code that fills the frame, and a phone keeps up.
    const scale = Math.min(1, 640 / video.videoWidth);
    canvas.width = Math.round(video.videoWidth * scale);
    canvas.height = Math.round(video.videoHeight * scale);
    context.drawImage(video, 0, 0, canvas.width, canvas.height);
    const { data, width, height } = context.getImageData(0, 0, canvas.width, canvas.height);
    return readPixels(data, width, height)?.data ?? null;
  };
}
