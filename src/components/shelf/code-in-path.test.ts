import { describe, expect, it } from 'vitest';
import { codeInPath } from './code-in-path.ts';

describe('the code in the address', () => {
  it('is the last part, escapes undone', () => {
    expect(codeInPath('/b/MN7WYDF4')).toBe('MN7WYDF4');
    expect(codeInPath('/B/MN7W%20YDF4')).toBe('MN7W YDF4');
  });
  it('survives an address that is no text', () => {
    expect(codeInPath('/b/%E0%A4%A')).toBe('%E0%A4%A');
  });
});
