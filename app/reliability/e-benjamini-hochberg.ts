/**
 * e-BH: which of K alarms to raise so that the expected share of false ones stays at or below α, whatever
 * their dependence. With E sorted from the largest, the largest k with E_(k) ≥ K/(α k) are raised.
 *
 * Source: Wang & Ramdas 2022, "False discovery rate control with e-values".
 *
 * @param logEs ln E of each class of the run.
 * @param alpha false discovery rate, in (0, 1).
 * @returns for each class, in the order given, whether to raise. Equal E are raised together or not at all.
 */
export function eBenjaminiHochberg(logEs: readonly number[], alpha: number): boolean[] {
  if (!(alpha > 0 && alpha < 1)) throw new RangeError(`alpha ${alpha} is not in (0, 1)`);
  const sorted = [...logEs].sort((a, b) => b - a);
  let threshold = Infinity;
  sorted.forEach((logE, index) => {
    // A hair of slack, so that E = 20 given as ln 20 meets 1/0.05.
    if (logE >= Math.log(sorted.length / (alpha * (index + 1))) - 1e-12) threshold = logE;
  });
  return logEs.map((logE) => logE >= threshold);
}
