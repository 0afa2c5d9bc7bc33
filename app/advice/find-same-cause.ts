import { pooledExposureClock, type PooledExposure } from '~/reliability/pooled-exposure';
import type { Position } from '~/reliability/position';
import { sameCauseClusters, type ScanCell } from '~/reliability/same-cause';
import { isWatched } from '~/reliability/watched-events';
import type { ScatterFindings } from './scatter-findings';

const fewestTogether = 3;
/** A chance below this, over all scans of the class together, is worth a word. */
const unlikely = 0.01;
const mostListed = 5;

type Cluster = ScatterFindings['sameCause']['clusters'][number];

interface Site {
  readonly name: string;
  readonly positions: Position[];
}

/**
 * Days on which failures came together: one scan over the days of the whole class and, where it stands at
 * several sites, one over the days of each site. The level is shared between the two. Of several clusters on
 * one day the least likely is kept.
 *
 * @param siteOf id and name of the site a position stands at.
 */
export function findSameCause(
  positions: readonly Position[],
  { failures, totalExposure }: PooledExposure,
  siteOf: (positionId: string) => { siteId: string; siteName: string },
): ScatterFindings['sameCause'] {
  const watched = positions.filter(isWatched);
  const sites = new Map<string, Site>();
  const siteIds = new Map<string, string>();
  for (const position of watched) {
    const { siteId, siteName } = siteOf(position.id);
    siteIds.set(position.id, siteId);
    const site = sites.get(siteId);
    if (site === undefined) sites.set(siteId, { name: siteName, positions: [position] });
    else site.positions.push(position);
  }

  const level = unlikely / (sites.size > 1 ? 2 : 1);
  const scan = (areas: ReadonlyMap<string, readonly Position[]>, areaOf: (positionId: string) => string) => {
    const counts = new Map<string, { day: number; area: string; failures: number }>();
    for (const { at, positionId } of failures) {
      const [day, area] = [Math.floor(at), areaOf(positionId)];
      const key = `${day} ${area}`;
      const cell = counts.get(key);
      if (cell === undefined) counts.set(key, { day, area, failures: 1 });
      else cell.failures += 1;
    }
    const clocks = new Map<string, (at: number) => number>();
    const cells = [...counts].map(([key, { day, area, failures: together }]): ScanCell => {
      // Cells with fewer only count towards the total.
      if (together < fewestTogether) return { key, failures: together, exposureShare: 0 };
      const clock = clocks.get(area) ?? pooledExposureClock(areas.get(area) ?? []);
      clocks.set(area, clock);
      // A watch may end with the day's start: then the day before tells how much ran.
      const exposure = Math.max(clock(day + 1) - clock(day), clock(day) - clock(day - 1));
      return { key, failures: together, exposureShare: Math.min(1, exposure / totalExposure) };
    });
    const scanned = [...areas.values()].reduce((days, area) => days + watchedDays(area), 0);
    return sameCauseClusters(cells, Math.max(scanned, cells.length), fewestTogether, level).map(
      ({ key, ...cluster }) => ({ ...cluster, day: counts.get(key)!.day, area: counts.get(key)!.area }),
    );
  };

  const found: Cluster[] = scan(new Map([['', watched]]), () => '').map((cluster) => ofDay(cluster, null));
  if (sites.size > 1) {
    const areas = new Map([...sites].map(([id, site]) => [id, site.positions]));
    for (const cluster of scan(areas, (positionId) => siteIds.get(positionId) ?? '')) {
      found.push(ofDay(cluster, sites.get(cluster.area)?.name ?? null));
    }
  }
  const byDay = new Map<number, Cluster>();
  for (const cluster of found.sort((a, b) => a.p - b.p || a.day - b.day)) {
    if (!byDay.has(cluster.day)) byDay.set(cluster.day, cluster);
  }
  return { found: byDay.size, clusters: [...byDay.values()].slice(0, mostListed) };
}

function ofDay(
  { day, failures, expected, p }: { day: number; failures: number; expected: number; p: number },
  siteName: string | null,
): Cluster {
  return { day, siteName, failures, expected, p };
}

/** Days from the first opening of a watch to the last closing. */
export function watchedDays(positions: readonly Position[]): number {
  let [first, last] = [Infinity, -Infinity];
  for (const { watchFrom, watchTo } of positions) {
    first = Math.min(first, watchFrom);
    last = Math.max(last, watchTo);
  }
  return last > first ? Math.max(1, Math.ceil(last) - Math.floor(first)) : 0;
}
