/** Weather of a simulated site: nights are lost in spells, as clouds come and stay for days. */
import { ModelDomainError } from '../errors.js';
import type { RandomStream } from '../numerics/random.js';

/** Mean length of a spell of lost nights. Longer only when so much is lost that clear spells would last under a night. */
const LOST_SPELL_NIGHTS = 4;

/**
 * Says for consecutive nights whether the sky is clear.
 *
 * A chain of two states: the long-run fraction of lost nights is `lossFraction`, and the correlation between nights
 * d days apart is (1 - 1/L - p)^d, where L = 4 nights is the mean length of a lost spell (more if over 80 % is lost) and
 * p = lossFraction / ((1 - lossFraction) L) the chance that a clear night is followed by a lost one.
 *
 * @param nightCount - number of nights, >= 0
 * @param lossFraction - 0 <= fraction <= 1
 * @returns (nightCount), 1 where the night is clear, 0 where it is lost
 * @throws ModelDomainError when the fraction is outside 0..1
 */
export function clearNights(nightCount: number, lossFraction: number, random: RandomStream): Uint8Array {
  if (!(lossFraction >= 0 && lossFraction <= 1))
    throw new ModelDomainError('fraction of nights lost to weather', lossFraction, '[0, 1]');
  const clear = new Uint8Array(nightCount);
  if (lossFraction === 1) return clear;
  const odds = lossFraction / (1 - lossFraction);
  const spellNights = Math.max(LOST_SPELL_NIGHTS, odds);
  const chanceClearing = 1 / spellNights;
  const chanceClouding = odds / spellNights;
  let isClear = random.uniform() >= lossFraction;
  for (let night = 0; night < nightCount; night += 1) {
    clear[night] = isClear ? 1 : 0;
    const draw = random.uniform();
    isClear = isClear ? draw >= chanceClouding : draw < chanceClearing;
  }
  return clear;
}
