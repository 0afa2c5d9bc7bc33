import type { ReactElement } from 'react';
import { renderToStaticMarkup } from 'react-dom/server';
import { createRoutesStub } from 'react-router';
import { describe, expect, it } from 'vitest';

import { CautionList } from '~/components/caution-list';
import { DataTable, type Column } from '~/components/data-table';
import { ErrorSummary } from '~/components/error-summary';
import { Estimate } from '~/components/estimate';
import { Page } from '~/components/page';
import { Pagination } from '~/components/pagination';
import { RadioRows } from '~/components/radio-rows';
import { TextField } from '~/components/text-field';
import { ThemeSwitch } from '~/components/theme-switch';
import { Toast } from '~/components/toast';
import { VerdictWord } from '~/components/verdict-word';

function render(element: ReactElement): string {
  const Stub = createRoutesStub([{ path: '*', Component: () => element }]);
  return renderToStaticMarkup(<Stub initialEntries={['/classes']} />);
}

/** What is left to read once the tags are gone. */
const textOf = (markup: string) => markup.replaceAll(/<[^>]+>/g, '');

describe('fields', () => {
  it('tie hint and error to the control', () => {
    const markup = render(
      <TextField name="when" label="When?" hint="The day." errors={['Not in the future']} />,
    );
    expect(markup).toMatch(
      /<input[^>]*id="when"[^>]*aria-describedby="when-hint when-error"[^>]*aria-invalid="true"/,
    );
    expect(markup).toContain('<label for="when"');
    expect(markup).toMatch(/id="when-error"[^>]*><p>Not in the future</);
  });

  it('say nothing of an error there is not', () => {
    const markup = render(<TextField name="when" label="When?" />);
    expect(markup).not.toMatch(/aria-invalid=|aria-describedby=/);
  });

  it('let radio rows be named, described and one of them picked', () => {
    const rows = [
      { value: 'a', label: 'Leaking', aside: '9 before' },
      { value: 'b', label: 'Broken' },
    ];
    const markup = render(
      <RadioRows name="mode" label="What failed?" rows={rows} defaultValue="b" errors={['Pick one']} />,
    );
    expect(markup).toContain('<legend');
    expect(markup).toMatch(/role="radiogroup"[^>]*aria-describedby="mode-error"[^>]*aria-invalid="true"/);
    expect(markup.match(/checked=""/g)).toHaveLength(1);
    expect(markup).toMatch(/value="b"[^>]*checked=""|checked=""[^>]*value="b"/);
  });

  it('lead from the summary of errors to the field', () => {
    expect(render(<ErrorSummary errors={[{ fieldId: 'when', message: 'Enter a day' }]} />)).toContain(
      'href="#when"',
    );
    expect(render(<ErrorSummary errors={[]} />)).toBe('');
  });
});

describe('DataTable', () => {
  interface Row {
    name: string;
    failures: number;
  }
  const columns: Column<Row>[] = [
    {
      key: 'name',
      header: 'Class',
      cell: (row) => row.name,
      rowHeader: true,
      sortable: true,
    },
    {
      key: 'failures',
      header: 'Failures',
      cell: (row) => row.failures,
      sortable: true,
      firstDirection: 'desc',
    },
  ];
  const props = {
    caption: 'Classes',
    rows: [{ name: 'Seal', failures: 28 }],
    rowKey: (row: Row) => row.name,
    columns,
    hrefFor: ({ key, direction }: { key: string; direction: string }) =>
      `/classes?site=2&sort=${key}.${direction}`,
  };

  it('sorts by links that keep the address and turn round', () => {
    const markup = render(<DataTable {...props} sort={{ key: 'name', direction: 'asc' }} />);
    expect(markup).toContain('href="/classes?site=2&amp;sort=name.desc"');
    expect(markup).toContain('href="/classes?site=2&amp;sort=failures.desc"');
    expect(markup.match(/aria-sort/g)).toHaveLength(1);
    expect(markup).toMatch(/aria-sort="ascending"[^>]*><a[^>]*>Class/);
  });

  it('keeps the name of every value for a phone, and its rows named', () => {
    const markup = render(<DataTable {...props} />);
    expect(markup).toMatch(/<th scope="row" role="rowheader"/);
    expect(markup).toMatch(
      /<td role="cell"><span class="data-table-label" aria-hidden="true">Failures<\/span><span>28/,
    );
  });

  it('shows what was given for no rows', () => {
    expect(render(<DataTable {...props} rows={[]} empty={<p>No classes yet</p>} />)).toBe(
      '<p>No classes yet</p>',
    );
  });
});

