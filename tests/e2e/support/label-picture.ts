import { execFileSync } from 'node:child_process';
import fs from 'node:fs';
import path from 'node:path';

/** Draws a PDF's first page at this resolution and returns the picture's file (PPM). */
export function drawPdf(pdf: string, dpi: number): string {
  const stem = pdf.replace(/\.pdf$/, `-${dpi}`);
  execFileSync('pdftoppm', ['-r', String(dpi), '-singlefile', pdf, stem]);
  return `${stem}.ppm`;
}

/** What an independent decoder reads from the picture. */
export function decodePicture(file: string): string {
  return execFileSync('zbarimg', ['--quiet', '--raw', file], { encoding: 'utf8' }).trim();
}

interface Picture {
  width: number;
  height: number;
  rgb: Buffer;
}

function readPpm(file: string): Picture {
  const bytes = fs.readFileSync(file);
  const head = /^P6\s+(\d+)\s+(\d+)\s+255\s/.exec(bytes.toString('latin1', 0, 64));
  if (head === null) throw new Error(`${file} is no PPM.`);
  return { width: Number(head[1]), height: Number(head[2]), rgb: bytes.subarray(head[0].length) };
}

const [WIDTH, HEIGHT, FRAMES] = [1280, 720, 30];

/** A second of the picture held before a camera, as uncompressed video (y4m, 4:2:0). */
export function filmPicture(file: string): string {
  const { width, height, rgb } = readPpm(file);
  const luma = Buffer.alloc(WIDTH * HEIGHT, 0xb0);
  const left = Math.max(0, Math.floor((WIDTH - width) / 2));
  const top = Math.max(0, Math.floor((HEIGHT - height) / 2));
  for (let y = 0; y < Math.min(height, HEIGHT); y++) {
    for (let x = 0; x < Math.min(width, WIDTH); x++) {
      const at = (y * width + x) * 3;
      const grey = 0.299 * (rgb[at] ?? 0) + 0.587 * (rgb[at + 1] ?? 0) + 0.114 * (rgb[at + 2] ?? 0);
      luma[(top + y) * WIDTH + left + x] = 16 + Math.round((grey * 219) / 255);
    }
  }
  const chroma = Buffer.alloc((WIDTH * HEIGHT) / 2, 128);
  const video = path.join(path.dirname(file), 'label.y4m');
  const frame = Buffer.concat([Buffer.from('FRAME\n'), luma, chroma]);
  const header = Buffer.from(`YUV4MPEG2 W${WIDTH} H${HEIGHT} F30:1 Ip A1:1 C420jpeg\n`);
  fs.writeFileSync(video, Buffer.concat([header, ...Array.from({ length: FRAMES }, () => frame)]));
  return video;
}
