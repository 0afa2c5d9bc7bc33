import { describe, expect, it } from 'vitest';
import { refusalSentence, refusedField } from '~/components/log/refusal-words';
import { mayUndoFailure } from '~/models/failure-permissions';
import { refuseDates } from '~/models/failure-refusals';

const asset = { inServiceOn: '2024-01-01', watchedUntil: null, retiredOn: null };
const present = { today: '2026-03-14', now: new Date('2026-03-14T10:00:00Z') };

describe('what dates a failure may have', () => {
  const refuse = (failedOn: string, itemFittedOn: string | null = null, dates = {}) =>
    refuseDates({ ...asset, ...dates }, { failedOn, failedAt: null, itemFittedOn }, present)?.code ?? null;

  it('are the days of service, both ends taken in', () => {
    expect(refuse('2023-12-31')).toBe('before-service');
    expect(refuse('2024-01-01')).toBeNull();
    expect(refuse('2026-03-14')).toBeNull();
    expect(refuse('2026-03-15')).toBe('in-future');
    expect(refuse('2025-01-01', null, { retiredOn: '2025-01-01' })).toBeNull();
    expect(refuse('2025-01-02', null, { retiredOn: '2025-01-01' })).toBe('after-retirement');
    expect(refuse('2025-01-02', null, { watchedUntil: '2025-01-01' })).toBe('after-watch');
  });

  it('hold for the fitted-on day too', () => {
    expect(refuse('2025-01-01', '2025-01-01')).toBeNull();
    expect(refuse('2025-01-01', '2025-01-02')).toBe('fitted-after-failed');
    expect(refuse('2025-01-01', '2023-12-31')).toBe('fitted-before-service');
  });
});

describe('a refusal', () => {
  it('says the day it runs up against, at the field the person filled in', () => {
    const refusal = { code: 'before-service', day: '2024-01-01' } as const;
    expect(refusalSentence(refusal, { tag: 'FB-1', itemSingular: 'seal' })).toBe(
      'FB-1 went into service on 1 January 2024, so it cannot have failed before. Check the day.',
    );
    expect(refusedField(refusal, { when: 'earlier', fitted: 'yes' })).toBe('failedOn');
    expect(refusedField(refusal, { when: 'now', fitted: 'yes' })).toBe('when');
    const fitted = { code: 'fitted-after-failed', day: '2024-01-01' } as const;
    expect(refusedField(fitted, { when: 'now', fitted: 'no' })).toBe('fittedOn');
    expect(refusedField(fitted, { when: 'now', fitted: 'yes' })).toBe('fitted');
    expect(refusedField({ code: 'id-taken' }, { when: 'now', fitted: 'yes' })).toBeNull();
  });
});

describe('who may undo a failure', () => {
  const loggedAt = new Date('2026-03-14T10:00:00Z');
  const failure = { loggedAt, loggedById: 'rosa', voidedById: null };
  const hoursLater = (hours: number) => new Date(loggedAt.getTime() + hours * 3_600_000);
  const rosa = { id: 'rosa', roles: ['technician'] };

  it('is the technician who logged it, for 24 hours', () => {
    expect(mayUndoFailure(failure, rosa, hoursLater(24))).toBe(true);
    expect(mayUndoFailure(failure, rosa, hoursLater(24.001))).toBe(false);
    expect(mayUndoFailure(failure, { id: 'ann', roles: ['technician'] }, hoursLater(1))).toBe(false);
    expect(mayUndoFailure({ ...failure, loggedById: null }, rosa, hoursLater(1))).toBe(false);
  });

  it('is a lead any time, and nobody else', () => {
    expect(mayUndoFailure(failure, { id: 'tove', roles: ['lead'] }, hoursLater(9000))).toBe(true);
    expect(mayUndoFailure(failure, { id: 'rosa', roles: ['manager', 'admin'] }, hoursLater(1))).toBe(false);
  });

  it('is not the technician against the void of somebody else', () => {
    expect(mayUndoFailure({ ...failure, voidedById: 'tove' }, rosa, hoursLater(1))).toBe(false);
    expect(mayUndoFailure({ ...failure, voidedById: 'rosa' }, rosa, hoursLater(1))).toBe(true);
  });
});
