/** Likelihood of the mid-times of one companion, with slopes by its ephemeris. */
import { conjunctionLongitude } from '../../orbit/conjunction-longitude.js';
import type { MidTimeData } from './joint-data.js';

const LOG_TWO_PI = Math.log(2 * Math.PI);
const TWO_PI = 2 * Math.PI;

export class MidTimeLikelihood {
  readonly data: MidTimeData;
  byLogPeriod = 0;
  byConjunction = 0;
  byK = 0;
  byH = 0;
  byJitter = 0;
  byLight = 0;
  readonly predictionDays: Float64Array;
  readonly #front: Float64Array = new Float64Array(3);
  readonly #behind: Float64Array = new Float64Array(3);

  constructor(data: MidTimeData) {
    this.data = data;
    this.predictionDays = new Float64Array(data.timesDays.length);
  }

  /**
   * @param lightDays - by how much an occultation is seen later than the orbit alone would have it, days
   * @returns ln L with its constants
   */
  evaluate(
    logPeriod: number,
    conjunctionDays: number,
    k: number,
    h: number,
    jitterDays: number,
    lightDays: number,
  ): number {
    const { timesDays, sigmasDays, cycles, isOccultation } = this.data;
    const period = Math.exp(logPeriod);
    if (!conjunctionLongitude(k, h, 1, this.#front) || !conjunctionLongitude(k, h, -1, this.#behind))
      return -Infinity;
    let lag = this.#behind[0]! - this.#front[0]!;
    if (lag < 0) lag += TWO_PI;
    const share = lag / TWO_PI;
    const shareByK = (this.#behind[1]! - this.#front[1]!) / TWO_PI;
    const shareByH = (this.#behind[2]! - this.#front[2]!) / TWO_PI;
    this.byLogPeriod = 0;
    this.byConjunction = 0;
    this.byK = 0;
    this.byH = 0;
    this.byJitter = 0;
    this.byLight = 0;
    let sum = 0;
    for (let i = 0; i < timesDays.length; i++) {
      const behind = isOccultation[i]!;
      const turns = cycles[i]! + behind * share;
      const predicted = conjunctionDays + period * turns + behind * lightDays;
      this.predictionDays[i] = predicted;
      const residual = timesDays[i]! - predicted;
      const variance = sigmasDays[i]! * sigmasDays[i]! + jitterDays * jitterDays;
      const pull = residual / variance;
      sum += residual * pull + Math.log(variance) + LOG_TWO_PI;
      this.byConjunction += pull;
      this.byLogPeriod += pull * period * turns;
      this.byLight += behind * pull;
      this.byK += behind * pull * period * shareByK;
      this.byH += behind * pull * period * shareByH;
      this.byJitter += jitterDays * (pull * pull - 1 / variance);
    }
    return -0.5 * sum;
  }
}
