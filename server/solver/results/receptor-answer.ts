import type { ActionValue, EstimateReceptor } from '../../../shared/schemas/estimate';
import type { ActionAnswer, Check, ReceptorAnswer, WorkingLine } from '../../../shared/schemas/estimate-result';
import { concentrationText, sig } from '../format';
import type { Weights } from '../release-profile';
import type { ReceptorSite, RunInput } from '../types';
import { curveOf, firstReach, meanCurveOf, pulsesAbove, scaledCurve, type Curve, type Pulse } from './curve';
import { pulsesOf } from './pulses';
import { RunningIntegral } from './running-integral';
import { sampleSite, SiteResponse, type Samples, type SamplingEffort } from './sampling';
import { thinned } from './series';

/** Leading edge: this share of the peak. */
const LEADING_EDGE_SHARE = 0.02;

type Measure = 'mass' | 'count';
/** A value for each amount: null where that end of the range is not given. */
type Triple<T> = { low: T | null; likely: T; high: T | null };

const mapTriple = <T, U>(triple: Triple<T>, f: (value: T) => U): Triple<U> => ({
  low: triple.low === null ? null : f(triple.low),
  likely: f(triple.likely),
  high: triple.high === null ? null : f(triple.high),
});

/** The full answer of one receptor: curve, peak, dose, and one answer for each action value. */
export function receptorAnswer(input: RunInput, receptor: EstimateReceptor, site: ReceptorSite): ReceptorAnswer {
  const { doc, weights } = input;
  const response = new SiteResponse(site, doc.substance.solubilityKgM3 ?? Infinity, doc.substance.applyLoss);
  const features = site.responses.flatMap((item) => item?.features ?? []);
  const isReached = site.responses.some((item) => item !== null);
  const effort = isReached ? effortOf(input) : { most: 3, even: 1 };
  const samples = sampleSite(response, features, weights.likely, doc.horizonS, effort);
  const sets: Triple<Weights> = { low: weights.low, likely: weights.likely, high: weights.high };
  const curves = curvesOf(response, samples, sets, doc.substance.solubilityKgM3 ?? Infinity);
  const doses = mapTriple(sets, (set) => new RunningIntegral(samples, samples.units.map((units) => response.total(units, set))).total);
  const stop = site.checks.find((check) => check.severity === 'stop') ?? null;
  const answers = receptor.actionValues.map((value, index) =>
    actionAnswer({ input, value, index, stop, site, response, curves: value.averagingS > 0 ? mapTriple(sets, (set) => meanCurveOf(response, samples, set, value.averagingS)) : curves }),
  );
  const peaks = mapTriple(curves, (curve) => curve.peak);
  const { likely } = curves;
  const hasPeak = likely.peak > 0;
  return {
    receptorId: receptor.id,
    ...overall(answers, stop, site),
    distanceM: site.distanceM,
    peak: peaks,
    peakS: hasPeak ? likely.peakS : null,
    leadingEdgeS: firstReach(likely, LEADING_EDGE_SHARE),
    dose: doses,
    answers,
    series: thinned(curves, answers),
    withLosses: isReached ? lossesBeside(input, site, curves, answers) : null,
    working: [...(hasPeak ? site.working(likely.peakS) : []), ...closingLines(input, likely, samples, doses.likely)],
  };
}

/** Low and high curves are scaled from the likely one where all amounts are in one proportion, as with a single release. */
function curvesOf(response: SiteResponse, samples: Samples, sets: Triple<Weights>, solubility: number): Triple<Curve> {
  const likely = curveOf(response, samples, sets.likely);
  const other = (set: Weights | null): Curve | null => {
    if (set === null) return null;
    const ratio = set[0]! / sets.likely[0]!;
    const isProportional = set.every((weight, r) => Math.abs(weight - ratio * sets.likely[r]!) <= 1e-12 * weight);
    return isProportional && likely.peak < solubility ? scaledCurve(likely, ratio, solubility) : curveOf(response, samples, set);
  };
  return { low: other(sets.low), likely, high: other(sets.high) };
}

/** A preview has this many integrals over release time to spend; peaks and crossings are refined whatever the samples. */
const PREVIEW_INTEGRALS = 9_000;

function effortOf({ isPreview, doc, releases }: RunInput): SamplingEffort {
  if (!isPreview) return { most: 300, even: 24 };
  const lasting = releases.filter((release) => !release.profile.isInstant).length * doc.receptors.length;
  return { most: Math.round(Math.min(180, Math.max(48, PREVIEW_INTEGRALS / Math.max(1, lasting)))), even: 16 };
}

/** The worst of the action answers. */
function overall(answers: readonly ActionAnswer[], stop: Check | null, site: ReceptorSite): Pick<ReceptorAnswer, 'verdict' | 'reason'> {
  if (answers.length === 0) return { verdict: stop ? 'cannot be estimated' : 'no action value', reason: stop ? `${stop.title}: ${stop.detail}` : site.reason };
  const worst = answers.find((answer) => answer.verdict === 'may exceed') ?? answers.find((answer) => answer.verdict === 'cannot be estimated') ?? answers[0]!;
  return { verdict: worst.verdict, reason: worst.reason };
}

type ActionInput = { input: RunInput; value: ActionValue; index: number; stop: Check | null; site: ReceptorSite; response: SiteResponse; curves: Triple<Curve> };

