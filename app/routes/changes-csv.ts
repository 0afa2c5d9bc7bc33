import { changeInWords } from '~/advice/change-words';
import { followUpNames, stateWords } from '~/components/changes/change-words';
import { changesFilter, changesSearch } from '~/components/changes/search';
import { minorToPlain } from '~/models/money';
import { everyChange } from '~/models/schedule-changes.server';
import { csvDownload } from '~/services/csv-download.server';
import { organisation, requireRole } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/changes-csv';

/** Every change that the filter leaves. */
export function loader({ context, request }: Route.LoaderArgs) {
  requireRole(context, request, 'lead', 'manager', 'admin');
  const { currency } = organisation(context);
  const state = changesSearch.parse(Object.fromEntries(new URL(request.url).searchParams));
  const money = (minor: number | undefined) => minorToPlain(minor ?? null, currency);
  return csvDownload(
    'changes.csv',
    [
      { header: 'class', cell: ({ className }) => className },
      { header: 'change', cell: (change) => changeInWords(change, change.clock) },
      { header: 'clock', cell: ({ clock }) => clock },
      { header: 'interval before', cell: ({ from }) => from },
      { header: 'interval after', cell: ({ to }) => to },
      { header: 'assets on trial', cell: ({ assets }) => (assets > 0 ? assets : null) },
      { header: 'state', cell: (change) => stateWords[change.state] },
      { header: 'put forward by', cell: ({ putForwardByName }) => putForwardByName },
      { header: 'put forward at', cell: ({ putForwardAt }) => putForwardAt.toISOString() },
      { header: 'decided by', cell: ({ decidedByName }) => decidedByName },
      { header: 'in effect from', cell: ({ takesEffectOn }) => takesEffectOn },
      { header: 'taken back on', cell: ({ takenBackOn }) => takenBackOn },
      { header: `expected saving a year, ${currency}`, cell: ({ saving }) => money(saving?.value) },
      { header: 'at least (middle 80 %)', cell: ({ saving }) => money(saving?.low) },
      { header: 'at most (middle 80 %)', cell: ({ saving }) => money(saving?.high) },
      { header: 'share of the draws in which it saves', cell: ({ share }) => share },
      {
        header: 'what came of it',
        cell: ({ followUp }) => (followUp === null ? null : followUpNames[followUp.word]),
      },
      { header: 'in a sentence', cell: ({ followUp }) => followUp?.sentence ?? null },
      { header: 'as of', cell: ({ followUpAsOf }) => followUpAsOf },
      { header: 'reason', cell: ({ reason }) => reason },
    ],
    everyChange(database(), changesFilter(state)),
  );
}
