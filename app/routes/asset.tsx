import { href, Link } from 'react-router';
import { z } from 'zod';
import { PositionTimeline, TimelineKey } from '~/charts/position-timeline';
import { timelineNames, timelineSentence } from '~/charts/position-timeline-layout';
import { Breadcrumbs } from '~/components/breadcrumbs';
import { LinkButton } from '~/components/button';
import { Disclosure } from '~/components/disclosure';
import { FigureList } from '~/components/figure-list';
import { placeWords } from '~/components/log/words';
import { formatCalendarDate } from '~/format/date';
import { formatCount } from '~/format/number';
import { findAsset } from '~/models/assets.server';
import { findPosition } from '~/models/positions.server';
import { today } from '~/services/clock.server';
import { organisation, requireSite, requireViewer } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/asset';

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `${loaderData?.asset.tag ?? 'Asset'} · Intervale` },
];

export async function loader({ context, request, params }: Route.LoaderArgs) {
  const viewer = requireViewer(context, request);
  const nothing = () => new Response('There is nothing here.', { status: 404, statusText: 'Not found' });
  if (!z.uuid().safeParse(params.assetId).success) throw nothing();
  const db = database();
  const asset = await findAsset(db, params.assetId);
  const position = asset && (await findPosition(db, asset.id, today(organisation(context).timeZone)));
  if (!asset || !position) throw nothing();
  requireSite(viewer, asset.siteId);
  return {
    asset,
    position,
    mayLog: viewer.roles.some((role) => role === 'technician' || role === 'lead'),
    mayDate: asset.quantity > 1 && viewer.roles.some((role) => role === 'lead' || role === 'admin'),
  };
}

export default function AssetPage({ loaderData }: Route.ComponentProps) {
  const { asset, position, mayLog, mayDate } = loaderData;
  const { timeline } = position;
  const { id: assetId } = asset;
  return (
    <article className="max-w-[46rem]">
      <Breadcrumbs
        crumbs={[
          { label: 'Classes', to: href('/classes') },
          { label: asset.className, to: href('/classes/:classId', { classId: asset.classId }) },
          { label: asset.tag },
        ]}
      />
      <h1 className="[overflow-wrap:anywhere]">{asset.tag}</h1>
      <p className="text-grey">{placeWords(asset)}</p>
      <FigureList
        items={[
          { name: 'Class', value: asset.className },
          ...(asset.quantity > 1 ? [{ name: 'Items', value: formatCount(asset.quantity) }] : []),
          { name: 'In service since', value: formatCalendarDate(asset.inServiceOn) },
          { name: 'Watched since', value: formatCalendarDate(asset.watchedFrom) },
          ...(asset.retiredOn === null
            ? []
            : [{ name: 'Retired', value: formatCalendarDate(asset.retiredOn) }]),
          { name: 'Failures', value: formatCount(position.failures) },
          { name: 'Renewed by plan', value: formatCount(position.plannedRenewals) },
        ]}
      />
      <h2 className="mt-8">Over time</h2>
      <div className="mt-2 max-md:hidden">
        <PositionTimeline timeline={timeline} width={640} withYears />
      </div>
      <div className="mt-2 md:hidden">
        <PositionTimeline timeline={timeline} width={340} withYears />
      </div>
      <p className="mt-1">{timelineSentence(timeline)}</p>
      <div className="mt-2">
        <TimelineKey />
      </div>
      <div className="mt-3">
        <Disclosure summary="The days behind it">
          <ol>
            {[...timeline.events].reverse().map(({ day, kind }, index) => (
              <li key={index} className="border-hair border-b py-1">
                <span className="tabular">{formatCalendarDate(day)}</span>: {timelineNames[kind]}
              </li>
            ))}
          </ol>
        </Disclosure>
      </div>
      <p className="no-print mt-6 flex flex-wrap gap-3">
        {mayLog && asset.retiredOn === null && (
          <LinkButton to={href('/log/:assetId', { assetId })}>Log a failure</LinkButton>
        )}
        {mayDate && (
          <LinkButton tone="quiet" to={href('/assets/:assetId/fitted', { assetId })}>
            When its items were fitted
          </LinkButton>
        )}
      </p>
      <p className="mt-4">
        <Link to={href('/classes/:classId/positions', { classId: asset.classId })}>
          The other places of this class
        </Link>
      </p>
    </article>
  );
}
