import type { EstimateDocument, EstimateReceptor, OpenWater, RiverWater } from '../../../shared/schemas/estimate';
import type { Check, Paths, ReceptorAnswer, SecondOpinion } from '../../../shared/schemas/estimate-result';
import { networkFeatures } from '../network/network-door';
import { channelPaths } from '../paths/channel-paths';
import { openPaths } from '../paths/open-paths';
import type { PathCurve, PathPlan, PathRun } from '../paths/plan';
import { reachStates } from '../river/reach-state';
import type { PreparedField, RunInput } from '../types';
import { BOUNDS, FRONT_SHARE } from './bounds';
import { compareCurves, worstOf, type OpinionFigure } from './compare';
import { frontAndEnd, peakAt, readAt } from './front';
import { overlapOf } from './overlap';
import { BOUNDS_REASON, figureWords, opinionWords } from './words';

/** Sampling error of a peak about 4 % with this many; a fifth of a second for an ordinary document. */
const PATHS = 4_000;
const DRAWN_PATHS = 200;
const DRAWN_TIMES = 40;
/** Receptors compared: those nearest to, or farthest above, their action values. */
const MOST_RECEPTORS = 8;
const EVEN_TIMES = 80;
const TIMES_PER_RECEPTOR = 16;
const METHOD = 'random paths';

export type Opinion = {
  readonly secondOpinion: SecondOpinion;
  /** Null where no random paths were walked. */
  readonly paths: Paths | null;
  /** For receptors whose answer cannot stand. */
  readonly checks: readonly Check[];
};

/**
 * Runs random paths beside a solved document and compares them with its answers at the receptors that matter and with
 * its cloud at one time. Deterministic; stops when the meter says so.
 */
export function secondOpinion(input: RunInput, field: PreparedField, answers: readonly ReceptorAnswer[]): Opinion {
  const { doc } = input;
  const why = whyNoPaths(doc);
  if (why !== null) return none(why);
  const matter = receptorsThatMatter(input, answers);
  const plan = planFor(input, matter);
  const run = doc.water.kind === 'river' ? channelPaths(input, plan) : openPaths(input, plan, field.pathWater ?? null);
  const startS = Math.min(...input.releases.map((release) => release.profile.startS));
  const figures = matter.map(({ receptor, answer }, i): OpinionFigure => {
    const second = run.curves[i]!;
    const values = readAt(answer.series.timesS, answer.series.likely, plan.timesS);
    return compareCurves({ timesS: plan.timesS, first: { receptorId: answer.receptorId, values, errors: new Float64Array(values.length) }, second, onePath: second.onePath, idleBelow: idleBelow(receptor, answer), startS });
  });
  const agreement = worstOf(figures);
  const words = opinionWords(METHOD, agreement, figures, doc.receptors, run.ashoreShare);
  const checks = figures.filter((figure) => figure.agreement === 'disagrees').map(disagreement);
  return {
    secondOpinion: { solver: METHOD, agreement, words, bounds: bounds(), figures, field: fieldMeasure(input, field, plan, run) },
    paths: pathsOf(plan, run),
    checks,
  };
}

const bounds = (): SecondOpinion['bounds'] => ({ peakFactor: BOUNDS.peakFactor, timeShare: BOUNDS.timeShare, reason: BOUNDS_REASON });

const none = (why: string): Opinion => ({ secondOpinion: { solver: '', agreement: 'none', words: why, bounds: bounds(), figures: [], field: null }, paths: null, checks: [] });

/** What of the water random paths do not know, in words; null where they can be walked. */
function whyNoPaths({ water, ...doc }: EstimateDocument): string | null {
  if (water.kind === 'open' && water.box) return 'There is no second opinion: the basin is taken as stirred, and no other method does that. Compare it with samples.';
  const features = water.kind === 'river' ? networkFeatures(water) : closedOnly({ ...doc, water }, water);
  return features.length > 0 ? `There is no second opinion: ${features.join(' and ')} are known to one method only. Compare it with samples.` : null;
}

/** What the closed form of open water knows and random paths on a plane do not. */
const closedOnly = ({ releases }: EstimateDocument, water: OpenWater): string[] => [
  ...(water.straightShore?.oppositeM === undefined ? [] : ['two straight shores']),
  ...(water.vertical ? ['mixing over depth'] : []),
  ...(releases.some((release) => release.path) ? ['a release that moves'] : []),
];

/** Peaks below this leave every action value alone by the factor within which peaks are trusted, with the high amount too. */
function idleBelow(receptor: EstimateReceptor, { peak }: ReceptorAnswer): number {
  if (receptor.actionValues.length === 0) return 0;
  const high = peak.high !== null && peak.likely ? Math.max(1, peak.high / peak.likely) : 1;
  return Math.min(...receptor.actionValues.map((value) => value.value)) / (BOUNDS.peakFactor * high);
}

type Matter = { receptor: EstimateReceptor; answer: ReceptorAnswer };

