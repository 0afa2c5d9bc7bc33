import { lifeHistories } from '~/reliability/life-histories';
import type { Position } from '~/reliability/position';
import { isFailureOf, isWatched, watchedEvents } from '~/reliability/watched-events';
import { findAgeRank } from './age-rank-findings';
import type { ClassEvidence } from './class-evidence';
import { estimateLife } from './life-estimates';
import type { ModeFindings, ModesFindings } from './mode-findings';
import { fewestFailuresForVerdict } from './verdict';

/**
 * Estimates every failure mode that has at least five failures on its own: for one mode, an item renewed
 * because of another is a life cut short.
 */
export function findModes(positions: readonly Position[], modes: ClassEvidence['modes']): ModesFindings {
  const counts = failuresByMode(positions);
  const counted = modes.map((mode) => ({ ...mode, failures: counts.get(mode.id) ?? 0 }));
  return {
    each: counted
      .filter(({ failures }) => failures >= fewestFailuresForVerdict)
      .map((mode) => findMode(positions, mode)),
    rare: counted
      .filter(({ failures }) => failures > 0 && failures < fewestFailuresForVerdict)
      .map(({ id, name, failures }) => ({ modeId: id, name, failures })),
    failuresWithoutMode: counts.get(null) ?? 0,
  };
}

function failuresByMode(positions: readonly Position[]): Map<string | null, number> {
  const counts = new Map<string | null, number>();
  for (const position of positions.filter(isWatched)) {
    for (const event of watchedEvents(position)) {
      if (isFailureOf(event, undefined)) counts.set(event.mode, (counts.get(event.mode) ?? 0) + 1);
    }
  }
  return counts;
}

function findMode(
  positions: readonly Position[],
  { id, name, failures }: { id: string; name: string; failures: number },
): ModeFindings {
  const { histories } = lifeHistories(positions, { mode: id });
  return {
    modeId: id,
    name,
    failures,
    life: estimateLife(histories),
    ageRank: findAgeRank(positions, { mode: id }).findings,
  };
}
