/** What disturbs a simulated light curve: slow variability of the star and noise with a memory. */
import type { RandomStream } from '../numerics/random.js';
import type { MockRedNoise, MockVariability } from '../observations/mock-types.js';

/** Waves per tone: enough for the sum to be as good as Gaussian. */
const WAVES = 12;
/** Share of the variance in the first overtone. */
const OVERTONE_SHARE = 0.25;

/**
 * Quasi-periodic variability: waves with normal amplitudes and with frequencies normally distributed about 1/P and 2/P,
 * whose width is that of a Gaussian memory exp(-Δt²/2 lifetime²). Smooth; its variance is size² on the average over seeds.
 *
 * @param timesDays - any order
 * @returns (n) in units of the flux
 */
export function quasiPeriodic(
  variability: MockVariability,
  timesDays: Float64Array,
  random: RandomStream,
): Float64Array {
  const { size, periodDays, lifetimeDays } = variability;
  const total = new Float64Array(timesDays.length);
  for (const tone of [1, 2]) {
    const share = tone === 1 ? 1 - OVERTONE_SHARE : OVERTONE_SHARE;
    const amplitude = size * Math.sqrt(share / WAVES);
    for (let wave = 0; wave < WAVES; wave++) {
      const rate = (2 * Math.PI * tone) / periodDays + random.normal() / lifetimeDays;
      const cosine = amplitude * random.normal();
      const sine = amplitude * random.normal();
      for (let i = 0; i < timesDays.length; i++) {
        const angle = rate * timesDays[i]!;
        total[i]! += cosine * Math.cos(angle) + sine * Math.sin(angle);
      }
    }
  }
  return total;
}

/**
 * Gaussian noise with covariance size² exp(-Δt/time), exact at any spacing.
 *
 * @param timesDays - ascending
 * @returns (n) in units of the flux
 */
export function redNoise(noise: MockRedNoise, timesDays: Float64Array, random: RandomStream): Float64Array {
  const { size, timeDays } = noise;
  const out = new Float64Array(timesDays.length);
  let now = 0;
  for (let i = 0; i < timesDays.length; i++) {
    const memory = i === 0 ? 0 : Math.exp(-(timesDays[i]! - timesDays[i - 1]!) / timeDays);
    now = memory * now + Math.sqrt(1 - memory * memory) * size * random.normal();
    out[i] = now;
  }
  return out;
}
