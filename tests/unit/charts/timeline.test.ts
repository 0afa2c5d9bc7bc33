import { describe, expect, it } from 'vitest';
import { layoutTimeline, timelineSentence } from '~/charts/position-timeline-layout';
import type { Timeline } from '~/advice/timeline';

const timeline: Timeline = {
  from: '2024-01-01',
  to: '2026-01-01',
  events: [
    { day: '2024-01-01', kind: 'renewal' },
    { day: '2025-01-01', kind: 'failure-renewed' },
    { day: '2026-01-01', kind: 'visit' },
    { day: '2026-05-01', kind: 'failure-patched' },
  ],
};

describe('a timeline', () => {
  it('puts each event where its day says, and leaves out what lies outside', () => {
    const layout = layoutTimeline(timeline, 314)!;
    const at = (kind: string) => layout.marks.find((mark) => mark.kind === kind)?.x;
    expect(at('renewal')).toBe(7);
    expect(at('failure-renewed')).toBeCloseTo(7 + 150 * (366 / 365.5), 1);
    expect(at('visit')).toBe(307);
    expect(at('failure-patched')).toBeUndefined();
    expect(layout.years.map(({ year }) => year)).toEqual(['2025']);
  });

  it('draws failures last, so that nothing covers them', () => {
    expect(layoutTimeline(timeline, 300)!.marks.at(-1)?.kind).toBe('failure-renewed');
  });

  it('has no line before anything was watched', () => {
    expect(layoutTimeline({ ...timeline, to: '2024-01-01' }, 300)).toBeNull();
  });

  it('is a sentence for those who do not see it', () => {
    expect(timelineSentence({ ...timeline, events: [] })).toBe(
      '1 January 2024 to 1 January 2026: nothing recorded.',
    );
    expect(timelineSentence(timeline)).toContain(
      '1 × failed, renewed, 1 × failed, patched, 1 × renewed by plan',
    );
  });
});
