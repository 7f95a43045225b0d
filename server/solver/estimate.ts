import type { EstimateDocument } from '../../shared/schemas/estimate';
import type { Check, EstimateResult, Reached, ReceptorAnswer } from '../../shared/schemas/estimate-result';
import { answerChecks } from './checks/answer-checks';
import { commonChecks } from './checks/common-checks';
import { conditionChecks } from './checks/condition-checks';
import { hingeChecks } from './checks/hinge-checks';
import { waterAtPlaces } from './checks/place-water';
import { checkDoor } from './door';
import { ENGINE_VERSION } from './engine-version';
import { combinedClock, lossParts } from './losses/loss-parts';
import { lostBy } from './losses/lost-by';
import { Meter } from './meter';
import { openWaterSolver } from './open/open-solver';
import { resolveReleases, weightsOf } from './release-profile';
import { amountWorking } from './results/amount-working';
import { packField, largestOf } from './results/frame-message';
import { envelopesUntil, isochroneTimes, reachedLevel, reachedOf } from './results/isochrones';
import { contourLevels } from './results/levels';
import { hatched, noEstimateOf, type NoEstimate } from './results/no-estimate';
import { receptorAnswer } from './results/receptor-answer';
import { resolutionOf } from './results/resolution';
import { secondOpinion, type Opinion } from './second-opinion/second-opinion';
import { solverFor } from './solvers';
import type { Books, EstimateSink, GriddedField, PreparedField, ReceptorSite, RunInput } from './types';

export type SolveOptions = {
  /** Coarser grids and integrals, for a forecast that follows the hand. */
  preview?: boolean;
  isCancelled?: () => boolean;
};

/** Frames sent before the receptors are answered, so that something shows at once. */
const FIRST_FRAMES = 8;
/** A preview asks no more of the release-time integral than this. */
const PREVIEW_TOLERANCE = 1e-4;

/**
 * Solves one estimate document. Messages go to the sink as they are ready: start, first frames, receptor answers, the
 * other frames, envelope, result. Pure and repeatable: the same document gives the same bytes.
 *
 * @throws SolverInputError where the document cannot be solved, with field, value and remedy
 * @throws SolverCancelled when `isCancelled` says so; it is asked every few milliseconds
 */
export function solveEstimate(doc: EstimateDocument, sink: EstimateSink, options: SolveOptions = {}): EstimateResult {
  checkDoor(doc);
  const input = runInput(doc, options, sink);
  const solver = solverFor(doc);
  const field = solver.prepare(input);
  const frameTimesS = Array.from({ length: doc.frameCount }, (_, k) => (doc.horizonS * (k + 1)) / doc.frameCount);
  const runChecks = [...conditionChecks({ input, water: waterAtPlaces(doc)(doc.releases[0]!.channel) }), ...field.checks];
  const runStop = runChecks.find((check) => check.severity === 'stop' && check.receptorId === null) ?? null;
  const frames = new FrameWriter(input, field, frameTimesS, sink, noEstimateOf(input, runStop !== null));
  const unit = doc.substance.measure === 'count' ? 'counts/m3' : 'kg/m3';
  sink({ type: 'start', solver: solver.name, engineVersion: ENGINE_VERSION, unit, levels: frames.levels, frameTimesS });
  frames.write(0, Math.min(FIRST_FRAMES, doc.frameCount));
  const first = answerReceptors(input, field, sink, runStop);
  frames.write(Math.min(FIRST_FRAMES, doc.frameCount), doc.frameCount);
  const reached = frames.writeEnvelope();
  const opinion = input.isPreview ? null : secondOpinion(input, field, first.answers);
  const { answers, sites } = opinion ? withOpinion(input, first, opinion, sink) : first;
  const hinges = input.isPreview || solver !== openWaterSolver ? [] : hingeChecks(input, solver, answers);
  const books = field.books(doc.horizonS, input.weights.likely);
  const diagnostics = {
    ...diagnosticsOf(input, books, frames.cappedValues),
    maxCourant: field.numerics?.maxCourant ?? null,
    clippedValues: field.numerics?.clippedValues ?? 0,
    ...(input.isPreview ? {} : { resolution: resolutionOf(input, solver, field, answers) }),
  };
  const result: EstimateResult = {
    engineVersion: ENGINE_VERSION,
    solver: solver.name,
    seed: doc.seed,
    unit,
    levels: frames.levels,
    frameTimesS,
    receptors: answers,
    distanceTime: field.distanceTime(frameTimesS, input.weights.likely),
    ...(field.travelTimes && !input.isPreview ? { travelTimes: field.travelTimes(input.weights.likely) } : {}),
    reached,
    checks: [...commonChecks({ input, answers, books, cappedValues: frames.cappedValues }), ...runChecks, ...sites.flatMap((site) => site.checks), ...hinges],
    diagnostics,
    working: [...amountWorking(input), ...field.working],
    ...(opinion ? { secondOpinion: opinion.secondOpinion } : {}),
    ...(opinion?.paths ? { paths: opinion.paths } : {}),
  };
  sink({ type: 'result', result });
  return result;
}

function runInput(doc: EstimateDocument, options: SolveOptions, sink: EstimateSink): RunInput {
  const releases = resolveReleases(doc);
  const isPreview = options.preview ?? false;
  const parts = lossParts(doc);
  return {
    doc,
    releases,
    weights: weightsOf(releases),
    loss: combinedClock(parts),
    lossParts: parts,
    isPreview,
    tolerance: isPreview ? Math.max(doc.tolerance, PREVIEW_TOLERANCE) : doc.tolerance,
    meter: new Meter(options.isCancelled),
    progress: isPreview ? undefined : (stage, done, of) => sink({ type: 'progress', stage, done, of }),
  };
}

