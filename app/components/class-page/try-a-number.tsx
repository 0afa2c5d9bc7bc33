import { useDeferredValue, useEffect, useState, type ReactNode } from 'react';
import { Form, href } from 'react-router';
import { formatRoughMoney } from '~/advice/rough-money';
import { sureEnough } from '~/advice/decide-action';
import { ageWords, everyWords } from '~/advice/practicable-interval';
import type { ScheduleFindings } from '~/advice/schedule-findings';
import { Button, LinkButton } from '~/components/button';
import { Disclosure } from '~/components/disclosure';
import { TextField } from '~/components/text-field';
import { formatInterval, formatPercent } from '~/format/number';
import { CostCurve } from './cost-curve';
import { fieldsOfTheNight, triedUnit, tryNumbers, type Tried, type TriedFields } from './tried-numbers';

interface TryANumberProps {
  classId: string;
  schedule: ScheduleFindings;
  clock: 'calendar-days' | 'operating-hours';
  currency: string;
  itemPlural: string;
  /** What the address asks to try; null where it asks nothing. */
  asked: TriedFields | null;
  /** Whether the viewer may put what they found forward. */
  mayPutForward: boolean;
}

/**
 * Interval and costs to play with: question 3 is drawn anew in the browser by the night's own code. Nothing is
 * stored. Without JavaScript the form asks the server for the same.
 */
export function TryANumber(props: TryANumberProps) {
  const { classId, schedule, clock, currency, asked, mayPutForward } = props;
  const night = fieldsOfTheNight({ schedule, clock, currency });
  const [fields, setFields] = useState<TriedFields>(asked ?? night);
  const shown = useDeferredValue(fields);
  const isLive = useIsLive();
  // A price takes a moment and a chart to draw: nothing is priced before somebody opens this.
  const [isOpen, setIsOpen] = useState(asked !== null);
  if (schedule.basis === null) return null;
  const tried = isOpen ? tryNumbers(shown, { schedule, clock, currency }) : null;
  const errors = tried?.kind === 'errors' ? tried.errors : {};
  // What nobody has filled in yet is not wrong yet.
  const errorOf = (name: keyof TriedFields) =>
    asked !== null || fields[name] !== '' ? errors[name] : undefined;
  const unit = clock === 'operating-hours' ? 'hours' : 'months';
  const set = (name: keyof TriedFields) => (value: string) =>
    setFields((held) => ({ ...held, [name]: value }));
  return (
    <div className="no-print mt-6">
      <Disclosure summary="Try a number" open={asked !== null} onToggle={setIsOpen}>
        <Form action={`${href('/classes/:classId', { classId })}#try-a-number`} id="try-a-number">
          <div className="grid gap-x-6 lg:grid-cols-3">
            <Tryable
              name="interval"
              label={`Interval, ${unit}`}
              hint="Empty for run to failure."
              value={fields.interval}
              onChange={set('interval')}
              error={errorOf('interval')}
              slider={isLive ? intervalSlider(schedule, clock) : null}
            />
            <Tryable
              name="planned"
              label={`A planned renewal, ${currency}`}
              value={fields.planned}
              onChange={set('planned')}
              error={errorOf('planned')}
              slider={isLive ? costSlider(night.planned) : null}
            />
            <Tryable
              name="failure"
              label={`A failure, ${currency}`}
              value={fields.failure}
              onChange={set('failure')}
              error={errorOf('failure')}
              slider={isLive ? costSlider(night.failure) : null}
            />
          </div>
          {!isLive && <Button tone="quiet">Try it</Button>}
          {isLive && (
            <Button type="button" tone="quiet" onClick={() => setFields(night)}>
              Back to the night’s numbers
            </Button>
          )}
        </Form>
        <Result {...props} tried={tried}>
          {mayPutForward && tried?.kind === 'priced' && tried.interval !== schedule.current.interval && (
            <p className="mt-4">
              <LinkButton
                tone="quiet"
                to={`${href('/classes/:classId/change', { classId })}?to=${tried.interval ?? 0}`}
              >
                Put this forward
              </LinkButton>
            </p>
          )}
        </Result>
      </Disclosure>
    </div>
  );
}

