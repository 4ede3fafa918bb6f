import QRCode from 'qrcode';

/** The symbol as one SVG path of dark runs; `modules` a side, without the quiet zone. Recovery level Q (25 %). */
export function qrPath(text: string): { path: string; modules: number } {
  const { modules } = QRCode.create(text, { errorCorrectionLevel: 'Q' });
  const runs: string[] = [];
  for (let y = 0; y < modules.size; y++) {
    for (let x = 0; x < modules.size; x++) {
      if (!modules.get(y, x)) continue;
      const start = x;
      while (x + 1 < modules.size && modules.get(y, x + 1)) x++;
      const width = x - start + 1;
      runs.push(`M${start} ${y}h${width}v1h-${width}z`);
    }
  }
  return { path: runs.join(''), modules: modules.size };
}