function actionAnswer(facts: ActionInput): ActionAnswer {
  const { input, value, index, stop, response, curves } = facts;
  const { doc, weights } = input;
  const { horizonS } = doc;
  const isUsable = !weights.isPerUnit && stop === null;
  const pulses = mapTriple(curves, (curve) => (isUsable ? pulsesAbove(curve, value.value) : []));
  const most = pulses.high ?? pulses.likely;
  const verdict = verdictOf(isUsable, most.length > 0 || pulses.likely.length > 0, weights.isPartial);
  const end = (list: Pulse[]): number | null => list[list.length - 1]?.endS ?? null;
  const start = (list: Pulse[]): number | null => list[0]?.startS ?? null;
  return {
    index,
    value: value.value,
    verdict,
    reason: reasonOf(facts, verdict),
    arrivalS: { early: start(pulses.high ?? pulses.likely), likely: start(pulses.likely), late: start(pulses.low ?? pulses.likely) },
    endS: { early: end(pulses.low ?? pulses.likely), likely: end(pulses.likely), late: end(pulses.high ?? pulses.likely) },
    endOpen: [pulses.likely, most].some((list) => list.some((pulse) => pulse.endS >= horizonS)),
    timeAboveS: mapTriple(pulses, (list) => list.reduce((sum, pulse) => sum + pulse.endS - pulse.startS, 0)),
    ratio: weights.isPerUnit ? null : curves.likely.peak / value.value,
    pulses: pulsesOf(input, response, curves.likely, pulses.likely, value.averagingS),
  };
}

const verdictOf = (isUsable: boolean, isExceeded: boolean, isPartial: boolean): ActionAnswer['verdict'] => {
  if (!isUsable) return 'cannot be estimated';
  if (isExceeded) return 'may exceed';
  return isPartial ? 'cannot be estimated' : 'not predicted to exceed';
};

function reasonOf({ input, value, stop, site, curves }: ActionInput, verdict: ActionAnswer['verdict']): string {
  const { measure } = input.doc.substance;
  const limit = concentrationText(value.value, measure);
  const what = value.averagingS > 0 ? 'mean over the averaging time' : 'peak';
  if (stop) return `${stop.title}: ${stop.detail}`;
  if (site.reason) return site.reason;
  if (input.weights.isPerUnit) return unknownReason(value.value, curves.likely.peak, measure, limit);
  const likely = curves.likely.peak;
  const high = curves.high?.peak ?? likely;
  if (verdict === 'cannot be estimated') return `One release has no amount; the others alone stay below ${limit}`;
  if (verdict === 'not predicted to exceed')
    return high > 0 ? `The ${what} with the ${curves.high ? 'high' : 'likely'} amount, ${concentrationText(high, measure)}, is about ${sig(value.value / high, 2)} times below ${limit}` : `Nothing arrives within the estimate`;
  return likely > value.value
    ? `The likely ${what}, ${concentrationText(likely, measure)}, is about ${sig(likely / value.value, 2)} times ${limit}`
    : `Only the high amount exceeds ${limit}: ${concentrationText(high, measure)}; likely ${concentrationText(likely, measure)}`;
}

function unknownReason(limitSi: number, peakPerUnit: number, measure: Measure, limit: string): string {
  const unit = measure === 'count' ? 'organisms' : 'kg';
  const start = `The amount is not known: figures are for 1 ${measure === 'count' ? 'organism' : 'kg'} released`;
  return peakPerUnit > 0 ? `${start}. From about ${sig(limitSi / peakPerUnit, 2)} ${unit} on the peak would exceed ${limit}` : start;
}

/** Peak and curve with losses, where the estimate itself leaves them out. */
function lossesBeside(input: RunInput, site: ReceptorSite, curves: Triple<Curve>, answers: readonly ActionAnswer[]): ReceptorAnswer['withLosses'] {
  const { substance } = input.doc;
  if (substance.applyLoss || input.loss.kind === 'none') return null;
  const lossy = new SiteResponse(site, substance.solubilityKgM3 ?? Infinity, true);
  const values = thinned(curves, answers).timesS.map((t) => lossy.at(t, input.weights.likely));
  return { peak: values.reduce((most, value) => Math.max(most, value), 0), likely: values };
}

function closingLines({ doc, weights }: RunInput, likely: Curve, samples: Samples, dose: number): WorkingLine[] {
  const unit = doc.substance.measure === 'count' ? 'counts/m³' : 'kg/m³';
  const amount = weights.likely.reduce((sum, weight) => sum + weight, 0);
  return [
    {
      label: 'Likely peak',
      formula: 'C = Σ amount · concentration per kilogram',
      substituted: `amounts ${weights.likely.map((weight) => sig(weight)).join(' + ')}${weights.likely.length > 1 ? ` (${sig(amount)} in all)` : ''}; ${concentrationText(likely.peak, doc.substance.measure)}`,
      value: likely.peak,
      unit,
      source: 'largest value of the curve, refined to 0.5 s',
    },
    { label: 'Dose', formula: '∫ C dt over the estimate', substituted: `Simpson's rule on ${samples.timesS.length} times`, value: dose, unit: `${unit} · s`, source: '' },
  ];
}
