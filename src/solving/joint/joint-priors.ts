/** The priors of a joint model in sentences, for the report. */
import type { JointRecipe } from './joint-data.js';
import { LARGEST_RATIO, SMALLEST_RATIO } from './blocks-of.js';

export function jointPriorSentences(recipe: JointRecipe): string[] {
  const { companions, bands, starDensityGcc, scales } = recipe;
  const sentences: string[] = [];
  const transits = companions.some((companion) => companion.transits);
  if (transits) {
    sentences.push(
      `Priors of transits: ln of the radius ratio uniform between ${SMALLEST_RATIO} and ${LARGEST_RATIO}; impact parameter uniform from 0 to 1 + radius ratio; ${
        starDensityGcc === null
          ? 'ln of the mean density of the star uniform over a wide range, whatever its given mass and radius'
          : `mean density of the star ${starDensityGcc.value} ± ${starDensityGcc.sigma} g/cm3 as stated`
      }; baseline coefficients flat, integrated out; extra scatter s of a light curve with density 1/√(s² + (0.3 σ)²).`,
    );
    const free = bands.filter(({ u1, u2 }) => u1 === null && u2 === null).map(({ name }) => name);
    if (free.length > 0)
      sentences.push(
        `Limb darkening in ${free.join(', ')}: uniform over all physical pairs (triangular sampling, Kipping 2013).`,
      );
    const stated = bands.filter(({ u1, u2 }) => u1 !== null || u2 !== null).map(({ name }) => name);
    if (stated.length > 0) sentences.push(`Limb darkening in ${stated.join(', ')}: as the case states.`);
  }
  if (companions.some((companion) => !companion.circular))
    sentences.push(
      'Eccentricity uniform up to an orbit that would touch the star, argument of periastron uniform.',
    );
  if (companions.some((companion) => companion.isPeriodUnknown))
    sentences.push(
      'Where one event is all there is, the period is log-uniform over all that the data allow.',
    );
  if (scales !== null)
    sentences.push(
      `Priors of velocities: semi-amplitude with density 1/(K + ${scales.amplitudeScaleMps.toPrecision(2)} m/s); jitter with density 1/√(s² + (${scales.jitterScaleMps.toPrecision(2)} m/s)²); zero points and drift uniform over wide ranges.`,
    );
  return sentences;
}
