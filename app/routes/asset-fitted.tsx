import { getFormProps, type SubmissionResult, useForm } from '@conform-to/react';
import { parseWithZod } from '@conform-to/zod/v4';
import { data, Form, href } from 'react-router';
import { z } from 'zod';
import { Breadcrumbs } from '~/components/breadcrumbs';
import { Button } from '~/components/button';
import { ErrorSummary } from '~/components/error-summary';
import { changedMeanwhile } from '~/components/log/changed-meanwhile';
import { fittedRefusalSentence } from '~/components/log/fitted-items-words';
import { placeWords } from '~/components/log/words';
import { Notice } from '~/components/notice';
import { TextAreaField } from '~/components/text-field';
import { formatCalendarDate } from '~/format/date';
import { formatCount } from '~/format/number';
import { type Asset, findAsset } from '~/models/assets.server';
import { listFittedItems, saveFittedItems } from '~/models/fitted-items.server';
import { fittedRowsText, mostFittedRows, parseFittedRows } from '~/models/fitted-rows';
import { redirectWithToast } from '~/services/flash.server';
import { organisation, requireRole, requireSite, type Viewer } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/asset-fitted';

const formSchema = z.object({
  /** One day a line, as 2024-03-01 x 48. */
  fitted: z
    .string()
    .max(mostFittedRows * 20, 'This list is too long.')
    .default(''),
  /** The list as it stood when this form was opened. */
  seen: z.string().default(''),
});

export async function loader({ context, request, params }: Route.LoaderArgs) {
  const viewer = requireRole(context, request, 'lead', 'admin');
  const asset = await groupAtOwnSite(viewer, params.assetId);
  return { asset, stored: fittedRowsText(await listFittedItems(database(), asset.id)) };
}

export async function action({ context, request, params }: Route.ActionArgs) {
  const viewer = requireRole(context, request, 'lead', 'admin');
  const { timeZone } = organisation(context);
  const asset = await groupAtOwnSite(viewer, params.assetId);

  const submission = parseWithZod(await request.formData(), { schema: formSchema });
  if (submission.status !== 'success') return refuse(400, { form: submission.reply() });
  const list = parseFittedRows(submission.value.fitted);
  const seen = parseFittedRows(submission.value.seen);
  const refuseField = (sentence: string) =>
    refuse(400, { form: submission.reply({ fieldErrors: { fitted: [sentence] } }) });
  if ('refusal' in list) return refuseField(fittedRefusalSentence(list.refusal, asset));

  const result = await saveFittedItems(database(), {
    assetId: asset.id,
    rows: list.rows,
    seen: 'rows' in seen ? seen.rows : [],
    personId: viewer.id,
  });
  const page = href('/assets/:assetId/fitted', { assetId: asset.id });
  switch (result.outcome) {
    case 'saved':
      return redirectWithToast(page, { message: 'Saved. The next night takes it into account.' });
    case 'unchanged':
      return redirectWithToast(page, { message: 'Nothing was different, nothing was saved.' });
    case 'not-found':
      throw notFound();
    case 'refused':
      return refuseField(fittedRefusalSentence(result.refusal, asset));
    case 'changed-meanwhile':
      return refuse(409, {
        form: submission.reply(),
        meanwhile: {
          sentence: changedMeanwhile(result.lastChange, timeZone),
          stored: fittedRowsText(result.current),
        },
      });
  }
}

interface Refusal {
  form: SubmissionResult<string[]>;
  /** Somebody saved first: what is stored now. */
  meanwhile?: { sentence: string; stored: string };
}

function refuse(status: 400 | 409, refusal: Refusal) {
  return data(refusal, { status });
}

/** @throws a 404 answer for no such asset, one of another site, and one that holds a single item. */
async function groupAtOwnSite(viewer: Viewer, assetId: string): Promise<Asset> {
  const asset = z.uuid().safeParse(assetId).success ? await findAsset(database(), assetId) : undefined;
  if (!asset || asset.quantity === 1) throw notFound();
  requireSite(viewer, asset.siteId);
  return asset;
}

const notFound = () => new Response('There is nothing here.', { status: 404, statusText: 'Not found' });

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Items fitted${loaderData ? `, ${loaderData.asset.tag}` : ''} · Intervale` },
];

export default function AssetFitted({ loaderData, actionData }: Route.ComponentProps) {
  const { asset, stored } = loaderData;
  const openedNew = asset.watchedFrom === asset.inServiceOn;
  return (
    <div className="max-w-[44rem]">
      <Breadcrumbs
        crumbs={[
          { label: 'Classes', to: href('/classes') },
          { label: asset.className, to: href('/classes/:classId', { classId: asset.classId }) },
          { label: 'Records', to: href('/classes/:classId/records', { classId: asset.classId }) },
          { label: asset.tag },
        ]}
      />
      <h1 className="mt-2 [overflow-wrap:anywhere]">
        When the {asset.itemPlural} of {asset.tag} were fitted
      </h1>
      <p className="text-grey">
        {placeWords(asset)}. It holds {formatCount(asset.quantity)} {asset.itemPlural}, in service since{' '}
        {formatCalendarDate(asset.inServiceOn)}.
      </p>
      {openedNew ? (
        <Notice title="Nothing to say here">
          <p>
            Its failures are recorded since the day it went into service, so all its first {asset.itemPlural}{' '}
            date from that day. What was fitted later is in the records.
          </p>
        </Notice>
      ) : (
        <FittedForm key={stored} asset={asset} stored={stored} refusal={actionData} />
      )}
    </div>
  );
}

function FittedForm({
  asset,
  stored,
  refusal,
}: {
  asset: Asset;
  stored: string;
  refusal: Refusal | undefined;
}) {
  const [form] = useForm({ id: 'fitted-items', lastResult: refusal?.form });
  const sent = refusal?.form.initialValue;
  const errors = refusal?.form.error?.fitted ?? [];
  const opened = formatCalendarDate(asset.watchedFrom);
  return (
    <Form method="post" {...getFormProps(form)}>
      <ErrorSummary errors={errors.map((message) => ({ fieldId: 'fitted', message }))} />
      {refusal?.meanwhile && (
        <Notice tone="warning" title="Not saved: somebody else was first" announce>
          <p>{refusal.meanwhile.sentence} Now stored:</p>
          <p className="whitespace-pre-line">{refusal.meanwhile.stored || 'nothing'}</p>
          <p>Saving again puts your list in its place.</p>
        </Notice>
      )}
      <input type="hidden" name="seen" value={refusal?.meanwhile?.stored ?? asText(sent?.seen) ?? stored} />
      <TextAreaField
        name="fitted"
        label={`In place on ${opened}, by the day they were fitted`}
        hint={`Failures are recorded since ${opened}. Write one day a line and how many: 2024-03-01 x 48. Leave out those of which nobody knows the day.`}
        defaultValue={sent ? (asText(sent.fitted) ?? '') : stored}
        errors={errors}
        rows={8}
        spellCheck={false}
      />
      <Button>Save</Button>
    </Form>
  );
}

function asText(value: unknown): string | undefined {
  return typeof value === 'string' ? value : undefined;
}
