import { Form, href, useNavigation } from 'react-router';
import type { ImportSummary } from '~/models/imports.server';
import { Button, LinkButton } from '../button';
import { formatNoun } from '~/format/number';
import { Notice } from '../notice';

/** What can be done with an import that waits: write all of it, write the good rows, correct, or discard. */
export function Decision({ summary }: { summary: ImportSummary }) {
  const { id, kind, counts } = summary;
  const navigation = useNavigation();
  const busy = navigation.state !== 'idle' && navigation.formMethod === 'POST';
  const good = counts.new + counts.changed;
  return (
    <Form method="post" className="my-5">
      {counts.rejected > 0 && (
        <Notice tone="warning" title={`${formatNoun(counts.rejected, 'row')} cannot be taken as they stand`}>
          All or nothing is not possible while rows are rejected. Correct them and upload the file again, or
          take the good rows now and the corrected ones later.
        </Notice>
      )}
      {good === 0 && counts.rejected === 0 && (
        <Notice title="Nothing to write">Everything in this file is held already, just so.</Notice>
      )}
      <div className="flex flex-wrap gap-3">
        {good > 0 && counts.rejected === 0 && (
          <Button name="intent" value="all-or-nothing" disabled={busy}>
            Write {formatNoun(good, 'row')}, all or nothing
          </Button>
        )}
        {counts.rejected > 0 && (
          <LinkButton
            to={href('/imports/:importId/rejected.csv', { importId: id })}
            tone="quiet"
            reloadDocument
          >
            Download the rejected rows
          </LinkButton>
        )}
        {counts.rejected > 0 && (
          <LinkButton to={`${href('/imports/new')}?kind=${kind}`} tone="quiet">
            Upload a corrected file
          </LinkButton>
        )}
        {good > 0 && counts.rejected > 0 && (
          <Button name="intent" value="good-rows" tone="quiet" disabled={busy}>
            Write only the {good === 1 ? 'good row' : formatNoun(good, 'good row')}
          </Button>
        )}
        <Button name="intent" value="discard" tone="danger" disabled={busy}>
          Discard
        </Button>
      </div>
      <p role="status" className="text-grey mt-2">
        {busy && 'Writing. A large file takes a minute or two; keep this page open.'}
      </p>
    </Form>
  );
}
