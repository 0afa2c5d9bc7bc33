import { Form, href, Link } from 'react-router';
import { z } from 'zod';
import { changeInWords } from '~/advice/change-words';
import { Button } from '~/components/button';
import { EmptyState } from '~/components/empty-state';
import { NewsList } from '~/components/since/news-list';
import { Notice } from '~/components/notice';
import { Pagination } from '~/components/pagination';
import { formatCalendarDate, formatDateTime } from '~/format/date';
import { formatNoun } from '~/format/number';
import { listNews, markSeen, markUnseen, type NewsOfClass } from '~/models/class-news.server';
import { lastNight, type LastNight } from '~/models/job-runs.server';
import type { ChangeRow } from '~/models/schedule-change';
import { listChanges } from '~/models/schedule-changes.server';
import { now } from '~/services/clock.server';
import { redirectWithToast } from '~/services/flash.server';
import { ownPath } from '~/services/own-path.server';
import { organisation, requireRole } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/since';

const pageSize = 30;
/** So many changes that wait are named at once: a manager opens one with a tap and decides with the next. */
const mostWaiting = 5;
const searchSchema = z.object({
  show: z.enum(['seen']).optional().catch(undefined),
  page: z.coerce.number().int().min(1).max(100_000).catch(1),
});

const formSchema = z.object({
  intent: z.enum(['seen', 'unseen']),
  news: z
    .string()
    .transform((ids) => ids.split(',').filter(Boolean))
    .pipe(z.array(z.uuid()).max(2000)),
  returnTo: z.string().optional(),
});

export const meta: Route.MetaFunction = () => [{ title: 'Since you last looked · Intervale' }];

export async function loader({ context, request }: Route.LoaderArgs) {
  const viewer = requireRole(context, request, 'lead', 'manager');
  const { show, page } = searchSchema.parse(Object.fromEntries(new URL(request.url).searchParams));
  const db = database();
  const seen = show === 'seen';
  const [news, night, waiting] = await Promise.all([
    listNews(db, viewer.id, { seen, page, pageSize }),
    lastNight(db),
    viewer.roles.includes('manager')
      ? listChanges(db, { group: 'to-decide', page: 1, pageSize: mostWaiting })
      : null,
  ]);
  const { currency, timeZone } = organisation(context);
  return { ...news, night, waiting, seen, page, currency, timeZone };
}

export async function action({ context, request }: Route.ActionArgs) {
  const viewer = requireRole(context, request, 'lead', 'manager');
  const form = formSchema.safeParse(Object.fromEntries(await request.formData()));
  if (!form.success) throw new Response('This form is not one of ours.', { status: 400 });
  const { intent, news, returnTo } = form.data;
  const target = ownPath(returnTo, href('/since'));
  if (intent === 'unseen') {
    await markUnseen(database(), viewer.id, news);
    return redirectWithToast(target, { message: 'Not seen again.' });
  }
  await markSeen(database(), viewer.id, news, now());
  return redirectWithToast(target, {
    message: 'Marked as seen.',
    undo: {
      action: href('/since'),
      label: 'Not seen after all',
      fields: { intent: 'unseen', news: news.slice(0, mostToUndo).join(','), returnTo: target },
    },
  });
}

/** What a message can carry to take back; beyond it the list of what was seen does. */
const mostToUndo = 40;

function addressOf({ seen, page }: { seen: boolean; page: number }): string {
  const search = new URLSearchParams();
  if (seen) search.set('show', 'seen');
  if (page > 1) search.set('page', String(page));
  const query = search.toString();
  return href('/since') + (query && `?${query}`);
}

export default function Since({ loaderData }: Route.ComponentProps) {
  const { classes, total, items, night, waiting, seen, page, currency, timeZone } = loaderData;
  return (
    <>
      <h1>{seen ? 'What you have seen' : 'Since you last looked'}</h1>
      <NightLine night={night} timeZone={timeZone} />
      {waiting !== null && waiting.total > 0 && !seen && <Waiting waiting={waiting} />}
      {classes.length === 0 ? (
        <Nothing seen={seen} night={night} />
      ) : (
        <>
          <p className="mt-3">
            {formatNoun(items, 'thing')} in {formatNoun(total, 'class', 'classes')}, the worst first.
          </p>
          <NewsList
            classes={classes}
            currency={currency}
            seen={seen}
            returnTo={addressOf({ seen, page: 1 })}
          />
          {!seen && <AllSeen classes={classes} />}
          <Pagination
            page={page}
            pageSize={pageSize}
            total={total}
            noun="classes with news"
            hrefFor={(to) => addressOf({ seen, page: to })}
          />
        </>
      )}
      <p className="no-print mt-6">
        <Link to={addressOf({ seen: !seen, page: 1 })} className="inline-flex min-h-11 items-center">
          {seen ? 'What is new' : 'What you have seen already'}
        </Link>
      </p>
    </>
  );
}

function Waiting({ waiting: { rows, total } }: { waiting: { rows: readonly ChangeRow[]; total: number } }) {
  return (
    <Notice
      tone="warning"
      title={`${formatNoun(total, 'change')} ${total === 1 ? 'waits' : 'wait'} for a decision`}
    >
      <ul>
        {rows.map((change) => (
          <li key={change.id}>
            <Link
              to={href('/changes/:changeId', { changeId: change.id })}
              className="inline-flex min-h-11 items-center"
            >
              {change.className}: {changeInWords(change, change.clock)}
            </Link>
          </li>
        ))}
      </ul>
      {total > rows.length && (
        <p>
          <Link to={`${href('/changes')}?group=to-decide`}>All that wait</Link>
        </p>
      )}
    </Notice>
  );
}

function AllSeen({ classes }: { classes: readonly NewsOfClass[] }) {
  const ids = classes.flatMap(({ news }) => news.map(({ id }) => id));
  return (
    <Form method="post" className="no-print border-hair border-t pt-5">
      <input type="hidden" name="news" value={ids.join(',')} />
      <Button name="intent" value="seen" tone="quiet">
        Mark all {formatNoun(ids.length, 'thing')} on this page as seen
      </Button>
    </Form>
  );
}

function NightLine({ night, timeZone }: { night: LastNight | null; timeZone: string }) {
  if (night === null) return null;
  const { asOf, finishedAt, classes, problems } = night;
  return (
    <p className="text-grey">
      As of the end of {formatCalendarDate(asOf)}: {formatNoun(classes, 'class', 'classes')} assessed
      {finishedAt !== null && `, ready ${formatDateTime(finishedAt, timeZone, 'short')}`}
      {problems > 0 && `; ${formatNoun(problems, 'class', 'classes')} could not be computed`}.
    </p>
  );
}

function Nothing({ seen, night }: { seen: boolean; night: LastNight | null }) {
  if (seen) return <EmptyState title="You have not marked anything as seen yet" />;
  if (night === null) {
    return (
      <EmptyState title="Not assessed yet">
        The first assessment comes with the next night. From then on, what changes from night to night stands
        here.
      </EmptyState>
    );
  }
  return (
    <EmptyState title="Nothing new">
      No verdict changed, no alarm was raised and no caution appeared that you have not seen. The{' '}
      <Link to={href('/classes')}>classes</Link> stand as they did.
    </EmptyState>
  );
}