/** False on the server and until the page has come alive: what needs JavaScript is not shown without it. */
function useIsLive(): boolean {
  const [isLive, setIsLive] = useState(false);
  // eslint-disable-next-line react-hooks/set-state-in-effect -- the one moment it changes is mounting
  useEffect(() => setIsLive(true), []);
  return isLive;
}

interface Slider {
  min: number;
  max: number;
  step: number;
}

function intervalSlider(schedule: ScheduleFindings, clock: TryANumberProps['clock']): Slider {
  const unit = triedUnit(clock);
  const furthest =
    schedule.kind === 'priced' ? (schedule.curve.at(-1)?.interval ?? 0) : (schedule.supportedAge ?? 0) * 1.5;
  const max = Math.max(2, Math.ceil(furthest / unit));
  const step = clock === 'operating-hours' ? Math.max(1, Math.round(max / 200)) : 0.5;
  return { min: step, max, step };
}

function costSlider(night: string): Slider | null {
  const value = Number(night);
  if (!(value > 0)) return null;
  const step = Number((value / 50).toPrecision(1));
  return { min: step, max: Math.ceil((4 * value) / step) * step, step };
}

interface TryableProps {
  name: keyof TriedFields;
  label: string;
  hint?: string;
  value: string;
  onChange: (value: string) => void;
  error: string | undefined;
  slider: Slider | null;
}

/** A field with a slider under it. */
function Tryable({ name, label, hint, value, onChange, error, slider }: TryableProps) {
  return (
    <div>
      <TextField
        name={`try-${name}`}
        label={label}
        hint={hint}
        inputMode="decimal"
        maxLength={14}
        value={value}
        onChange={(event) => onChange(event.target.value)}
        errors={error === undefined ? [] : [error]}
      />
      {slider !== null && (
        <input
          type="range"
          aria-label={`${label}, slider`}
          {...slider}
          value={Number(value.replace(',', '.')) || slider.min}
          onChange={(event) => onChange(event.target.value)}
          className="-mt-2 mb-3 block h-11 w-full max-w-112"
        />
      )}
    </div>
  );
}

function Result({
  tried,
  children,
  ...props
}: TryANumberProps & { tried: Tried | null; children: ReactNode }) {
  const { clock, currency, itemPlural } = props;
  if (tried === null || tried.kind === 'errors') return null;
  if (tried.kind === 'no-price') {
    return <p className="mt-3">These numbers are too extreme for a price that could be told.</p>;
  }
  const { schedule, change, interval } = tried;
  const money = (amount: number) => formatRoughMoney(amount, currency);
  const { value, low, high } = change.savingPerYear;
  const range = formatInterval(low, high, money);
  const what = interval === null ? 'Run to failure' : `Replaced ${everyWords(interval, clock)}`;
  const saving =
    value >= 0
      ? `saves about ${money(value)} a year (${range})`
      : `costs about ${money(-value)} a year more (saving ${range})`;
  const limit = schedule.supportedAge;
  return (
    <div aria-live="polite">
      <p className="mt-3 text-[1.1rem]">
        <strong>{what}</strong>, the class costs about {money(change.costPerYear.value)} a year and {saving}{' '}
        against today.
      </p>
      <p>
        It saves in {formatPercent(change.share)} of what the records leave possible
        {change.share < sureEnough && ': too close to call'}.
        {interval !== null && limit !== null && interval > limit && (
          <strong>
            {' '}
            The records reach to about {ageWords(limit, clock)} only: what {itemPlural} do beyond is
            guesswork, and such an interval can only be tried on a part.
          </strong>
        )}
      </p>
      <CostCurve
        schedule={schedule}
        clock={clock}
        currency={currency}
        title="What each interval would cost at these numbers"
        tried={interval === null ? undefined : { interval, cost: change.costPerYear.value }}
      />
      {children}
    </div>
  );
}
