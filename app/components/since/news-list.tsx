import { Form, href, Link } from 'react-router';
import { formatRoughMoney } from '~/advice/rough-money';
import { VerdictWord } from '~/components/verdict-word';
import { formatCalendarDate } from '~/format/date';
import type { NewsItem, NewsOfClass } from '~/models/class-news.server';

interface NewsListProps {
  classes: readonly NewsOfClass[];
  currency: string;
  /** Whether these are the ones seen already. */
  seen: boolean;
  /** The address of the page, to come back to. */
  returnTo: string;
}

/** News by class, the worst first; each class can be marked as seen. */
export function NewsList({ classes, currency, seen, returnTo }: NewsListProps) {
  return (
    <ul className="mt-4">
      {classes.map((one) => (
        <li key={one.classId} className="border-hair border-t py-5">
          <NewsOfOneClass {...{ one, currency, seen, returnTo }} />
        </li>
      ))}
    </ul>
  );
}

function NewsOfOneClass({
  one,
  currency,
  seen,
  returnTo,
}: Omit<NewsListProps, 'classes'> & { one: NewsOfClass }) {
  const { classId, className, verdict, isMarked, news } = one;
  return (
    <div className="grid gap-x-11 gap-y-2 lg:grid-cols-[18rem_minmax(0,1fr)]">
      <div>
        <h2 className="text-[1.15rem]">
          <Link to={href('/classes/:classId', { classId })} className="inline-flex min-h-11 items-center">
            {className}
          </Link>
        </h2>
        <p>
          <VerdictWord verdict={verdict} />
        </p>
        {isMarked && (
          <p className="text-danger text-[0.9rem]">statutory or endangers people: evidence only</p>
        )}
        <SeenForm news={news} seen={seen} returnTo={returnTo} label={className} />
      </div>
      <ul className="grid content-start gap-3">
        {news.map((item) => (
          <li key={item.id}>
            <Item item={item} currency={currency} />
          </li>
        ))}
      </ul>
    </div>
  );
}

function Item({ item, currency }: { item: NewsItem; currency: string }) {
  const { kind, sentence, why, asOf, moneyPerYearMinor } = item;
  return (
    <>
      <p className={kind === 'alarm-raised' ? 'border-amber border-l-4 pl-3 font-bold' : 'font-bold'}>
        {sentence}
        {moneyPerYearMinor !== null && (
          <span className="font-normal"> About {formatRoughMoney(moneyPerYearMinor, currency)} a year.</span>
        )}
      </p>
      <p>{why}</p>
      <p className="text-grey text-[0.9rem]">night of {formatCalendarDate(asOf)}</p>
    </>
  );
}

interface SeenFormProps {
  news: readonly Pick<NewsItem, 'id'>[];
  seen: boolean;
  returnTo: string;
  /** What it is about, for those who hear the button alone. */
  label: string;
}

/** Marks some news as seen, or takes that back. */
export function SeenForm({ news, seen, returnTo, label }: SeenFormProps) {
  return (
    <Form method="post" action={href('/since')} className="no-print">
      <input type="hidden" name="returnTo" value={returnTo} />
      <input type="hidden" name="news" value={news.map(({ id }) => id).join(',')} />
      <button
        type="submit"
        name="intent"
        value={seen ? 'unseen' : 'seen'}
        className="min-h-11 font-bold underline"
      >
        {seen ? 'Mark as not seen' : 'Mark as seen'}
        <span className="sr-only">: {label}</span>
      </button>
    </Form>
  );
}
