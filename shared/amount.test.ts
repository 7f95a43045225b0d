import { describe, expect, it } from 'vitest';
import { amountOf } from './amount';

const range = (likely: number, low: number | null = null, high: number | null = null) => ({ low, likely, high });

describe('amounts', () => {
  it('4,000 kg of 25 % ammonia hold 822 kg of nitrogen', () => {
    // 14.007/17.031 of ammonia is nitrogen.
    expect(amountOf({ how: 'mass', massKg: range(4_000), activeFraction: (0.25 * 14.007) / 17.031 }).likely).toBeCloseTo(822.4, 1);
  });

  it('3 m3 at 150 g/l hold 450 kg', () => expect(amountOf({ how: 'volume-strength', volumeM3: range(3, 2, 4), strengthKgM3: 150 })).toMatchObject({ low: 300, likely: 450, high: 600, isStandIn: false }));

  it('a volume of product weighs by its density and counts by its share', () => expect(amountOf({ how: 'volume-density', volumeM3: range(2), densityKgM3: 879, activeFraction: 0.5 })).toMatchObject({ low: null, likely: 879, high: null }));

  it('organisms are counted by volume', () => expect(amountOf({ how: 'volume-count', volumeM3: range(300), countPerM3: 3e11 }).likely).toBe(9e13));

  it('a plain count stays as it is', () => expect(amountOf({ how: 'count', count: range(5e9, 1e9) })).toMatchObject({ low: 1e9, likely: 5e9, high: null }));

  it('an unknown amount has no figures, or its stand-in marked as one', () => {
    expect(amountOf({ how: 'unknown', standIn: null })).toMatchObject({ likely: null, isStandIn: false });
    expect(amountOf({ how: 'unknown', standIn: 250 })).toMatchObject({ low: null, likely: 250, high: null, isStandIn: true });
  });
});
