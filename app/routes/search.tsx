import { Form, Link } from 'react-router';
import { Button } from '~/components/button';
import { EmptyState } from '~/components/empty-state';
import { foundPath } from '~/components/search/found-path';
import { TextField } from '~/components/text-field';
import { formatNoun } from '~/format/number';
import { searchFor } from '~/models/search.server';
import { requireViewer } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/search';

const most = 50;
const longestQuery = 80;

export const meta: Route.MetaFunction = () => [{ title: 'Search · Intervale' }];

export async function loader({ context, request }: Route.LoaderArgs) {
  const viewer = requireViewer(context, request);
  const search = new URL(request.url).searchParams;
  const query = (search.get('q') ?? '').slice(0, longestQuery);
  const limit = search.has('suggest') ? 6 : most;
  return { query, found: await searchFor(database(), viewer.siteIds, query, limit) };
}

export default function Search({ loaderData }: Route.ComponentProps) {
  const { query, found } = loaderData;
  const isFull = found.length >= most;
  return (
    <div className="max-w-[46rem]">
      <h1>Search</h1>
      <Form role="search" className="flex flex-wrap items-end gap-x-4 [&_button]:mb-4">
        <TextField
          type="search"
          name="q"
          label="A class, or an asset by its tag"
          defaultValue={query}
          maxLength={longestQuery}
        />
        <Button tone="quiet">Search</Button>
      </Form>
      {query.trim() !== '' && found.length === 0 && (
        <EmptyState title={`Nothing is called “${query}”`}>
          A part of a class’s name will do; of a tag, how it begins, or three letters of it and more.
        </EmptyState>
      )}
      {found.length > 0 && (
        <>
          <p className="text-grey" role="status">
            {isFull
              ? `The first ${formatNoun(most, 'thing')} of each kind`
              : `${formatNoun(found.length, 'thing')} found`}
          </p>
          <ul className="mt-2">
            {found.map((one) => (
              <li key={one.id} className="border-hair border-b">
                <Link to={foundPath(one)} className="inline-flex min-h-11 items-center font-bold">
                  {one.name}
                </Link>{' '}
                <span className="text-grey">
                  {one.kind === 'class' ? 'class, ' : ''}
                  {one.detail}
                </span>
              </li>
            ))}
          </ul>
        </>
      )}
    </div>
  );
}
