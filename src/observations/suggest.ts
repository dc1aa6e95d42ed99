/** "Did you mean": the nearest of the allowed words. */

/**
 * Number of single-letter insertions, deletions, replacements and swaps of neighbours between two words
 * (optimal string alignment). Words longer than 64 characters count as infinitely far, to bound the work.
 */
export function editDistance(first: string, second: string): number {
  if (first.length > 64 || second.length > 64) return Infinity;
  let beforePrevious: number[] = [];
  let previous = Array.from({ length: second.length + 1 }, (_, index) => index);
  for (let i = 1; i <= first.length; i++) {
    const current = [i];
    for (let j = 1; j <= second.length; j++) {
      const change = first[i - 1] === second[j - 1] ? 0 : 1;
      let best = Math.min(previous[j]! + 1, current[j - 1]! + 1, previous[j - 1]! + change);
      const swapped = i > 1 && j > 1 && first[i - 1] === second[j - 2] && first[i - 2] === second[j - 1];
      if (swapped) best = Math.min(best, beforePrevious[j - 2]! + 1);
      current.push(best);
    }
    beforePrevious = previous;
    previous = current;
  }
  return previous[second.length]!;
}

/** Letters and digits only, lower case: `Semi_Amplitude` and `semi-amplitude` are the same word to a person. */
export function plainWord(text: string): string {
  return text.toLowerCase().replace(/[^\p{L}\p{N}]/gu, '');
}

/**
 * The allowed word nearest to `found`, or `null` when none is near (more than a third of the letters differ).
 * A word that begins with all of `found` (three letters or more) counts as near: `ecc` suggests `eccentricity`.
 */
export function nearest(found: string, allowed: readonly string[]): string | null {
  const word = plainWord(found);
  let best: string | null = null;
  let bestDistance = Infinity;
  for (const candidate of allowed) {
    const target = plainWord(candidate);
    const isStart = word.length >= 3 && target.startsWith(word);
    const distance = isStart ? 0.5 : editDistance(word, target);
    const length = Math.max(word.length, target.length);
    const limit = length < 3 ? 0 : Math.max(1, Math.floor(length / 3));
    if (distance <= limit && distance < bestDistance) {
      best = candidate;
      bestDistance = distance;
    }
  }
  return best;
}

/** `did you mean "drift"?`, or the list of what is allowed when nothing is near. */
export function didYouMean(found: string, allowed: readonly string[]): string {
  const near = nearest(found, allowed);
  return near === null ? `allowed here: ${allowed.join(', ')}` : `did you mean "${near}"?`;
}
