import { expect, it } from 'vitest';
import { withResolution } from '../../../src/dossier/charts/png-resolution.js';

it('inserts the pHYs chunk of 300 dpi right after the header', () => {
  const png = Uint8Array.from({ length: 60 }, (_, i) => i);
  const out = withResolution(png, 300);
  // 300 / 0.0254 = 11811 px per metre = 0x2e23; checksum by Python 3: zlib.crc32(b'pHYs' + struct.pack('>IIB', 11811, 11811, 1)).
  const chunk = '000000097048597300002e2300002e23' + '0178a53f76';
  expect(Buffer.from(out.subarray(33, 54)).toString('hex')).toBe(chunk);
  expect(Array.from(out.subarray(0, 33))).toEqual(Array.from(png.subarray(0, 33)));
  expect(Array.from(out.subarray(54))).toEqual(Array.from(png.subarray(33)));
});
