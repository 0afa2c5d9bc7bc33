import type { SubmissionResult } from '@conform-to/react';
import { Form } from 'react-router';
import { capitalised } from '~/advice/capitalised';
import { changeInWords } from '~/advice/change-words';
import type { Caution } from '~/advice/conclusion';
import type { ClockKind } from '~/advice/class-evidence';
import { everyWords } from '~/advice/practicable-interval';
import { changingActions, type Proposal } from '~/advice/proposal';
import { Button } from '~/components/button';
import { CautionList } from '~/components/caution-list';
import { Checkbox } from '~/components/checkbox';
import { ErrorSummary } from '~/components/error-summary';
import { FigureList } from '~/components/figure-list';
import { RadioRows } from '~/components/radio-rows';
import { SelectField } from '~/components/select-field';
import { TextAreaField, TextField } from '~/components/text-field';
import { formatNoun } from '~/format/number';
import { actionBetween, type ChangeAction } from '~/models/schedule-change';
import type { SiteOfClass } from '~/models/trial-part.server';
import { savingWords, sureWords } from './change-words';
import { intervalFields } from './put-forward-schema';

/** What the night says of the class today. */
export interface ClassStanding {
  clock: ClockKind;
  /** Today's interval, clock units; null for run to failure. */
  today: number | null;
  cautions: readonly Caution[];
  proposal: Proposal;
}

/** What the form starts with. */
export interface StartOfForm {
  policy: 'interval' | 'run-to-failure';
  interval?: string;
  unit?: string;
  scope: 'class' | 'part';
  tags?: string;
  reason?: string;
}

interface PutForwardFieldsProps {
  head: { itemSingular: string; itemPlural: string };
  standing: ClassStanding;
  sites: readonly SiteOfClass[];
  currency: string;
  start: StartOfForm;
  hidden: { id: string; taskId: string | null; version?: number };
  refused: SubmissionResult<string[]> | undefined;
  button: string;
  refusedTitle: string;
}

/** A form that starts at an interval of a class's clock, null for run to failure. */
export function startAt(
  { to, onPart }: { to: number | null; onPart: boolean },
  clock: ClockKind,
): StartOfForm {
  const scope = onPart ? 'part' : 'class';
  return to === null
    ? { policy: 'run-to-failure', scope }
    : { policy: 'interval', scope, ...intervalFields(to, clock) };
}

/** A form that starts at the night's proposal, where it is to change something; else with nothing filled in. */
export function proposedStart({ proposal, clock }: ClassStanding): StartOfForm {
  return changingActions.includes(proposal.action)
    ? startAt({ to: proposal.to.interval, onPart: proposal.action === 'trial' }, clock)
    : { policy: 'interval', scope: 'class' };
}

