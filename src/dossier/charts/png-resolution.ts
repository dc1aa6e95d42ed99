/** States the resolution in a PNG file, so that a page-setting program prints it at its true size. */
import { crc32 } from 'node:zlib';

const SIGNATURE_AND_HEADER_BYTES = 33; // 8 of the signature, 25 of the IHDR chunk
const METRES_PER_INCH = 0.0254;

/**
 * Inserts a pHYs chunk (physical pixel dimensions, PNG specification section 11.3.5.3) after the header.
 *
 * @param png - a PNG file without such a chunk; not modified
 * @param dotsPerInch - the same in both directions, above 0
 */
export function withResolution(png: Uint8Array, dotsPerInch: number): Uint8Array {
  const pixelsPerMetre = Math.round(dotsPerInch / METRES_PER_INCH);
  const chunk = new Uint8Array(21);
  const view = new DataView(chunk.buffer);
  view.setUint32(0, 9);
  chunk.set([0x70, 0x48, 0x59, 0x73], 4); // "pHYs"
  view.setUint32(8, pixelsPerMetre);
  view.setUint32(12, pixelsPerMetre);
  chunk[16] = 1; // unit: metre
  view.setUint32(17, crc32(chunk.subarray(4, 17)));
  const out = new Uint8Array(png.length + chunk.length);
  out.set(png.subarray(0, SIGNATURE_AND_HEADER_BYTES), 0);
  out.set(chunk, SIGNATURE_AND_HEADER_BYTES);
  out.set(png.subarray(SIGNATURE_AND_HEADER_BYTES), SIGNATURE_AND_HEADER_BYTES + chunk.length);
  return out;
}