it('pages by links, and stays within the pages there are', () => {
  const hrefFor = (page: number) => `?page=${page}`;
  const middle = render(<Pagination page={2} pageSize={50} total={120} hrefFor={hrefFor} noun="classes" />);
  expect(textOf(middle)).toContain('51 to 100 of 120 classes');
  expect(middle).toContain('?page=1"');
  expect(middle).toContain('?page=3"');
  const beyond = render(<Pagination page={99} pageSize={50} total={120} hrefFor={hrefFor} noun="classes" />);
  expect(textOf(beyond)).toContain('101 to 120 of 120 classes');
  expect(beyond).not.toContain('rel="next"');
  expect(
    textOf(render(<Pagination page={1} pageSize={50} total={0} hrefFor={hrefFor} noun="classes" />)),
  ).toBe('0 to 0 of 0 classes');
});

it('never shows an estimate without its interval and n', () => {
  expect(textOf(render(<Estimate value={1.399579} low={1.09487} high={1.75534} n={48} />))).toBe(
    '1.40 (1.09 to 1.76), n = 48',
  );
  const inDays = (value: number) => `${value} days`;
  const bare = (value: number) => `${value}`;
  const life = { low: 150, high: 240, format: inDays, formatEnd: bare };
  expect(textOf(render(<Estimate {...life} value={188} />))).toBe('188 days (150 to 240)');
  expect(textOf(render(<Estimate {...life} value={null} />))).toBe('150 days to 240 days');
  expect(textOf(render(<Estimate value={null} low={null} high={null} n={0} />))).toBe(
    'cannot be estimated, n = 0',
  );
  expect(textOf(render(<Estimate value={null} low={1200} high={null} n={0} />))).toBe(
    'at least 1\u202f200, n = 0',
  );
});

it('tells a verdict by word and glyph, not by colour alone', () => {
  const glyphs = (['wear-out', 'memoryless', 'early-life', 'undecided'] as const).map((verdict) => {
    const markup = render(<VerdictWord verdict={verdict} />);
    expect(textOf(markup)).toBe(verdict);
    return (/ d="[^"]+"/.exec(markup)?.[0] ?? '') + markup.includes('stroke-dasharray');
  });
  expect(new Set(glyphs).size).toBe(4);
});

it('lists cautions in order, each with what to do', () => {
  const caution = { sentence: '9 failures.', action: 'Wait.', severity: 'caution' as const };
  const markup = render(
    <CautionList
      cautions={[
        { ...caution, code: 'few-failures' },
        { ...caution, code: 'statutory', severity: 'stop' },
      ]}
    />,
  );
  expect([...markup.matchAll(/data-caution="([^"]+)"/g)].map(([, code]) => code)).toEqual([
    'few-failures',
    'statutory',
  ]);
  expect(textOf(markup)).toBe('Caution. 9 failures.Wait.Evidence only. 9 failures.Wait.');
});

it('undoes and changes the theme by plain forms', () => {
  const toast = render(<Toast undo={{ action: '/failures/void', fields: { id: '7' } }}>Logged.</Toast>);
  expect(toast).toContain('role="status"');
  expect(toast).toMatch(/<form[^>]*action="\/failures\/void"/);
  expect(toast).toContain('<input type="hidden" name="id" value="7"/>');
  const theme = render(<ThemeSwitch current="night" returnTo="/classes?page=2" />);
  expect(theme).toMatch(/<form[^>]*action="\/theme"/);
  expect(theme).toMatch(/value="night" aria-pressed="true"/);
  expect(theme).toContain('name="returnTo" value="/classes?page=2"');
});

it('frames a page with one main, a way past the sections, and the section one is in', () => {
  const links = [
    { to: '/classes', label: 'Classes', current: true },
    { to: '/log', label: 'Log a failure', current: false },
  ];
  const markup = render(
    <Page homeTo="/" links={links} person={{ name: 'Ada Brook', role: 'Reliability lead' }}>
      <h1>Classes</h1>
    </Page>,
  );
  expect(markup.match(/<main/g)).toHaveLength(1);
  expect(markup).toMatch(/href="#content"/);
  expect(markup).toMatch(/id="content"/);
  expect(markup.match(/aria-current="page"/g)).toHaveLength(1);
  expect(textOf(markup)).toContain('Ada Brook');
});
