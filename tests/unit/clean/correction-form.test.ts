import { parseWithZod } from '@conform-to/zod/v4';
import { describe, expect, it } from 'vitest';
import { cleanFormSchema, correctionOf, formOf } from '~/components/clean/correction-schema';
import { addressOf, filterOf, listStateOf } from '~/components/clean/list-state';
import type { Correction } from '~/models/record-correction';

const id = '0b8f5a52-7a39-4a3e-9a77-0b1f6d1d1a01';
const mode = '5b0a3a0e-9d54-4f6c-8a15-d4a2f8a6b102';

function parse(fields: Record<string, string | string[]>) {
  const form = new FormData();
  for (const [name, value] of Object.entries(fields))
    for (const one of [value].flat()) form.append(name, one);
  return parseWithZod(form, { schema: cleanFormSchema });
}

describe('the form for a correction', () => {
  const corrections: Exclude<Correction, { kind: 'merge-mode' }>[] = [
    { kind: 'void', reason: 'logged twice' },
    { kind: 'restore' },
    { kind: 'mode', modeId: mode },
    { kind: 'mode', modeId: null },
    { kind: 'outside-cause', cause: 'flooded' },
    { kind: 'outside-cause', cause: null },
    { kind: 'effect', effect: 'patched' },
    { kind: 'date', failedOn: '2026-02-03' },
    { kind: 'fitted', fittedOn: '2025-02-03' },
    { kind: 'fitted', fittedOn: null },
  ];
  it.each(corrections)('filled in again for %j asks for the same', (correction) => {
    const { status, ...rest } = parse(formOf({ chosen: [{ id, version: 3 }], all: undefined, correction }));
    expect(status).toBe('success');
    if (!('value' in rest) || rest.value?.intent !== 'preview') throw new Error('no preview');
    expect(correctionOf(rest.value)).toEqual(correction);
    expect(rest.value.record).toEqual([{ id, version: 3 }]);
  });

  it('refuses a choice or a correction that is garbled', () => {
    const plan = { intent: 'save', correctionId: id, chosen: `${id}:1`, correction: '{"kind":"restore"}' };
    expect(parse(plan).status).toBe('success');
    for (const wrong of [{ chosen: 'x' }, { correction: '{' }, { correction: '{"kind":"delete"}' }]) {
      expect(parse({ ...plan, ...wrong }).status).toBe('error');
    }
  });

  it('takes no more than 5,000 records', () => {
    const chosen = (count: number) => Array.from({ length: count }, () => `${id}:1`).join(',');
    const plan = { intent: 'save', correctionId: id, correction: '{"kind":"restore"}' };
    expect(parse({ ...plan, chosen: chosen(5000) }).status).toBe('success');
    expect(parse({ ...plan, chosen: chosen(5001) }).status).toBe('error');
  });
});

describe('the address of the list', () => {
  const state = (query: string) => listStateOf(new Request(`http://intervale.test/?${query}`));

  it('comes back as it was', () => {
    const query = `site=${id}&mode=none&effect=patched&outside=no&voided=all&from=2026-01-01&to=2026-02-01&tag=FB-1&sort=tag&direction=asc&page=3`;
    expect(addressOf(mode, state(query))).toBe(`/classes/${mode}/clean?${query}`);
  });

  it('leaves out what is as usual, and what was ticked', () => {
    expect(addressOf(mode, state(`record=${id}&sort=day&page=1`))).toBe(`/classes/${mode}/clean`);
  });

  it('passes over what makes no sense', () => {
    const filter = filterOf(state('site=x&mode=x&effect=x&from=2026-02-31&voided=maybe&tag=%20'));
    expect(Object.values(filter).every((value) => value === undefined)).toBe(true);
  });
});
