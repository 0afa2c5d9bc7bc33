import type { History } from './history';

/** The profile log-likelihood of the power-law slope at one ln β, on the scaled clock. */
export interface ProfilePoint {
  /** Log-likelihood with the scale at its best for this slope, in the original clock unit. */
  readonly logLikelihood: number;
  /** Its derivative by ln β. Falls through 0 once: the profile is concave in β. */
  readonly score: number;
  /** ln of the best scale η for this slope, in the original clock unit. */
  readonly lnScale: number;
  /** d ln η̂ / d ln β along the profile. */
  readonly lnScaleSlope: number;
  /** Minus the second derivative by ln β; the information about ln β where the score is 0. */
  readonly information: number;
}

/**
 * The profile log-likelihood of the power-law (Weibull) slope for histories with late entries.
 *
 * Each failure adds ln h(t), each history subtracts H(exit) − H(entry), with h(t) = (β/η)(t/η)^(β−1) and
 * η^β = S(β)/n, S(β) = Σ (exit^β − entry^β). Times are divided by the largest exit before any power is
 * taken, differences of powers go through expm1, and equal histories are added up once, in sorted order,
 * so that neither the unit nor the order of the records shows in the digits.
 *
 * With n failures at t, the score by β is Σ ln t − n E[ln u], u distributed over the ages watched with
 * density ∝ (number watched at u) u^(β−1). E[ln u] grows with β, which is why there is one root at most.
 *
 * @param histories valid histories in one unit; at least one failure in all.
 */
export class PowerLawProfile {
  readonly failures: number;
  private readonly largestExit: number;
  private readonly sumLnFailure: number;
  /** ln(exit / largest exit), ln(entry / exit) (−Infinity for entry 0) and multiplicity of each history. */
  private readonly lnExit: Float64Array;
  private readonly lnEntryShare: Float64Array;
  private readonly weight: Float64Array;

  constructor(histories: readonly History[]) {
    this.largestExit = histories.reduce((largest, { exit }) => Math.max(largest, exit), 0);
    const times = Float64Array.from(histories.flatMap(({ failures }) => failures)).sort();
    this.failures = times.length;
    this.sumLnFailure = times.reduce((sum, time) => sum + Math.log(time / this.largestExit), 0);

    const sorted = histories.toSorted((a, b) => a.exit - b.exit || a.entry - b.entry);
    const groups: { exit: number; entry: number; weight: number }[] = [];
    for (const { exit, entry } of sorted) {
      const last = groups.at(-1);
      if (last !== undefined && last.exit === exit && last.entry === entry) last.weight += 1;
      else groups.push({ exit, entry, weight: 1 });
    }
    this.lnExit = Float64Array.from(groups, ({ exit }) => Math.log(exit / this.largestExit));
    this.lnEntryShare = Float64Array.from(groups, ({ exit, entry }) => Math.log(entry / exit));
    this.weight = Float64Array.from(groups, ({ weight }) => weight);
  }

  /** Whether every failure lies at the very largest exit, where no finite slope is steep enough. */
  get allFailuresAtLargestExit(): boolean {
    return this.sumLnFailure === 0;
  }

  at(lnShape: number): ProfilePoint {
    const shape = Math.exp(lnShape);
    const { lnExit, lnEntryShare, weight, failures, sumLnFailure } = this;
    let sum = 0;
    let first = 0;
    let second = 0;
    for (let index = 0; index < weight.length; index += 1) {
      const x = lnExit[index]!;
      const d = lnEntryShare[index]!;
      const power = weight[index]! * Math.exp(shape * x);
      if (d === -Infinity) {
        sum += power;
        first += power * x;
        second += power * x * x;
      } else {
        const gone = power * Math.exp(shape * d);
        const left = -power * Math.expm1(shape * d);
        sum += left;
        first += left * x - gone * d;
        second += left * x * x - gone * d * (2 * x + d);
      }
    }
    const meanLn = first / sum;
    const lnScaled = (Math.log(sum) - Math.log(failures)) / shape;
    return {
      logLikelihood:
        failures * (lnShape - Math.log(sum / failures) - 1 - Math.log(this.largestExit)) +
        (shape - 1) * sumLnFailure,
      score: failures + shape * (sumLnFailure - failures * meanLn),
      lnScale: lnScaled + Math.log(this.largestExit),
      lnScaleSlope: meanLn - lnScaled,
      information: failures * (1 + shape * shape * (second / sum - meanLn * meanLn)),
    };
  }
}
