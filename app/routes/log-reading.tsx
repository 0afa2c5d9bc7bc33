import type { SubmissionResult } from '@conform-to/react';
import { parseWithZod } from '@conform-to/zod/v4';
import { data, href, Link } from 'react-router';
import { z } from 'zod';
import { ErrorSummary } from '~/components/error-summary';
import { changedMeanwhile } from '~/components/log/changed-meanwhile';
import { hoursWords } from '~/components/log/hours-words';
import { ReadingForm } from '~/components/log/reading-form';
import { readingFormSchema } from '~/components/log/reading-form-schema';
import { ReadingList } from '~/components/log/reading-list';
import { readingRefusalSentence, refusedReadingField } from '~/components/log/reading-words';
import { placeWords } from '~/components/log/words';
import { Notice } from '~/components/notice';
import { formatCalendarDate } from '~/format/date';
import { type Asset, findAsset } from '~/models/assets.server';
import { mayUndoFailure } from '~/models/failure-permissions';
import {
  addReading,
  findReading,
  listReadings,
  type MeterReading,
  restoreReading,
  voidReading,
} from '~/models/meter-readings.server';
import { now, today } from '~/services/clock.server';
import { redirectWithToast } from '~/services/flash.server';
import { organisation, requireRole, requireSite, type Viewer } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/log-reading';

const readingsShown = 12;
const undoReason = 'logged by mistake';

export async function loader({ context, request, params }: Route.LoaderArgs) {
  const viewer = requireRole(context, request, 'technician', 'lead');
  const asset = await assetAtOwnSite(viewer, params.assetId);
  const readings = await listReadings(database(), asset.id, readingsShown);
  const moment = now();
  return {
    // Made here, so that a browser without JavaScript has one too: the same form sent twice is stored once.
    newId: crypto.randomUUID(),
    asset,
    readings: readings.map((reading) => ({ ...reading, mayUndo: mayUndoFailure(reading, viewer, moment) })),
    today: today(organisation(context).timeZone),
  };
}

export async function action({ context, request, params }: Route.ActionArgs) {
  const viewer = requireRole(context, request, 'technician', 'lead');
  const { timeZone } = organisation(context);
  const asset = await assetAtOwnSite(viewer, params.assetId);
  const page = href('/log/:assetId/reading', { assetId: asset.id });
  const present = { now: now(), today: today(timeZone) };

  const submission = parseWithZod(await request.formData(), { schema: readingFormSchema });
  if (submission.status !== 'success') return refuse(400, submission.reply());
  const form = submission.value;

  if (form.intent === 'add') {
    const { readOn, hours, meterChanged } = form;
    const entry = { id: form.id.toLowerCase(), assetId: asset.id, readOn, hours, meterChanged };
    const result = await addReading(database(), { entry, personId: viewer.id, ...present });
    if (result.outcome === 'refused') {
      const sentence = readingRefusalSentence(result.refusal, asset);
      const field = refusedReadingField(result.refusal);
      return refuse(
        400,
        submission.reply(
          field === null ? { formErrors: [sentence] } : { fieldErrors: { [field]: [sentence] } },
        ),
      );
    }
    const words = `${hoursWords(hours)} on ${formatCalendarDate(readOn)}`;
    if (result.outcome === 'already-stored') {
      return redirectWithToast(
        page,
        result.same
          ? { message: `Stored already, once: ${words}.` }
          : {
              kind: 'warning',
              message:
                'This reading was stored before, as the list shows it. What you changed since is not in it.',
            },
      );
    }
    return redirectWithToast(page, {
      message: `Stored: ${words}.`,
      undo: { action: page, label: 'Undo', fields: { intent: 'void', readingId: entry.id, version: '1' } },
    });
  }

  const reading = await ownReading(viewer, asset, form.readingId, present.now);
  const wish = { readingId: reading.id, version: form.version, personId: viewer.id };
  const result =
    form.intent === 'void'
      ? await voidReading(database(), { ...wish, reason: undoReason, now: present.now })
      : await restoreReading(database(), { ...wish, today: present.today });
  switch (result.outcome) {
    case 'done':
      return redirectWithToast(page, {
        message:
          form.intent === 'void' ? 'Undone: it does not count any more.' : 'Put back: it counts again.',
      });
    case 'changed-meanwhile':
      return refuse(409, submission.reply({ formErrors: [changedMeanwhile(result.lastChange, timeZone)] }));
    case 'refused':
      return refuse(400, submission.reply({ formErrors: [readingRefusalSentence(result.refusal, asset)] }));
  }
}

function refuse(status: 400 | 409, form: SubmissionResult<string[]>) {
  return data(form, { status });
}

/** @throws a 404 answer for no such asset, and the same one for an asset of another site. */
async function assetAtOwnSite(viewer: Viewer, assetId: string): Promise<Asset> {
  const asset = z.uuid().safeParse(assetId).success ? await findAsset(database(), assetId) : undefined;
  if (!asset) throw notFound();
  requireSite(viewer, asset.siteId);
  return asset;
}

/** Who may undo a reading is who may undo a failure: a lead, or for a day who logged it. */
async function ownReading(
  viewer: Viewer,
  asset: Asset,
  readingId: string,
  moment: Date,
): Promise<MeterReading> {
  const reading = await findReading(database(), readingId);
  if (reading?.assetId !== asset.id) throw notFound();
  if (mayUndoFailure(reading, viewer, moment)) return reading;
  throw new Response(
    'You can undo what you logged yourself, for 24 hours. Ask your reliability lead to change this one.',
    { status: 403, statusText: 'Forbidden' },
  );
}

const notFound = () => new Response('There is nothing here.', { status: 404, statusText: 'Not found' });

/** Who comes second is shown the readings as the first one left them, so a refusal too reads them again. */
export const shouldRevalidate = () => true;

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Meter reading${loaderData ? `, ${loaderData.asset.tag}` : ''} · Intervale` },
];

export default function LogReading({ loaderData, actionData }: Route.ComponentProps) {
  const { asset, readings, newId, today: day } = loaderData;
  const aboutNew = actionData?.initialValue?.intent === 'add';
  const listErrors = aboutNew ? [] : Object.values(actionData?.error ?? {}).flatMap((each) => each ?? []);
  return (
    <div className="max-w-[40rem]">
      <div className="border-hair flex items-start justify-between gap-4 border-b pb-3">
        <h1 className="min-w-0">
          <span className="text-grey block text-[0.9rem] font-normal">Read the hours meter</span>
          <span className="text-[1.4rem] [overflow-wrap:anywhere]">
            {asset.tag} {asset.itemSingular}
          </span>
          <span className="text-grey block text-[0.9rem] font-normal">{placeWords(asset)}</span>
        </h1>
        <Link
          to={href('/log/:assetId', { assetId: asset.id })}
          className="inline-flex min-h-11 shrink-0 items-center"
        >
          log a failure
        </Link>
      </div>
      {asset.clock === 'calendar-days' && (
        <Notice title="Readings are kept, and not used at present">
          <p>The age of {asset.itemPlural} is counted in days on the calendar.</p>
        </Notice>
      )}
      <ReadingForm key={newId} newId={newId} lastResult={aboutNew ? actionData : undefined} today={day} />
      <h2 className="mt-10">Last readings</h2>
      <ErrorSummary
        errors={listErrors.map((message) => ({ fieldId: null, message }))}
        title="Nothing was changed"
      />
      <ReadingList readings={readings} />
    </div>
  );
}
