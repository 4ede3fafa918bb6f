/** What a keypad or a keyboard makes of the text so far; comma and point both stay as they were typed. */
export function typeDigit(text: string, key: string): string {
  if (key === 'Backspace') return text.slice(0, -1);
  if (text.length >= 9) return text;
  if (key === '.' || key === ',') return /[.,]/.test(text) ? text : `${text === '' ? '0' : text}${key}`;
  if (!/^[0-9]$/.test(key)) return text;
  return text === '0' ? key : text + key;
}
