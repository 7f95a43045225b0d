import type { Amount } from './schemas/estimate';

export type AmountFigures = {
  /** kg, or counts; null where unknown without a stand-in. */
  low: number | null;
  likely: number | null;
  high: number | null;
  /** True where the likely figure is a stand-in for an unknown amount. */
  isStandIn: boolean;
  formula: string;
};

/** Brings every form of an amount down to kg (or counts), with the formula that did it. */
export function amountOf(amount: Amount): AmountFigures {
  const scaled = (range: { low: number | null; likely: number; high: number | null }, factor: number, formula: string): AmountFigures => ({
    low: range.low === null ? null : range.low * factor,
    likely: range.likely * factor,
    high: range.high === null ? null : range.high * factor,
    isStandIn: false,
    formula,
  });
  switch (amount.how) {
    case 'mass':
      return scaled(amount.massKg, amount.activeFraction, 'mass × active fraction');
    case 'volume-strength':
      return scaled(amount.volumeM3, amount.strengthKgM3, 'volume × strength');
    case 'volume-density':
      return scaled(amount.volumeM3, amount.densityKgM3 * amount.activeFraction, 'volume × density × active fraction');
    case 'count':
      return scaled(amount.count, 1, 'count');
    case 'volume-count':
      return scaled(amount.volumeM3, amount.countPerM3, 'volume × count per volume');
    case 'unknown':
      return { low: null, likely: amount.standIn, high: null, isStandIn: amount.standIn !== null, formula: amount.standIn === null ? 'unknown: per kilogram' : 'unknown: planned as' };
  }
}
