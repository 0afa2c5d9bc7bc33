import { parseWithZod } from '@conform-to/zod/v4';
import { data, href, Link } from 'react-router';
import { z } from 'zod';
import { failureFormSchema, failureOfForm, seenIdsOf } from '~/components/log/failure-form-schema';
import { fittedQuestion } from '~/components/log/fitted-question';
import { LogForm } from '~/components/log/log-form';
import { refusalSentence, refusedField } from '~/components/log/refusal-words';
import { placeWords } from '~/components/log/words';
import { type Asset, findAsset, lastFitted } from '~/models/assets.server';
import { listFailureModes } from '~/models/failure-modes.server';
import { logFailure } from '~/models/failures.server';
import { now, today } from '~/services/clock.server';
import { redirectWithToast } from '~/services/flash.server';
import { organisation, requireRole, requireSite, type Viewer } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/log-failure';

export async function loader({ context, request, params }: Route.LoaderArgs) {
  const viewer = requireRole(context, request, 'technician', 'lead');
  const { timeZone } = organisation(context);
  const db = database();
  const asset = await assetAtOwnSite(viewer, params.assetId);
  const [modes, fitted] = await Promise.all([
    listFailureModes(db, asset.classId),
    lastFitted(db, asset, today(timeZone)),
  ]);
  return {
    // Made here, so that a browser without JavaScript has one too: the same form sent twice is stored once.
    newId: crypto.randomUUID(),
    asset,
    modes,
    question: fittedQuestion(asset, fitted),
    mayDateItems: asset.quantity > 1 && viewer.roles.some((role) => role === 'lead' || role === 'admin'),
    today: today(timeZone),
    timeZone,
  };
}

export async function action({ context, request, params }: Route.ActionArgs) {
  const viewer = requireRole(context, request, 'technician', 'lead');
  const { timeZone } = organisation(context);
  const asset = await assetAtOwnSite(viewer, params.assetId);

  const submission = parseWithZod(await request.formData(), { schema: failureFormSchema });
  if (submission.status !== 'success')
    return data({ form: submission.reply(), perhapsSame: [] }, { status: 400 });

  const form = submission.value;
  const present = { now: now(), today: today(timeZone) };
  const entry = failureOfForm(form, {
    assetId: asset.id,
    itemSingular: asset.itemSingular,
    timeZone,
    ...present,
  });
  const result = await logFailure(database(), {
    entry,
    personId: viewer.id,
    ...present,
    seenIds: seenIdsOf(form),
  });

  const page = href('/failures/:failureId', { failureId: entry.id });
  switch (result.outcome) {
    case 'stored':
      return redirectWithToast(page, { message: 'Stored. Thank you.' });
    case 'already-stored':
      return redirectWithToast(
        page,
        result.same
          ? { message: 'Stored already, once.' }
          : {
              kind: 'warning',
              message:
                'This entry was stored before, as it stands here. What you changed since is not in it: undo it and log it again if it is wrong.',
            },
      );
    case 'perhaps-repeated':
      return data({ form: submission.reply(), perhapsSame: result.failures }, { status: 409 });
    case 'refused': {
      const sentence = refusalSentence(result.refusal, asset);
      const field = refusedField(result.refusal, form);
      const reply = submission.reply(
        field === null ? { formErrors: [sentence] } : { fieldErrors: { [field]: [sentence] } },
      );
      return data({ form: reply, perhapsSame: [] }, { status: 400 });
    }
  }
}

/** @throws a 404 answer for no such asset, and the same one for an asset of another site. */
async function assetAtOwnSite(viewer: Viewer, assetId: string): Promise<Asset> {
  const asset = z.uuid().safeParse(assetId).success ? await findAsset(database(), assetId) : undefined;
  if (!asset) throw new Response('There is nothing here.', { status: 404, statusText: 'Not found' });
  requireSite(viewer, asset.siteId);
  return asset;
}

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Log a failure${loaderData ? `, ${loaderData.asset.tag}` : ''} · Intervale` },
];

export default function LogFailure({ loaderData, actionData }: Route.ComponentProps) {
  const { asset, mayDateItems } = loaderData;
  return (
    <div className="max-w-[40rem]">
      <div className="border-hair flex items-start justify-between gap-4 border-b pb-3">
        <h1 className="min-w-0">
          <span className="text-grey block text-[0.9rem] font-normal">Log a failure</span>
          <span className="text-[1.4rem] [overflow-wrap:anywhere]">
            {asset.tag} {asset.itemSingular}
          </span>
          <span className="text-grey block text-[0.9rem] font-normal">{placeWords(asset)}</span>
        </h1>
        <Link to={href('/log')} className="inline-flex min-h-11 shrink-0 items-center">
          other asset
        </Link>
      </div>
      {(asset.clock === 'operating-hours' || mayDateItems) && (
        <p className="flex flex-wrap gap-x-6">
          {asset.clock === 'operating-hours' && (
            <Link
              to={href('/log/:assetId/reading', { assetId: asset.id })}
              className="inline-flex min-h-11 items-center"
            >
              Read the hours meter instead
            </Link>
          )}
          {mayDateItems && (
            <Link
              to={href('/assets/:assetId/fitted', { assetId: asset.id })}
              className="inline-flex min-h-11 items-center"
            >
              When the {asset.itemPlural} were fitted
            </Link>
          )}
        </p>
      )}
      <LogForm
        key={asset.id}
        newId={loaderData.newId}
        lastResult={actionData?.form}
        perhapsSame={actionData?.perhapsSame ?? []}
        modes={loaderData.modes}
        question={loaderData.question}
        today={loaderData.today}
        timeZone={loaderData.timeZone}
      />
    </div>
  );
}
