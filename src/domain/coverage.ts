import { InkNeedError } from './ink-range.ts';
import { CM_PER_INCH } from './units.ts';

const MM2_PER_IN2 = (CM_PER_INCH * 10) ** 2;

/**
 * Share of a separation that prints: mean((255 − v)/255) of its grey values, 0 black (full ink) to 255 white (none).
 * @param grey one byte a pixel @throws InkNeedError for a picture without pixels
 */
export function coverageOf(grey: Uint8Array): number {
  if (grey.length === 0) throw new InkNeedError('The picture has no pixels. Choose another file.');
  let sum = 0;
  for (const value of grey) sum += value;
  return (255 - sum / grey.length) / 255;
}

/** mm² of so many pixels. @param ppi pixels an inch @throws InkNeedError */
export function areaOf(pixels: number, ppi: number): number {
  if (!(ppi > 0 && Number.isFinite(ppi)))
    throw new InkNeedError(`The resolution is above 0 pixels an inch, not ${ppi}.`);
  if (!(pixels >= 0 && Number.isFinite(pixels))) throw new InkNeedError(`An area has pixels from 0 up, not ${pixels}.`);
  return (pixels / ppi ** 2) * MM2_PER_IN2;
}
