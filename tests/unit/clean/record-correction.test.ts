import { describe, expect, it } from 'vitest';
import { asksForDates, changedParts, corrected, type CorrectableFields } from '~/models/record-correction';

const fields: CorrectableFields = {
  failedOn: '2026-02-03',
  failedAt: '2026-02-03T11:00:00.000Z',
  modeId: null,
  effect: 'renewed',
  outsideCause: null,
  itemFittedOn: null,
  itemAge: 400,
  voidReason: null,
};
const voided = { ...fields, voidReason: 'logged twice' };

describe('corrected', () => {
  it('gives the same failure back where there is nothing to correct', () => {
    expect(corrected(fields, { kind: 'restore' })).toBe(fields);
    expect(corrected(voided, { kind: 'void', reason: 'another reason' })).toBe(voided);
    expect(corrected(fields, { kind: 'mode', modeId: null })).toBe(fields);
    expect(corrected(fields, { kind: 'effect', effect: 'renewed' })).toBe(fields);
    expect(corrected(fields, { kind: 'date', failedOn: '2026-02-03' })).toBe(fields);
    expect(corrected(fields, { kind: 'outside-cause', cause: null })).toBe(fields);
  });

  it('drops the time of day with the day it belonged to', () => {
    expect(corrected(fields, { kind: 'date', failedOn: '2026-02-01' })).toEqual({
      ...fields,
      failedOn: '2026-02-01',
      failedAt: null,
    });
  });

  it('lets a fitting day take the place of a given age, and takes both off', () => {
    expect(corrected(fields, { kind: 'fitted', fittedOn: '2025-01-01' })).toMatchObject({
      itemFittedOn: '2025-01-01',
      itemAge: null,
    });
    expect(corrected(fields, { kind: 'fitted', fittedOn: null })).toMatchObject({
      itemFittedOn: null,
      itemAge: null,
    });
  });
});

describe('what a correction asks for', () => {
  it('is nothing of the days where only other parts change', () => {
    expect(asksForDates(fields, { ...fields, modeId: 'a', effect: 'patched' })).toBe(false);
    expect(asksForDates(fields, voided)).toBe(false);
  });

  it('is that the days fit, where they change or the failure comes to count again', () => {
    expect(asksForDates(fields, { ...fields, failedOn: '2026-02-01' })).toBe(true);
    expect(asksForDates(fields, { ...fields, itemFittedOn: '2026-02-01', itemAge: null })).toBe(true);
    expect(asksForDates(voided, fields)).toBe(true);
    expect(asksForDates(voided, { ...voided, failedOn: '2026-02-01' })).toBe(true);
  });

  it('names the parts that differ', () => {
    expect(changedParts(fields, { ...voided, effect: 'patched' })).toEqual(['effect', 'voidReason']);
    expect(changedParts(fields, { ...fields })).toEqual([]);
  });
});
