import { expect, test } from 'vitest';
import { canonicalJson } from './canonical-json.ts';

test('keys are sorted by UTF-16 units and numbers are as short as can be', () => {
  // RFC 8785, section 3.2.2 and 3.2.3: numbers and key order of its own samples (from memory).
  expect(canonicalJson({ b: 1e30, a: [4.5, 2e-3, null, true], '€': 'x', '\r': 1 })).toBe(
    '{"\\r":1,"a":[4.5,0.002,null,true],"b":1e+30,"€":"x"}',
  );
});

test('two orders of the same object are one text', () => {
  expect(canonicalJson({ x: { q: 1, p: 2 }, a: 0 })).toBe(canonicalJson({ a: 0, x: { p: 2, q: 1 } }));
});