/** What is to be changed and why: the night's proposal and its cautions first, then the form. */
export function PutForwardFields(props: PutForwardFieldsProps) {
  const { head, standing, sites, currency, start, hidden, refused, button, refusedTitle } = props;
  const { clock, proposal, cautions } = standing;
  const typed = (name: string) => {
    const value = refused?.initialValue?.[name];
    return typeof value === 'string' ? value : undefined;
  };
  const chosenSites = [refused?.initialValue?.sites ?? []].flat().map(String);
  const errorsOf = (name: string) => refused?.error?.[name] ?? undefined;
  const errors = Object.entries(refused?.error ?? {}).flatMap(([name, messages]) =>
    (messages ?? []).map((message) => ({ fieldId: name === '' ? null : name, message })),
  );
  return (
    <>
      <p className="text-grey">
        {standing.today === null
          ? `${capitalised(head.itemPlural)} run to failure today.`
          : `${capitalised(head.itemPlural)} are replaced ${everyWords(standing.today, clock)} today.`}
      </p>
      {changingActions.includes(proposal.action) && (
        <Proposed proposal={proposal} clock={clock} currency={currency} />
      )}
      <h2 className="mt-6">Cautions</h2>
      <div className="mt-2">
        <CautionList cautions={cautions} />
      </div>
      <ErrorSummary errors={errors} title={refusedTitle} />
      <Form method="post" key={hidden.taskId}>
        <input type="hidden" name="id" value={typed('id') ?? hidden.id} />
        {hidden.taskId !== null && <input type="hidden" name="taskId" value={hidden.taskId} />}
        {hidden.version !== undefined && <input type="hidden" name="version" value={hidden.version} />}
        <RadioRows
          name="policy"
          label="What is to be done"
          required
          defaultValue={typed('policy') ?? start.policy}
          errors={errorsOf('policy')}
          rows={[
            { value: 'interval', label: `Replace ${head.itemPlural} by plan` },
            { value: 'run-to-failure', label: 'Run to failure: replace what has failed, nothing before' },
          ]}
        />
        <div className="grid gap-x-5 sm:grid-cols-2">
          <TextField
            name="interval"
            label="How often by plan: every"
            inputMode="decimal"
            maxLength={12}
            defaultValue={typed('interval') ?? start.interval}
            errors={errorsOf('interval')}
          />
          <SelectField
            name="unit"
            label="Unit"
            defaultValue={typed('unit') ?? start.unit ?? (clock === 'operating-hours' ? 'hours' : 'months')}
            options={unitsOf(clock)}
          />
        </div>
        <RadioRows
          name="scope"
          label="For which of them"
          defaultValue={typed('scope') ?? start.scope}
          errors={errorsOf('scope')}
          rows={[
            { value: 'class', label: 'The whole class' },
            { value: 'part', label: 'A trial on a part; the rest goes on as today' },
          ]}
        />
        <fieldset className="my-4">
          <legend className="font-bold">Of a trial: where</legend>
          <p className="text-grey text-[0.9rem]">
            {proposal.part === null
              ? 'Whole sites, or single assets by tag.'
              : `The proposal is to try it on about ${formatNoun(proposal.part.positions, head.itemSingular, head.itemPlural)} of ${proposal.part.of}.`}
          </p>
          {sites.map(({ id, name, assets }) => (
            <Checkbox
              key={id}
              name="sites"
              id={`site-${id}`}
              value={id}
              defaultChecked={chosenSites.includes(id)}
              label={`${name} (${formatNoun(assets, 'asset')})`}
            />
          ))}
        </fieldset>
        <TextAreaField
          name="tags"
          label="And these assets, by tag"
          hint="Separated by spaces, commas or lines."
          defaultValue={typed('tags') ?? start.tags}
          errors={errorsOf('tags')}
        />
        <TextAreaField
          name="reason"
          label="Why"
          hint="What whoever decides should know. It is kept with the change."
          required
          maxLength={2000}
          defaultValue={typed('reason') ?? start.reason}
          errors={errorsOf('reason')}
        />
        <Button>{button}</Button>
      </Form>
    </>
  );
}

function Proposed({ proposal, clock, currency }: { proposal: Proposal; clock: ClockKind; currency: string }) {
  const { action, from, to, savingPerYearMinor, share } = proposal;
  const onPart = action === 'trial';
  const terms: { action: ChangeAction; from: number | null; to: number | null } = {
    action: onPart ? 'trial' : (actionBetween(from.interval, to.interval) ?? 'start'),
    from: from.interval,
    to: to.interval,
  };
  return (
    <section aria-label="The night’s proposal" className="mt-4">
      <p className="text-[1.15rem] font-bold">{proposal.words.title}</p>
      <FigureList
        items={[
          { name: 'What', value: changeInWords(terms, clock) },
          {
            name: 'Expected saving',
            value:
              savingWords({ saving: savingPerYearMinor }, currency) +
              (onPart && savingPerYearMinor !== null ? ', if it held for the whole class' : ''),
          },
          { name: 'How sure', value: sureWords({ share }) },
        ]}
      />
    </section>
  );
}

function unitsOf(clock: ClockKind) {
  return clock === 'operating-hours'
    ? [{ value: 'hours', label: 'hours' }]
    : ['days', 'weeks', 'months', 'years'].map((unit) => ({ value: unit, label: unit }));
}
