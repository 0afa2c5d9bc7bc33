import { Form, href, Link, redirect } from 'react-router';
import { z } from 'zod';
import { Button } from '~/components/button';
import { EmptyState } from '~/components/empty-state';
import { AssetList } from '~/components/log/asset-list';
import { Pagination } from '~/components/pagination';
import { TextField } from '~/components/text-field';
import { findAssetIdByTag, listAssets, listClassesAtSite, listRecentAssets } from '~/models/assets.server';
import { listSites } from '~/models/sites.server';
import { requireRole, requireSite } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/log-find-asset';

const pageSize = 30;
const recentCount = 4;

const querySchema = z.object({
  tag: z.string().trim().max(60).catch(''),
  site: z.uuid().optional().catch(undefined),
  class: z.uuid().optional().catch(undefined),
  page: z.coerce.number().int().min(1).max(100_000).catch(1),
});

export async function loader({ context, request }: Route.LoaderArgs) {
  const viewer = requireRole(context, request, 'technician', 'lead');
  const db = database();
  const scope = viewer.siteIds;
  const query = querySchema.parse(Object.fromEntries(new URL(request.url).searchParams));
  const { tag, page } = query;

  if (tag) {
    const exact = await findAssetIdByTag(db, tag, scope);
    if (exact) throw redirect(href('/log/:assetId', { assetId: exact }));
    const found = await listAssets(db, { scope, tagPart: tag }, paging(page));
    return { step: 'assets' as const, tag, page, site: null, className: null, classId: null, ...found };
  }

  const sites = await listSites(db, scope);
  const siteId = query.site ?? (sites.length === 1 ? sites[0]?.id : undefined);
  if (siteId === undefined) {
    return {
      step: 'start' as const,
      tag,
      sites,
      recent: await listRecentAssets(db, viewer.id, scope, recentCount),
    };
  }
  requireSite(viewer, siteId);
  const site = sites.find(({ id }) => id === siteId);
  if (!site) throw new Response('There is nothing here.', { status: 404 });

  const classes = await listClassesAtSite(db, siteId);
  if (query.class === undefined) {
    const recent = query.site === undefined ? await listRecentAssets(db, viewer.id, scope, recentCount) : [];
    return { step: 'classes' as const, tag, site, classes, recent, onlySite: sites.length === 1 };
  }
  const chosen = classes.find(({ id }) => id === query.class);
  return {
    step: 'assets' as const,
    tag,
    page,
    site,
    className: chosen?.name ?? null,
    classId: query.class,
    ...(await listAssets(db, { scope, siteId, classId: query.class }, paging(page))),
  };
}

const paging = (page: number) => ({ page, perPage: pageSize });

export const meta: Route.MetaFunction = () => [{ title: 'Log a failure · Intervale' }];

export default function LogFindAsset({ loaderData: found }: Route.ComponentProps) {
  return (
    <div className="max-w-[40rem]">
      <h1>Log a failure</h1>
      <Form method="get" role="search" className="mt-2 flex items-end gap-x-3">
        <div className="min-w-0 grow">
          <TextField
            key={found.tag}
            name="tag"
            type="search"
            label="Tag of the asset"
            hint="A part of it will do."
            defaultValue={found.tag}
            autoCapitalize="characters"
            autoComplete="off"
            enterKeyHint="search"
            maxLength={60}
          />
        </div>
        <Button className="mb-4 max-md:w-auto!">Find</Button>
      </Form>
      {found.step === 'start' && (
        <>
          <Recent assets={found.recent} />
          <h2 className="mt-8 mb-1">Or by site</h2>
          {found.sites.length === 0 ? (
            <EmptyState title="No site is open to you yet">
              Ask your administrator to add you to the sites you work at.
            </EmptyState>
          ) : (
            <LinkRows rows={found.sites.map(({ id, name }) => ({ to: `?site=${id}`, label: name }))} />
          )}
        </>
      )}
      {found.step === 'classes' && (
        <>
          <Recent assets={found.recent} />
          <Way steps={found.onlySite ? [] : [{ to: href('/log'), label: 'All sites' }]} />
          <h2 className="mt-4 mb-1">{found.site.name}: what kind of thing?</h2>
          {found.classes.length === 0 ? (
            <EmptyState title="No assets here yet">
              Nothing in the register stands at {found.site.name}.
            </EmptyState>
          ) : (
            <LinkRows
              rows={found.classes.map(({ id, name, assets }) => ({
                to: `?site=${found.site.id}&class=${id}`,
                label: name,
                aside: String(assets),
              }))}
            />
          )}
        </>
      )}
      {found.step === 'assets' && <FoundAssets found={found} />}
    </div>
  );
}

type AssetsStep = Extract<Awaited<ReturnType<typeof loader>>, { step: 'assets' }>;

function FoundAssets({ found }: { found: AssetsStep }) {
  const { site, className, classId, tag } = found;
  const query: Record<string, string> = site ? { site: site.id, class: classId } : { tag };
  return (
    <>
      <Way
        steps={
          site
            ? [
                { to: href('/log'), label: 'All sites' },
                { to: `?site=${site.id}`, label: site.name },
              ]
            : [{ to: href('/log'), label: 'Start again' }]
        }
      />
      <h2 className="mt-4 mb-1">
        {site ? `${className ?? 'Nothing of this kind'}: which one?` : `Tags with “${tag}”`}
      </h2>
      {found.assets.length === 0 ? (
        <EmptyState title={site ? 'None here' : 'No tag has this in it'}>
          {site
            ? 'Nothing of this kind stands at this site.'
            : 'At your sites, that is. Try a shorter part of it, or go by site.'}
        </EmptyState>
      ) : (
        <AssetList assets={found.assets} />
      )}
      {found.total > found.assets.length && (
        <Pagination
          page={found.page}
          pageSize={pageSize}
          total={found.total}
          noun="assets"
          hrefFor={(page) => `?${new URLSearchParams({ ...query, page: String(page) })}`}
        />
      )}
    </>
  );
}

function Recent({ assets }: { assets: Parameters<typeof AssetList>[0]['assets'] }) {
  if (assets.length === 0) return null;
  return (
    <>
      <h2 className="mt-4 mb-1">Logged by you lately</h2>
      <AssetList assets={assets} />
    </>
  );
}

function Way({ steps }: { steps: readonly { to: string; label: string }[] }) {
  if (steps.length === 0) return null;
  return (
    <p className="flex flex-wrap gap-x-5">
      {steps.map((step) => (
        <Link key={step.to} to={step.to} className="inline-flex min-h-11 items-center">
          {step.label}
        </Link>
      ))}
    </p>
  );
}

function LinkRows({ rows }: { rows: readonly { to: string; label: string; aside?: string }[] }) {
  return (
    <ul className="border-hair border-t">
      {rows.map((row) => (
        <li key={row.to} className="border-hair border-b">
          <Link to={row.to} className="hover:bg-pick flex min-h-14 items-center gap-4 py-2 no-underline">
            <span className="font-bold">{row.label}</span>
            {row.aside !== undefined && <span className="text-grey ml-auto text-[0.9rem]">{row.aside}</span>}
          </Link>
        </li>
      ))}
    </ul>
  );
}
