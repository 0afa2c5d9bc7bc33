import { href } from 'react-router';
import type { ImportSummary } from '~/models/imports.server';
import { LinkButton } from '../button';
import { formatNoun } from '~/format/number';
import { formatDateTime } from '~/format/date';
import { Notice } from '../notice';

/** What became of an import, and what to know about its file. */
export function Outcome({ summary, timeZone }: { summary: ImportSummary; timeZone: string }) {
  const { state, kind, problem, header, counts, appliedAt } = summary;
  return (
    <>
      {state === 'failed' && (
        <Notice tone="danger" title="The file could not be read">
          <p>{problem}</p>
          <div className="mt-3">
            <LinkButton to={`${href('/imports/new')}?kind=${kind}`} tone="quiet">
              Upload a file again
            </LinkButton>
          </div>
        </Notice>
      )}
      {state === 'applied' && appliedAt !== null && (
        <Notice title={`Applied ${formatDateTime(appliedAt, timeZone)}`}>
          {formatNoun(counts.new, 'row')} added, {formatNoun(counts.changed, 'row')} changed
          {counts.rejected > 0 && `, ${formatNoun(counts.rejected, 'row')} left out as rejected`}. Verdicts
          take it in with the next night.
        </Notice>
      )}
      {state === 'discarded' && <Notice title="Discarded">Nothing of this file was written.</Notice>}
      {header?.encoding === 'latin-1' && (
        <Notice tone="warning" title="The file is not UTF-8">
          It was read as Latin-1. Check the accented letters.
        </Notice>
      )}
    </>
  );
}
