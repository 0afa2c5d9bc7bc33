import { advanceAlarmState } from '~/advice/advance-alarm-state';
import type { ClassEvidence } from '~/advice/class-evidence';
import { computeFindings } from '~/advice/compute-findings';
import { conclude, decideRun, runTestsOf } from '~/advice/conclude';
import type { Conclusion } from '~/advice/conclusion';
import { findingsSchema, type Findings } from '~/advice/findings';
import type { Position } from '~/reliability/position';

/** A class of seals at these positions and nothing else known of it, with what differs. */
export function anEvidence(
  positions: readonly Position[],
  differences: Partial<ClassEvidence> = {},
): ClassEvidence {
  return {
    itemSingular: 'seal',
    itemPlural: 'seals',
    statutory: false,
    endangersPeople: false,
    clock: 'calendar-days',
    now: positions.reduce((latest, { watchTo }) => Math.max(latest, watchTo), 0),
    positions,
    rateOnlyPositions: [],
    positionsWithAssumedClock: 0,
    hiddenFailures: false,
    costs: { plannedMinor: null, failureMinor: null, groupPlannedMinor: null },
    sparesLeadTimeDays: null,
    serviceLevel: 0.95,
    requiredAvailability: null,
    currentTask: null,
    clockUnitsAYear: 365.25,
    places: new Map(
      positions.map(({ id }) => [id, { tag: id, siteId: 'site-1', siteName: 'Saltmarsh Depot' }]),
    ),
    visits: new Map(),
    groups: { assets: 0, items: 0, itemsOfUnknownAge: 0, failures: 0, undatedFailures: 0 },
    modes: [],
    leftOut: [],
    ...differences,
  };
}

/** The findings of one class, computed from scratch. */
export function findingsOf(input: ClassEvidence): Findings {
  const everyPosition = [...input.positions, ...input.rateOnlyPositions];
  return computeFindings(input, advanceAlarmState(null, everyPosition));
}

/** The conclusion on a class that is alone in its run, from findings as they come back from storage. */
export function assessAlone(input: ClassEvidence): Conclusion {
  const findings = findingsSchema.parse(JSON.parse(JSON.stringify(findingsOf(input))));
  const [decisions] = decideRun([runTestsOf(findings)]);
  return conclude(findings, { marks: input, currency: 'GBP' }, decisions!);
}
