import { getFormProps, type SubmissionResult, useForm } from '@conform-to/react';
import { Form } from 'react-router';
import type { AssetClass, ConfirmedChange } from '~/models/asset-classes.server';
import { moneyFieldText } from '~/models/money';

import { Button } from '../button';
import { Checkbox } from '../checkbox';
import { ErrorSummary } from '../error-summary';
import { Notice } from '../notice';
import { RadioRows } from '../radio-rows';
import { TextField } from '../text-field';
import { availabilityFieldText } from './availability';
import { clockWords, confirmWords, unconfirmedWords } from './setting-words';

interface SettingsFormProps {
  assetClass: AssetClass;
  /** The version of the settings that this person has seen. */
  version: number;
  currency: string;
  clockUse: { agesRecorded: number; assets: number; assetsWithoutDuty: number };
  lastResult: SubmissionResult<string[]> | undefined;
  /** Changes that wait for a word of confirmation. */
  unconfirmed: readonly ConfirmedChange[];
}

const criticalityRows = [
  { value: '1', label: '1, most: the building or a service stops' },
  { value: '2', label: '2, much: a part of it stops' },
  { value: '3', label: '3, some: people notice' },
  { value: '4', label: '4, little' },
];

/** What people decide about a class, as one form. */
export function SettingsForm({
  assetClass,
  version,
  currency,
  clockUse,
  lastResult,
  unconfirmed,
}: SettingsFormProps) {
  const [form] = useForm({ id: 'class-settings', lastResult });
  const sent = lastResult?.initialValue ?? null;
  const text = (name: string, stored: string) => (sent ? asText(sent[name]) : stored);
  const ticked = (name: string, stored: boolean) => (sent ? sent[name] !== undefined : stored);
  const money = (minor: number | null) => (minor === null ? '' : moneyFieldText(minor, currency));
  const availability = (share: number | null) => (share === null ? '' : availabilityFieldText(share));
  const errors = lastResult?.error ?? {};
  const errorsOf = (name: string) => errors[name] ?? undefined;
  const summary = [
    ...Object.entries(errors).flatMap(([name, messages]) =>
      (messages ?? []).map((message) => ({ fieldId: name || null, message })),
    ),
    ...unconfirmed.map((change) => ({ fieldId: `confirm-${change}`, message: unconfirmedWords[change] })),
  ];

  return (
    <Form method="post" {...getFormProps(form)}>
      <ErrorSummary errors={summary} />
      <input type="hidden" name="version" value={version} />

      <h2 className="mt-6">Names</h2>
      <TextField
        name="name"
        label="Name of the class"
        defaultValue={text('name', assetClass.name)}
        errors={errorsOf('name')}
        maxLength={120}
      />
      <TextField
        name="itemSingular"
        label="One of them is called"
        hint="As in “the failed seal”."
        defaultValue={text('itemSingular', assetClass.itemSingular)}
        errors={errorsOf('itemSingular')}
        maxLength={80}
      />
      <TextField
        name="itemPlural"
        label="Several are called"
        hint="As in “seals wear out”."
        defaultValue={text('itemPlural', assetClass.itemPlural)}
        errors={errorsOf('itemPlural')}
        maxLength={80}
      />

      <h2 className="mt-8">What it costs</h2>
      <p className="text-grey text-[0.9rem]">
        In {currency}. Leave empty what nobody knows: without both, no interval can be advised, only a verdict
        given.
      </p>
      <TextField
        name="plannedCost"
        label="A planned replacement"
        inputMode="decimal"
        defaultValue={text('plannedCost', money(assetClass.plannedCostMinor))}
        errors={errorsOf('plannedCost')}
        maxLength={20}
      />
      <TextField
        name="failureCost"
        label="A failure, with all that follows from it"
        inputMode="decimal"
        defaultValue={text('failureCost', money(assetClass.failureCostMinor))}
        errors={errorsOf('failureCost')}
        maxLength={20}
      />
      <TextField
        name="groupPlannedCost"
        label="A planned replacement, when all in one asset are done in one visit"
        hint="For assets that hold several: one item’s part of what such a visit costs. Filling it in prices the class as renewed in groups."
        inputMode="decimal"
        defaultValue={text('groupPlannedCost', money(assetClass.groupPlannedCostMinor))}
        errors={errorsOf('groupPlannedCost')}
        maxLength={20}
      />

      <h2 className="mt-8">Spares</h2>
      <TextField
        name="sparesLeadTimeDays"
        label="Days until an ordered spare is here"
        hint="From it follows how many to hold. Leave it empty if nobody knows."
        inputMode="numeric"
        defaultValue={text('sparesLeadTimeDays', asText(assetClass.sparesLeadTimeDays?.toString()))}
        errors={errorsOf('sparesLeadTimeDays')}
        maxLength={6}
      />

      <h2 className="mt-8">What depends on it</h2>
      <RadioRows
        name="criticality"
        label="How much does it matter?"
        defaultValue={text('criticality', String(assetClass.criticality))}
        errors={errorsOf('criticality')}
        rows={criticalityRows}
      />
      <Checkbox
        name="statutory"
        label="A law or code asks for the work"
        hint="Advice is then evidence only: it never says to stop, lengthen or try a longer interval."
        defaultChecked={ticked('statutory', assetClass.statutory)}
      />
      <Checkbox
        name="endangersPeople"
        label="A failure can endanger people"
        hint="As above: evidence only, and licensed practice decides."
        defaultChecked={ticked('endangersPeople', assetClass.endangersPeople)}
      />
      <div className="group/hidden-failures">
        <Checkbox
          name="hiddenFailures"
          label="A failure stays hidden until somebody looks for it"
          defaultChecked={ticked('hiddenFailures', assetClass.hiddenFailures)}
        />
        <div className="hidden group-has-[[name=hiddenFailures]:checked]/hidden-failures:block">
          <TextField
            name="requiredAvailability"
            label="Share of the time it must be ready, in percent"
            hint="From it follows how often to test it. Leave it empty if nobody has said."
            inputMode="decimal"
            defaultValue={text('requiredAvailability', availability(assetClass.requiredAvailability))}
            errors={errorsOf('requiredAvailability')}
            maxLength={10}
          />
        </div>
      </div>

      <h2 className="mt-8">Clock</h2>
      <RadioRows
        name="clock"
        label="Its age is counted in"
        hint={clockHint(clockUse)}
        defaultValue={text('clock', assetClass.clock)}
        errors={errorsOf('clock')}
        rows={[
          { value: 'calendar-days', label: clockWords['calendar-days'] },
          { value: 'operating-hours', label: clockWords['operating-hours'] },
        ]}
      />
      {unconfirmed.length > 0 && (
        <Notice tone="danger" title="Nothing is saved yet. Please confirm, then save again:" announce>
          {unconfirmed.map((change) => (
            <Checkbox
              key={change}
              id={`confirm-${change}`}
              name="confirm"
              value={change}
              label={confirmWords[change]}
            />
          ))}
        </Notice>
      )}
      <div className="mt-6">
        <Button name="intent" value="save">
          Save
        </Button>
      </div>
    </Form>
  );
}

function clockHint({
  agesRecorded,
  assets,
  assetsWithoutDuty,
}: SettingsFormProps['clockUse']): string | undefined {
  if (agesRecorded > 0) return clockInUse(agesRecorded);
  if (assetsWithoutDuty === 0) return undefined;
  return `${assetsWithoutDuty} of ${assets} assets have no hours a day in the register: on hours, their records would be left out.`;
}

/** Why the clock cannot be changed. */
export function clockInUse(agesRecorded: number): string {
  const records = agesRecorded === 1 ? '1 failure gives' : `${agesRecorded} failures give`;
  return `It cannot be changed: ${records} the age of the item in this unit, and the figure would be read in the other one.`;
}

function asText(value: unknown): string {
  return typeof value === 'string' ? value : '';
}
