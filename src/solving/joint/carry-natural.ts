/** Natural parameters of one recipe as a start for another one, whose windows may hold other tables. */
import type { JointRecipe } from './joint-data.js';
import { START_LIMB } from './joint-start.js';
import { NaturalIndex } from './natural.js';

/** Time scale from which correlated noise is fitted, days. */
const START_TIMESCALE_DAYS = 0.04;

/**
 * Bands and tables are matched by name; what is new gets the numbers of a first start. Companions, instruments and sets of
 * mid-times are the same in both.
 */
export function carriedTo(natural: Float64Array, from: JointRecipe, to: JointRecipe): Float64Array {
  const source = new NaturalIndex(from);
  const target = new NaturalIndex(to);
  const carried = new Float64Array(target.size);
  const ofCompanions = target.logStarDensity + 1;
  carried.set(natural.subarray(0, ofCompanions));
  to.bands.forEach(({ name, u1, u2 }, b) => {
    const old = from.bands.findIndex((band) => band.name === name);
    carried[target.band(b)] = old < 0 ? (u1?.value ?? START_LIMB[0]) : natural[source.band(old)]!;
    carried[target.band(b) + 1] = old < 0 ? (u2?.value ?? START_LIMB[1]) : natural[source.band(old) + 1]!;
    to.companions.forEach((_, c) => {
      carried[target.occultationDepth(c, b)] = old < 0 ? 0 : natural[source.occultationDepth(c, old)]!;
    });
  });
  to.curves.forEach(({ name, typicalSigma, dilution }, i) => {
    const old = from.curves.findIndex((curve) => curve.name === name);
    const start = [0.5 * typicalSigma, dilution.value, typicalSigma, START_TIMESCALE_DAYS];
    start.forEach((value, j) => {
      carried[target.curveJitter(i) + j] = old < 0 ? value : natural[source.curveJitter(old) + j]!;
    });
  });
  // Zero points, drift, jitters of velocities and of mid-times follow in one run.
  carried.set(natural.subarray(source.zeroPoint(0)), target.zeroPoint(0));
  return carried;
}
