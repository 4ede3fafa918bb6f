export type LabelSize = 'l102' | 'l76' | 'l51';
export const LABEL_SIZES: readonly { size: LabelSize; name: string }[] = [
  { size: 'l102', name: '102 × 51' },
  { size: 'l76', name: '76 × 51' },
  { size: 'l51', name: '51 × 25' },
];

export interface LabelContent {
  code: string;
  name: string;
  /** Formula, revision and family. */
  formula: string;
  /** Short lines: filled, tare, use-by, what it contains. */
  lines: readonly string[];
  hazards: string;
  /** The tub's address on this host, in capitals. */
  address: string;
}

/** A QR symbol of version 3, level Q holds this many of the alphanumeric set: 29 modules, 27.75 mm at 6 dots. */
const LONGEST_ADDRESS = 47;

/** What the symbol says: the address where it fits, else the bare code; the scanner takes both. */
export function symbolText(address: string, code: string, size: LabelSize): string {
  return size === 'l51' || address.length > LONGEST_ADDRESS ? code : address;
}
