import { eBenjaminiHochberg } from '~/reliability/e-benjamini-hochberg';
import { alarmKinds, type AlarmFindings, type AlarmKind } from './alarm-findings';

/** What has been raised and cleared for one class before. */
export interface StandingAlarms {
  /** Kinds with an alarm that nobody has cleared yet. */
  readonly open: ReadonlySet<AlarmKind>;
  /** ln E over the whole record at the latest clearing of a kind; absent where none was ever cleared. */
  readonly logEAtClearing: Readonly<Partial<Record<AlarmKind, number>>>;
}

export interface AlarmCandidate {
  readonly classId: string;
  readonly alarms: AlarmFindings;
  readonly standing: StandingAlarms;
}

export interface RaisedAlarm {
  readonly classId: string;
  readonly kind: AlarmKind;
  /** ln E since the last clearing, which raised it, and over the whole record. */
  readonly logE: number;
  readonly logETotal: number;
  readonly failures: number;
}

/** At any night, the expected share of false alarms among those of a kind that stand. */
export const alarmFalseDiscoveryLevel = 0.05;

/**
 * Which alarms a night raises.
 *
 * Evidence counts from the last clearing: E now over E at the clearing. If M is the test martingale and τ
 * the night of the clearing, decided on what was known by then, M_n/M_τ for n ≥ τ is a nonnegative
 * martingale that starts at 1, so that it ever reaches 20 with chance at most 5 % whatever had happened
 * before (Ville 1939). What led to the alarm that was cleared cancels and cannot raise another.
 *
 * Across classes e-BH (Wang & Ramdas 2022) at 5 %, each kind a family of its own with K all classes of the
 * run, failures or none, so that K does not depend on the evidence. Each direction is its own claim with its
 * own consequence; taking both directions of a question as one family would only ask for twice the E. The
 * least E that e-BH can raise is 1/0.05 = 20 (all K at once), so that none is ever raised below it. Classes
 * with an open alarm of the kind stay in the family: they are among the claims made. No second one is raised.
 */
export function raiseAlarms(candidates: readonly AlarmCandidate[]): RaisedAlarm[] {
  return alarmKinds.flatMap((kind) => raiseKind(kind, candidates));
}

function raiseKind(kind: AlarmKind, candidates: readonly AlarmCandidate[]): RaisedAlarm[] {
  const sinceClearing = candidates.map(
    ({ alarms, standing }) => alarms.logE[kind] - (standing.logEAtClearing[kind] ?? 0),
  );
  const raised = eBenjaminiHochberg(sinceClearing, alarmFalseDiscoveryLevel);
  return candidates.flatMap(({ classId, alarms, standing }, index) =>
    raised[index] && !standing.open.has(kind)
      ? [
          {
            classId,
            kind,
            logE: sinceClearing[index]!,
            logETotal: alarms.logE[kind],
            failures: failuresBehind(alarms, kind),
          },
        ]
      : [],
  );
}

function failuresBehind({ failures }: AlarmFindings, kind: AlarmKind): number {
  return kind === 'rate-rising' || kind === 'rate-falling' ? failures.rate : failures.age;
}
