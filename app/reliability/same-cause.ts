import { binomialAtLeast } from './binomial-tail';

/** Failures of a class in one cell of the scan (one day, or one site on one day). */
export interface ScanCell {
  readonly key: string;
  readonly failures: number;
  /** Share of all exposure that fell into this cell, in (0, 1). With steady exposure, 1/number of cells. */
  readonly exposureShare: number;
}

export interface SameCauseCluster {
  readonly key: string;
  readonly failures: number;
  /** Failures expected in the cell. */
  readonly expected: number;
  /** Upper bound on the chance of such a cell anywhere in the scan. */
  readonly p: number;
}

/**
 * Days on which more failures came together than a steady rate explains. Given the total n, the count of
 * a cell is binomial with its share of the exposure; the exact tail times the number of cells scanned
 * bounds the chance of seeing such a cell anywhere (Bonferroni's bound on the largest cell).
 * Source: common practice for scans over disjoint cells, no single source.
 *
 * @param cells those with failures; empty cells need not be listed.
 * @param scanned number of cells looked through, the empty ones included.
 * @param atLeast smallest number of failures that counts as a cluster.
 * @param level report cells with p below it.
 * @returns clusters, the least likely first.
 */
export function sameCauseClusters(
  cells: readonly ScanCell[],
  scanned: number,
  atLeast: number,
  level: number,
): SameCauseCluster[] {
  if (!(scanned >= cells.length)) throw new RangeError(`${scanned} cells scanned, but ${cells.length} given`);
  const total = cells.reduce((sum, cell) => sum + cell.failures, 0);
  const clusters: SameCauseCluster[] = [];
  for (const { key, failures, exposureShare } of cells) {
    if (failures < atLeast) continue;
    const p = Math.min(1, scanned * binomialAtLeast(failures, total, exposureShare));
    if (p < level) clusters.push({ key, failures, expected: total * exposureShare, p });
  }
  return clusters.sort((a, b) => a.p - b.p || (a.key < b.key ? -1 : 1));
}
