import type { ClassMarks } from '../class-facts';
import type { Findings } from '../findings';
import type { ModeVerdict } from '../judge-modes';
import type { ScatterFindings } from '../scatter-findings';

/** The part of a class's facts that the cautions about scatter, modes and costs look at. */
export interface CautionFacts {
  readonly marks: Pick<ClassMarks, 'itemSingular' | 'itemPlural'>;
  readonly findings: Pick<Findings, 'clock'> & {
    readonly extent: Pick<Findings['extent'], 'zeroLives'>;
    readonly scatter: ScatterFindings;
  };
  readonly modeVerdicts: readonly ModeVerdict[];
  readonly pricing: {
    /** Costs that nobody has given. */
    readonly missing: readonly ('planned' | 'failure')[];
    /** The interval of least cost, clock units; null where none is best or it could not be priced. */
    readonly bestInterval: number | null;
    /** Longest age that at least five items were seen to reach, clock units; null with fewer items. */
    readonly supportedAge: number | null;
  };
}
