import { Mod37_2, Mod37_36 } from '@konfirm/iso7064';
import { expect, test } from 'vitest';

test('ISO/IEC 7064 MOD 37,36: A12425GABC1234002 has M', () => {
  // Test suite of python-stdnum, stdnum.iso7064.mod_37_36 (read).
  expect(Mod37_36.checksum('A12425GABC1234002')).toBe('M');
});

test.each([
  // ISBT 128 donation numbers: Red Book guidelines for blood transfusion, as in the tests of python-stdnum (read).
  ['G123498654321', 'H'],
  ['G123489654321', 'Y'],
])('ISO/IEC 7064 MOD 37-2: %s has %s', (text, check) => {
  expect(Mod37_2.checksum(text)).toBe(check);
});
