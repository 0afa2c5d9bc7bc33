import { clockUnit } from '~/advice/clock-unit';
import type { Findings } from '~/advice/findings';
import type { ModeFindings } from '~/advice/mode-findings';
import type { Verdict } from '~/advice/verdict';
import { formatClock, formatCount, formatNoun, formatTrimmed } from '~/format/number';
import { DataTable, type Column } from '../data-table';
import { Estimate } from '../estimate';
import { QuestionSection } from '../question-section';
import { VerdictWord } from '../verdict-word';
import { ShapeEstimate } from './shape-estimate';

interface FailureModesProps {
  modes: Findings['modes'];
  verdicts: readonly { modeId: string; verdict: Verdict }[];
  clock: Findings['clock'];
}

/** Failure modes side by side, each with the others as lives cut short. */
export function FailureModes({ modes, verdicts, clock }: FailureModesProps) {
  const { each, rare, failuresWithoutMode } = modes;
  if (each.length === 0 && rare.length === 0) return null;
  return (
    <QuestionSection
      id="failure-modes"
      title="Mode by mode"
      words={
        <p className="text-grey text-[0.92rem]">
          Each mode on its own: an item renewed because of another mode is a life cut short.
        </p>
      }
    >
      {each.length > 0 && (
        <DataTable
          caption="Failure modes with at least five failures"
          captionHidden
          columns={columnsIn(clock, verdicts)}
          rows={each}
          rowKey={({ modeId }) => modeId}
        />
      )}
      {(rare.length > 0 || failuresWithoutMode > 0) && (
        <p className="text-grey mt-3">
          Too few to say anything of:{' '}
          {[
            ...rare.map(({ name, failures }) => `${name} (${formatCount(failures)})`),
            ...(failuresWithoutMode > 0
              ? [`${formatNoun(failuresWithoutMode, 'failure')} without a mode`]
              : []),
          ].join(', ')}
          .
        </p>
      )}
    </QuestionSection>
  );
}

function columnsIn(
  clock: Findings['clock'],
  verdicts: FailureModesProps['verdicts'],
): Column<ModeFindings>[] {
  const inClock = (value: number) => formatClock(value, clockUnit(clock));
  return [
    { key: 'name', header: 'Mode', rowHeader: true, cell: ({ name }) => name },
    {
      key: 'verdict',
      header: 'Verdict',
      cell: ({ modeId }) => (
        <VerdictWord verdict={verdicts.find((mode) => mode.modeId === modeId)?.verdict ?? 'undecided'} />
      ),
    },
    { key: 'failures', header: 'Failures', align: 'end', cell: ({ failures }) => formatCount(failures) },
    { key: 'shape', header: 'Shape β', align: 'end', cell: ({ life }) => <ShapeEstimate fit={life.fit} /> },
    {
      key: 'mean',
      header: 'Mean life',
      align: 'end',
      cell: ({ life: { meanLife } }) => (
        <Estimate
          value={meanLife?.value ?? null}
          low={meanLife?.interval.low ?? null}
          high={meanLife?.interval.high ?? null}
          format={inClock}
          formatEnd={formatTrimmed}
          missing="not known"
        />
      ),
    },
  ];
}