/** Makes frames once each, chooses the levels from three of them, and sends them. */
class FrameWriter {
  readonly levels;
  cappedValues = 0;
  private readonly made = new Map<number, GriddedField>();
  /** Largest value of each frame that has been sent. */
  private readonly largest: number[] = [];

  constructor(
    private readonly input: RunInput,
    private readonly field: PreparedField,
    private readonly timesS: readonly number[],
    private readonly sink: EstimateSink,
    private readonly noEstimate: NoEstimate,
  ) {
    const n = timesS.length;
    const probes = [...new Set([Math.floor(n / 6), Math.floor(n / 2), n - 1])].map((index) => largestOf(this.make(index).values)).sort((a, b) => a - b);
    this.levels = contourLevels(input.doc, probes[Math.floor(probes.length / 2)]!);
  }

  private make(index: number): GriddedField {
    const known = this.made.get(index);
    if (known) return known;
    const made = this.field.gridAt(this.timesS[index]!, this.input.weights.likely);
    this.made.set(index, made);
    return made;
  }

  write(from: number, to: number): void {
    for (let index = from; index < to; index++) {
      this.input.meter.assertWanted();
      const made = this.make(index);
      this.made.delete(index);
      const { payload, ...head } = packField(hatched(made, this.noEstimate), this.levels);
      this.largest[index] = largestOf(made.values);
      this.cappedValues += countAt(made.values, this.input.doc.substance.solubilityKgM3);
      this.sink({ type: 'frame', index, timeS: this.timesS[index]!, grid: made.grid, ...head }, payload);
      this.sink({ type: 'progress', stage: 'frames', done: index + 1, of: this.timesS.length });
    }
  }

  /** Sends the largest values over all time; gives the lines of first arrival that were found on the way. */
  writeEnvelope(): Reached | null {
    this.input.meter.assertWanted();
    const { horizonS } = this.input.doc;
    const level = this.input.weights.isPerUnit ? null : reachedLevel(this.levels);
    const timesS = level ? this.arrivalTimes(level.value).filter((t) => t < horizonS) : [];
    const fields = envelopesUntil(this.field, [...timesS, horizonS], this.timesS, this.input);
    const whole = fields[timesS.length]!;
    const { payload, ...head } = packField(hatched(whole, this.noEstimate), this.levels);
    this.sink({ type: 'envelope', grid: whole.grid, ...head }, payload);
    return level && reachedOf(this.input, level, timesS, fields.slice(0, -1), whole);
  }

  /** Times for lines of first arrival: from the first release to the first frame without the value. */
  private arrivalTimes(value: number): number[] {
    const lastAbove = this.largest.findLastIndex((most) => most >= value);
    const startS = Math.min(...this.input.releases.map((release) => release.profile.startS));
    return isochroneTimes(startS, this.timesS[Math.min(lastAbove + 1, this.timesS.length - 1)]!);
  }
}

function countAt(values: Float64Array, cap: number | null): number {
  if (cap === null) return 0;
  let count = 0;
  for (let i = 0; i < values.length; i++) if (values[i] === cap) count++;
  return count;
}

type Answered = { answers: ReceptorAnswer[]; sites: ReceptorSite[] };

function answerReceptors(input: RunInput, field: PreparedField, sink: EstimateSink, runStop: Check | null): Answered {
  const { receptors } = input.doc;
  const sites: ReceptorSite[] = [];
  const waterAt = waterAtPlaces(input.doc);
  const answers = receptors.map((receptor, index) => {
    input.meter.assertWanted();
    const site = field.receptor(index, receptor);
    const held: ReceptorSite = runStop ? { ...site, checks: [runStop, ...site.checks] } : site;
    const first = receptorAnswer(input, receptor, held);
    const late = answerChecks({ input, receptor, answer: first, water: waterAt(receptor.channel) });
    const isStopped = late.some((check) => check.severity === 'stop');
    const answer = isStopped ? receptorAnswer(input, receptor, { ...held, checks: [...held.checks, ...late] }) : first;
    sites.push({ ...site, checks: [...site.checks, ...late] });
    sink({ type: 'receptor', answer });
    sink({ type: 'progress', stage: 'receptors', done: index + 1, of: receptors.length });
    return answer;
  });
  return { answers, sites };
}

/** Answers a receptor anew where a second method disagrees; the others stand. */
function withOpinion(input: RunInput, { answers, sites }: Answered, { checks }: Opinion, sink: EstimateSink): Answered {
  const out: Answered = { answers: [...answers], sites: [...sites] };
  input.doc.receptors.forEach((receptor, index) => {
    const against = checks.filter((check) => check.receptorId === receptor.id);
    if (against.length === 0) return;
    const site = { ...sites[index]!, checks: [...sites[index]!.checks, ...against] };
    out.sites[index] = site;
    out.answers[index] = receptorAnswer(input, receptor, site);
    sink({ type: 'receptor', answer: out.answers[index]! });
  });
  return out;
}

const diagnosticsOf = (input: RunInput, books: Books, cappedValues: number): EstimateResult['diagnostics'] => ({
  massReleased: books.released,
  massInWater: books.inWater,
  massLost: books.lost,
  ...(input.doc.substance.applyLoss && input.lossParts.length > 0 ? { lostBy: lostBy(input, input.lossParts, input.doc.horizonS, books.lost) } : {}),
  massLeft: books.left,
  massResidual: books.released > 0 ? (books.released - books.inWater - books.lost - books.left) / books.released : 0,
  booksAtS: input.doc.horizonS,
  quadratureError: input.meter.worstError,
  evaluations: input.meter.evaluations,
  cappedValues,
});
