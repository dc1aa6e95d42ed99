/** A few sets of the challenge (`npm run challenge` measures all of them): the right number, and no better optimum missed. */
import { describe, expect, it } from 'vitest';
import { evaluateSet, simulatedSet } from '../challenge/evaluate.js';
import { KINDS } from '../challenge/kinds.js';
import { sinusoidFalseAlarm, powerOfGain } from '../../src/solving/false-alarm.js';
import { findCompanions } from '../../src/solving/find-companions.js';
import { falseAlarmSettingOf } from '../../src/solving/addition.js';
import { explorerFor } from '../../src/solving/prepare.js';
import { BARE_CASE } from './helpers.js';

const BASE_SEED = 20261201;

describe('simulated sets with known truth', () => {
  for (const kind of KINDS) {
    // Set 0 of the faint kind lies below the threshold: it has a test of its own.
    const indices = kind.companions === 0 ? [0, 1, 2, 3, 4, 5] : kind.name.startsWith('faint') ? [1] : [0];
    it(`${kind.name}: ${kind.companions} found, ln L not behind a fit from the truth (sets ${indices.join(' ')})`, () => {
      for (const index of indices) {
        const result = evaluateSet(kind, index, BASE_SEED);
        expect(result.found, `set ${index}, seed ${result.seed}`).toBe(kind.companions);
        if (kind.companions > 0) expect(result.lnLBehindTruth).toBeGreaterThan(-0.1);
      }
    });
  }

  it('a signal whose false-alarm probability is 0.2 % or more even at the true orbit is a candidate, not a companion', () => {
    const kind = KINDS.find(({ name }) => name.startsWith('faint'))!;
    const { set } = simulatedSet(kind, 0, BASE_SEED);
    const { explorer, epochBjdTdb } = explorerFor(BARE_CASE, set.velocities);
    const { best, candidate } = findCompanions(explorer, () => undefined);
    expect(best.plan.companions).toHaveLength(0);
    const truth = set.truth[0]!;
    const fromTruth = explorer.fit(
      { companions: [{ choice: null, circular: true }], drift: best.plan.drift },
      {
        ...explorer.portable(best),
        companions: [
          { ...truth, eccentricity: 0, timePeriastronDays: truth.timePeriastronBjdTdb - epochBjdTdb },
        ],
      },
    );
    const power = powerOfGain(fromTruth.fit.logLikelihood - best.fit.logLikelihood, set.velocities.count);
    expect(sinusoidFalseAlarm(power, falseAlarmSettingOf(explorer, best))).toBeGreaterThan(2e-3);
    expect(candidate).not.toBeNull();
    expect(candidate!.falseAlarmProbability).toBeLessThan(1e-2);
    expect(candidate!.deltaLogLikelihood).toBeGreaterThan(
      fromTruth.fit.logLikelihood - best.fit.logLikelihood,
    );
  });
});
