import { takeCodeReader } from '#components/ui/code-reader.ts';

/** Finds QR codes in a picture; the text of each. */
export type CodeDetector = (picture: HTMLVideoElement) => Promise<string[]>;

interface NativeDetector {
  new (options: { formats: string[] }): { detect(picture: HTMLVideoElement): Promise<{ rawValue: string }[]> };
  getSupportedFormats(): Promise<string[]>;
}

/** The browser's own reader, else the one this app brings. @throws CodeReaderError */
export async function makeCodeDetector(): Promise<CodeDetector> {
  const native = (globalThis as { BarcodeDetector?: NativeDetector }).BarcodeDetector;
  if (native !== undefined && (await native.getSupportedFormats()).includes('qr_code')) {
    const detector = new native({ formats: ['qr_code'] });
    return async (picture) => (await detector.detect(picture)).map((code) => code.rawValue);
  }
  const { BarcodeDetector, prepareZXingModule } = await import('barcode-detector/ponyfill');
  const wasmBinary = await takeCodeReader();
  await prepareZXingModule({ overrides: { wasmBinary }, fireImmediately: true });
  const detector = new BarcodeDetector({ formats: ['qr_code'] });
  return async (picture) => (await detector.detect(picture)).map((code) => code.rawValue);
}
