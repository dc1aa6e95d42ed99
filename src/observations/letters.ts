/** Letters of companions: b for the first, c for the second. */

/** @param index - from 0 */
export function companionLetter(index: number): string {
  return String.fromCharCode('b'.charCodeAt(0) + index);
}
