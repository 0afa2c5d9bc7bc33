import { describe, expect, it } from 'vitest';
import { csvDownload } from '~/services/csv-download.server';

const columns = [
  { header: 'tag', cell: (row: { tag: string }) => row.tag },
  { header: 'n', cell: (row: { n: number | null }) => row.n },
];

async function* rows(count: number, seen: { given: number } = { given: 0 }) {
  for (let n = 0; n < count; n += 1) {
    seen.given += 1;
    yield { tag: `T-${n}`, n };
  }
  await Promise.resolve();
}

describe('a list to download', () => {
  it('has its headings, a name, and every row', async () => {
    const response = csvDownload('classes of “Orrin”.csv', columns, rows(3));
    expect(response.headers.get('Content-Type')).toBe('text/csv; charset=utf-8');
    expect(response.headers.get('Content-Disposition')).toBe(
      `attachment; filename="classes-of-Orrin-.csv"; filename*=UTF-8''classes%20of%20%E2%80%9COrrin%E2%80%9D.csv`,
    );
    expect(await response.text()).toBe('tag,n\r\nT-0,0\r\nT-1,1\r\nT-2,2\r\n');
  });

  it('is its headings alone where there is nothing', async () => {
    expect(await csvDownload('x.csv', columns, rows(0)).text()).toBe('tag,n\r\n');
  });

  it('hands no formula to a spreadsheet, and quotes what needs it', async () => {
    async function* odd() {
      yield { tag: '=HYPERLINK("x")', n: -2 };
      yield { tag: 'a, "b"\nc', n: null };
      await Promise.resolve();
    }
    expect(await csvDownload('x.csv', columns, odd()).text()).toBe(
      'tag,n\r\n"\'=HYPERLINK(""x"")",-2\r\n"a, ""b""\nc",\r\n',
    );
  });

  it('fetches no more rows once the reader has gone away', async () => {
    const seen = { given: 0 };
    const reader = csvDownload('x.csv', columns, rows(1_000_000, seen)).body!.getReader();
    await reader.read();
    await reader.cancel();
    await new Promise((resolve) => setTimeout(resolve, 20));
    const atCancel = seen.given;
    await new Promise((resolve) => setTimeout(resolve, 50));
    expect(seen.given).toBe(atCancel);
    expect(atCancel).toBeLessThan(100_000);
  });

  it('breaks off when the rows do, instead of ending as if it were whole', async () => {
    async function* broken() {
      yield { tag: 'T-1', n: 1 };
      await Promise.resolve();
      throw new Error('the database went away');
    }
    await expect(csvDownload('x.csv', columns, broken()).text()).rejects.toThrow();
  });
});
