import { renderToStaticMarkup } from 'react-dom/server';
import { createRoutesStub } from 'react-router';
import { describe, expect, it } from 'vitest';
import { Preview } from '~/components/clean/preview';
import { RecordFilter } from '~/components/clean/record-filter';
import { CorrectionFields } from '~/components/clean/correction-fields';
import { MergeForm } from '~/components/clean/merge-form';
import { listStateOf } from '~/components/clean/list-state';
import type { ChangedMeanwhile, CorrectedRecord } from '~/models/correction-plan.server';
import type { CorrectionPreview } from '~/models/correction-preview.server';

function render(element: React.ReactElement): string {
  const Stub = createRoutesStub([{ path: '*', Component: () => element }]);
  return renderToStaticMarkup(<Stub initialEntries={['/']} />);
}
const textOf = (markup: string) => markup.replaceAll(/<[^>]+>/g, '').replaceAll(/\s+/g, ' ');

const fields: CorrectedRecord['before'] = {
  failedOn: '2026-02-03',
  failedAt: null,
  modeId: null,
  effect: 'renewed',
  outsideCause: null,
  itemFittedOn: null,
  itemAge: null,
  voidReason: null,
};
const record: CorrectedRecord = {
  id: 'r1',
  tag: 'FB-PMP-01',
  siteName: 'Fenwick Baths',
  itemSingular: 'seal',
  version: 1,
  before: fields,
  after: { ...fields, itemFittedOn: '2026-03-01' },
  refusal: null,
};
const plan: CorrectionPreview = {
  correctionId: 'c1',
  correction: { kind: 'fitted', fittedOn: '2026-03-01' },
  chosen: 'r1:1',
  all: false,
  records: [record],
  total: 1,
  unchanged: 0,
  refused: 0,
  meanwhile: [],
  modeGone: false,
  maySave: true,
  effect: null,
};
const names = { modes: {}, clock: 'calendar-days', backTo: '/', timeZone: 'Europe/London' } as const;
const shown = (preview: Partial<CorrectionPreview>) =>
  render(<Preview preview={{ ...plan, ...preview }} {...names} />);

describe('the preview of a correction', () => {
  it('lists each record with what it was and would be, and counts the rest', () => {
    const text = textOf(shown({ total: 61 }));
    expect(text).toContain('FB-PMP-01, Fenwick Baths, 3 Feb 2026');
    expect(text).toMatch(/Item fitted: not known →to 1 Mar 2026/);
    expect(text).toContain('and 60 more in the same way');
    expect(text).toContain('Save 61 corrections');
  });

  it('cannot be saved with a refusal in it, and offers to leave that out', () => {
    const refusal = { code: 'fitted-after-failed', day: '2026-03-01' } as const;
    const text = textOf(shown({ records: [{ ...record, refusal }], total: 2, refused: 1, maySave: false }));
    expect(text).toContain('Fitted on 1 March 2026, the seal cannot have failed on 3 February 2026.');
    expect(text).toContain('1 failure would be corrected');
    expect(text).toContain('Leave it out and look again');
    expect(text).not.toContain('Save');
  });

  it('tells who changed what meanwhile, and keeps the choice', () => {
    const meanwhile: ChangedMeanwhile = {
      id: 'r1',
      tag: 'FB-PMP-01',
      failedOn: '2026-02-03',
      change: {
        action: 'void',
        personName: 'Ada Ferris',
        at: new Date('2026-05-20T09:00:00Z'),
        before: { voidReason: null },
        after: { voidReason: 'logged twice' },
      },
    };
    const markup = shown({ meanwhile: [meanwhile], records: [], total: 0, maySave: false });
    expect(textOf(markup)).toMatch(
      /FB-PMP-01, 3 Feb 2026: Ada Ferris voided it, 20 May 2026, 10:00Counts: yes →to no, voided: logged twice/,
    );
    expect(textOf(markup)).toContain('Look again with what they are now');
    expect(markup).toContain('name="chosen" value="r1:1"');
  });
});

it('no two fields of the page have the same id', () => {
  const modes = [
    { id: 'a', name: 'Leaking', failures: 1 },
    { id: 'b', name: 'Cracked', failures: 1 },
  ];
  const page = render(
    <>
      <RecordFilter state={listStateOf(new Request('http://intervale.test/'))} sites={[]} modes={modes} />
      <CorrectionFields modes={modes} total={2} elsewhere={['r1:1']} itemPlural="seals" refused={null} />
      <MergeForm modes={modes} action="/" refused={null} />
    </>,
  );
  const ids = [...page.matchAll(/ id="([^"]+)"/g)].map(([, id]) => id);
  expect(ids.length).toBeGreaterThan(15);
  expect(new Set(ids).size).toBe(ids.length);
});
