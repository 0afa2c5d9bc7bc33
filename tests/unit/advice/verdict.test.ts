import { describe, expect, it } from 'vitest';
import { judgeTrend } from '~/advice/trend';
import { judgeVerdict } from '~/advice/verdict';

const verdict = (low: number, high: number, failures = 20, wearOutPasses = true) =>
  judgeVerdict({ failures, shapeInterval: { low, high }, wearOutPasses });

describe('verdict', () => {
  it('is wear-out where the interval lies above 1 and the test holds up among all classes', () => {
    expect(verdict(1.01, 2.4)).toBe('wear-out');
    expect(verdict(1.01, 2.4, 20, false)).toBe('undecided');
  });

  it('is memoryless only where stronger wear-out than 1.5 is ruled out', () => {
    expect(verdict(0.8, 1.5)).toBe('memoryless');
    expect(verdict(0.8, 1.51)).toBe('undecided');
    expect(verdict(1, 1.2)).toBe('memoryless');
  });

  it('is early-life where the interval lies below 1', () => {
    expect(verdict(0.4, 0.99)).toBe('early-life');
    expect(verdict(0.4, 1)).toBe('memoryless');
  });

  it('is undecided with fewer than 5 failures or without a usable life clock', () => {
    expect(verdict(1.2, 3, 4)).toBe('undecided');
    expect(verdict(1.2, 3, 5)).toBe('wear-out');
    expect(judgeVerdict({ failures: 30, shapeInterval: null, wearOutPasses: true })).toBe('undecided');
  });

  it('is undecided where an end of the interval is open', () => {
    expect(verdict(0.8, Infinity)).toBe('undecided');
    expect(verdict(0, 1.4)).toBe('memoryless');
  });
});

const trend = (low: number, high: number, laplacePasses: boolean) =>
  judgeTrend({ slopeInterval: { low, high }, laplacePasses });

describe('trend word', () => {
  it('needs the test and the slope to agree', () => {
    expect(trend(1.05, 1.9, true)).toBe('rising');
    expect(trend(1.05, 1.9, false)).toBe('unclear');
    expect(trend(0.95, 1.9, true)).toBe('unclear');
    expect(trend(0.4, 0.9, true)).toBe('falling');
  });

  it('is level only where the slope is known to lie near 1', () => {
    expect(trend(0.67, 1.5, false)).toBe('level');
    expect(trend(0.66, 1.4, false)).toBe('unclear');
    expect(trend(0.9, 1.51, false)).toBe('unclear');
    expect(judgeTrend({ slopeInterval: null, laplacePasses: true })).toBe('unclear');
  });
});
