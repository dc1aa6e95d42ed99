/** Text that goes into charts: cleaned, shortened, escaped; numbers written the same way on every machine. */

const ELLIPSIS = '…';

// Control characters, invisible joiners, direction overrides and non-characters: they break XML or turn a label around.
const UNWANTED =
  /[\u0000-\u001f\u007f-\u009f\u00ad\u200b-\u200f\u2028-\u202e\u2060-\u206f\ufeff\ufff0-\uffff]+/g;
const LONE_SURROGATE = /[\ud800-\udbff](?![\udc00-\udfff])|(?<![\ud800-\udbff])[\udc00-\udfff]/g;

/**
 * Makes a label of unknown origin fit to be drawn.
 *
 * @param text - any string (target, instrument name)
 * @param maxLength - longest result in characters, at least 1
 * @returns text without control characters, runs of blanks made one, ending in an ellipsis where it was cut
 */
export function cleanLabel(text: string, maxLength: number): string {
  const tidy = text.replace(UNWANTED, ' ').replace(LONE_SURROGATE, ' ').replace(/\s+/g, ' ').trim();
  const characters = Array.from(tidy);
  if (characters.length <= maxLength) return tidy;
  return `${characters
    .slice(0, maxLength - 1)
    .join('')
    .trimEnd()}${ELLIPSIS}`;
}

const XML_ENTITIES: Readonly<Record<string, string>> = {
  '&': '&amp;',
  '<': '&lt;',
  '>': '&gt;',
  '"': '&quot;',
  "'": '&#39;',
};

/** Escapes text for an XML element or attribute; characters that XML 1.0 forbids become blanks. */
export function escapeXml(text: string): string {
  return text
    .replace(/[\u0000-\u0008\u000b\u000c\u000e-\u001f\ufffe\uffff]/g, ' ')
    .replace(LONE_SURROGATE, ' ')
    .replace(/[&<>"']/g, (character) => XML_ENTITIES[character] ?? '');
}

/** A number with a fixed count of decimals and a true minus sign; zero has no sign. */
export function fixedText(value: number, decimals: number): string {
  const text = Math.abs(value).toFixed(decimals);
  return value < 0 && Number(text) !== 0 ? `\u2212${text}` : text;
}

/** A number with about `digits` significant digits, without an exponent between 1e-4 and 1e9. */
export function significantText(value: number, digits: number): string {
  if (!Number.isFinite(value)) return '?';
  if (value === 0) return '0';
  const exponent = Math.floor(Math.log10(Math.abs(value)));
  if (exponent < -4 || exponent >= 9) return value.toExponential(digits - 1).replace('-', '\u2212');
  return fixedText(value, Math.max(0, digits - 1 - exponent));
}

/** A probability as a percentage without superfluous zeros: 0.001 becomes `0.1 %`. */
export function percentText(probability: number): string {
  return `${String(Number((probability * 100).toPrecision(3)))} %`;
}

/** Part of a file name made of a companion's letter; anything but letters and digits is left out. */
export function fileLetter(letter: string, index: number): string {
  const safe = letter.replace(/[^A-Za-z0-9]/g, '').slice(0, 8);
  return safe === '' ? String(index + 1) : safe;
}