/** Receptors that something reaches, those nearest to or above their action value first. */
function receptorsThatMatter({ doc, weights }: RunInput, answers: readonly ReceptorAnswer[]): Matter[] {
  const weight = ({ receptor, answer }: Matter): number => (answer.peak.likely ?? 0) / Math.min(Infinity, ...receptor.actionValues.map((value) => value.value));
  const isKnown = ({ receptor }: Matter): boolean => receptor.actionValues.length > 0;
  // Where a rule has withdrawn the answer already there is nothing to compare; without amounts every answer is withdrawn, and figures are per kilogram.
  const isWithdrawn = ({ answer }: Matter): boolean => answer.verdict === 'cannot be estimated' && !weights.isPerUnit;
  return doc.receptors
    .map((receptor, i) => ({ receptor, answer: answers[i]! }))
    .filter((one) => (one.answer.peak.likely ?? 0) > 0 && !isWithdrawn(one))
    .sort((a, b) => Number(isKnown(b)) - Number(isKnown(a)) || weight(b) - weight(a) || (b.answer.peak.likely ?? 0) - (a.answer.peak.likely ?? 0))
    .slice(0, MOST_RECEPTORS);
}

/** Times: even ones over the whole estimate, and closer ones while the first method has something at a receptor. */
function planFor({ doc }: RunInput, matter: readonly Matter[]): PathPlan {
  const wanted = Array.from({ length: EVEN_TIMES + 1 }, (_, i) => (doc.horizonS * i) / EVEN_TIMES);
  for (const { answer } of matter) {
    const { timesS, likely } = answer.series;
    const span = frontAndEnd(timesS, likely, FRONT_SHARE * (answer.peak.likely ?? 0));
    if (!span) continue;
    for (let i = -1; i <= TIMES_PER_RECEPTOR; i++) wanted.push(span.frontS + ((span.endS - span.frontS) * i) / (TIMES_PER_RECEPTOR - 1));
    if (answer.peakS !== null) wanted.push(answer.peakS);
  }
  const timesS = [...new Set(wanted)].filter((t) => t >= 0 && t <= doc.horizonS).sort((a, b) => a - b);
  const peaks = matter.flatMap(({ answer }) => answer.peakS ?? []);
  const midS = peaks.length > 0 ? Math.max(...peaks) / 2 : doc.horizonS / 2;
  const nearest = (t: number): number => timesS.reduce((best, at, k) => (Math.abs(at - t) < Math.abs(timesS[best]! - t) ? k : best), 0);
  const drawnAt = [...new Set(Array.from({ length: DRAWN_TIMES }, (_, i) => nearest((doc.horizonS * i) / (DRAWN_TIMES - 1))))];
  const watched = matter.map(({ receptor, answer }) => ({ receptor, aboutS: answer.peakS ?? doc.horizonS / 2 }));
  return { paths: PATHS, timesS, watched, drawn: DRAWN_PATHS, drawnAt, cloudAt: nearest(midS) };
}

function fieldMeasure({ doc, weights }: RunInput, field: PreparedField, plan: PathPlan, run: PathRun): SecondOpinion['field'] {
  const atS = plan.timesS[plan.cloudAt]!;
  const sections = doc.water.kind === 'river' ? new Map(reachStates(doc.water as RiverWater).map((state) => [state.reach.id, state.dischargeM3s / state.speedMps] as const)) : null;
  const overlap = overlapOf(field.gridAt(atS, weights.likely), run.cloud, (reachId) => sections?.get(reachId) ?? 1);
  return overlap === null ? null : { atS, overlap };
}

const disagreement = (figure: OpinionFigure): Check => ({
  code: 'methods-disagree',
  severity: 'stop',
  title: 'Two methods disagree',
  detail: `against the first method, ${METHOD} give ${figureWords(figure)}; the bounds are a factor of ${BOUNDS.peakFactor} and ${100 * BOUNDS.timeShare} % of the travel time.`,
  remedy: 'Look at shores, bends and joints between release and receptor that a simple cloud does not know; give measured currents or a closer outline, and act on the worse of the two meanwhile.',
  receptorId: figure.receptorId,
});

function pathsOf(plan: PathPlan, run: PathRun): Paths {
  return {
    count: PATHS,
    ashoreShare: run.ashoreShare,
    timesS: plan.drawnAt.map((k) => plan.timesS[k]!),
    lines: run.lines,
    receptors: run.curves.map((curve) => {
      const at = peakAt(curve.values);
      return { receptorId: curve.receptorId, counted: curve.counted, peak: at < 0 ? 0 : curve.values[at]!, peakError: at < 0 ? 0 : curve.errors[at]!, peakS: at < 0 ? null : plan.timesS[at]!, ...arrivalOf(curve) };
    }),
  };
}

const arrivalOf = ({ arrival }: PathCurve) => ({ arriveShare: arrival.share, arriveShareError: arrival.shareError, firstArrivalS: arrival.quantilesS, medianErrorS: arrival.medianErrorS });
