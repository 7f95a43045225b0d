import type { SecondOpinion } from '../../../shared/schemas/estimate-result';
import { BOUNDS, FRONT_SHARE, LEAST_PATHS } from './bounds';
import { frontAndEnd, peakAt, shifted, type OpinionCurve } from './front';

export type OpinionFigure = SecondOpinion['figures'][number];
export type Agreement = SecondOpinion['agreement'];

export type Compared = {
  readonly timesS: readonly number[];
  readonly first: OpinionCurve;
  readonly second: OpinionCurve;
  /** What a single path in the middle of the counting area makes up at each time; zeros for a method that does not sample. */
  readonly onePath: ArrayLike<number>;
  /** Below this no answer depends on the figure: half the lowest action value, for the likely amount. 0 where there is none. */
  readonly idleBelow: number;
  /** Start of the first release: travel times count from here. */
  readonly startS: number;
};

/** Peak, front and end of two methods at one receptor, judged after chance is taken off. */
export function compareCurves(compared: Compared): OpinionFigure {
  const { timesS, first, second, onePath, idleBelow, startS } = compared;
  const [p1, p2] = [peakAt(first.values), peakAt(second.values)];
  const base = { receptorId: first.receptorId, peakRatio: null, peakRatioError: null, arrivalDifferenceS: null, endDifferenceS: null, travelS: null };
  const [peak1, peak2] = [p1 < 0 ? 0 : first.values[p1]!, p2 < 0 ? 0 : second.values[p2]!];
  // Too few paths on either count: neither method claims anything that the paths could show.
  const isSeen = (k: number, peak: number): boolean => k >= 0 && peak >= LEAST_PATHS * onePath[k]!;
  if (p1 < 0 || (!isSeen(p1, peak1) && !isSeen(p2, peak2))) return { ...base, agreement: 'none' };
  const grade = (factor: number, timeShare: number): Agreement => {
    const own = gradeOf(factor, timeShare);
    // Both leave the receptor alone: the answer stands whatever the figure.
    return own === 'disagrees' && Math.max(peak1, peak2) < idleBelow ? 'differs' : own;
  };
  const error = p2 < 0 ? onePath[p1]! : second.errors[p2]!;
  const ratio = peak2 / peak1;
  const factor = factorBeyondChance(peak1, peak2, BOUNDS.standardErrors * error);
  const figure = { ...base, peakRatio: ratio, peakRatioError: error / peak1 };
  const own = frontAndEnd(timesS, first.values, FRONT_SHARE * peak1);
  const other = frontAndEnd(timesS, second.values, FRONT_SHARE * peak2);
  if (!own || !other || peak2 === 0) return { ...figure, agreement: grade(factor, 0) };
  const travelS = Math.max(1, own.frontS - startS);
  const off = frontBeyondChance(timesS, second, FRONT_SHARE * peak2, own.frontS);
  return { ...figure, arrivalDifferenceS: other.frontS - own.frontS, endDifferenceS: other.endS - own.endS, travelS, agreement: grade(factor, off / travelS) };
}

/** The factor between two peaks that chance cannot explain, 1 or more. */
function factorBeyondChance(first: number, second: number, chance: number): number {
  if (Math.abs(second - first) <= chance) return 1;
  return second > first ? (second - chance) / first : first / Math.max(second + chance, 1e-300);
}

/** How far the front lies off, s, taking the nearest front that the sampling allows. */
function frontBeyondChance(timesS: readonly number[], curve: OpinionCurve, level: number, frontS: number): number {
  const early = frontAndEnd(timesS, shifted(curve, BOUNDS.standardErrors), level)?.frontS ?? frontS;
  const late = frontAndEnd(timesS, shifted(curve, -BOUNDS.standardErrors), level)?.frontS ?? Infinity;
  return Math.max(0, early - frontS, frontS - late);
}

function gradeOf(factor: number, timeShare: number): Agreement {
  if (factor > BOUNDS.peakFactor || timeShare > BOUNDS.timeShare) return 'disagrees';
  return factor > BOUNDS.agreesPeakFactor || timeShare > BOUNDS.agreesTimeShare ? 'differs' : 'agrees';
}

const order: readonly Agreement[] = ['none', 'agrees', 'differs', 'disagrees'];

/** The worst of the receptors; none where nothing could be compared. */
export const worstOf = (figures: readonly OpinionFigure[]): Agreement => figures.reduce<Agreement>((worst, figure) => (order.indexOf(figure.agreement) > order.indexOf(worst) ? figure.agreement : worst), 'none');
