import { toPlane } from '../../../shared/geo';
import type { EstimateReceptor } from '../../../shared/schemas/estimate';
import type { Check } from '../../../shared/schemas/estimate-result';
import { lengthText } from '../format';
import { onWater, openFacts, type OpenFacts } from '../open/open-solver';
import { motionFor, type OpenSource } from '../open/puffs';
import { boundedMotion } from '../paths/bounded-motion';
import type { PathWater, PreparedField, ReceptorSite, RunInput, Solver } from '../types';
import { boundedReceptorChecks, boundedRunChecks } from './bounded-checks';
import { boundedPlan, type BoundedPlan } from './bounded-plan';
import { recordedResponse } from './bounded-response';
import { BoundedRun, type RunFigures, type RunPlan } from './bounded-run';
import { boundedReceptorWorking, boundedRunWorking } from './bounded-working';
import type { PlanePoint } from './bounded-water';
import { bilinearWeights, nearestCell } from './cell-grid';
import { FrameStore } from './frame-store';
import { SiteRecorder, type SiteCells } from './site-recorder';
import type { TracerField } from './tracer-field';

/** Lakes, harbours and bays within their shore: a current consistent with mass on a grid, and what it carries by finite volumes. */
export const boundedSolver: Solver = { name: 'bounded water, finite volumes', prepare: prepareBounded };

/** All that the checks and the working of bounded water read. */
export type BoundedFacts = {
  readonly open: OpenFacts;
  readonly plan: BoundedPlan;
  readonly figures: RunFigures;
  /** Places of all releases; of one that moves, places all along its way. */
  readonly releases: readonly PlanePoint[];
};

/** A place on the water at this resolution; `cells` is empty where no water of a release is near. */
export type BoundedPlace = { readonly xM: number; readonly yM: number; readonly movedM: number; readonly distanceM: number; readonly cells: SiteCells };

/** A receptor may lie this many cells from the nearest water of the grid. */
const SITE_CELLS = 2.5;
const WAY_SAMPLES = 200;

function prepareBounded(input: RunInput): PreparedField {
  const { doc } = input;
  const open = openFacts(input);
  const [originLon, originLat] = doc.releases[0]!.position;
  const origin = { originLon, originLat };
  const toXy = (position: readonly [number, number]): PlanePoint => {
    const [xM, yM] = toPlane(origin, [position[0], position[1]]);
    return { xM, yM };
  };
  const starts = open.sources.map(wayOf);
  const releases = starts.flat();
  const besides = input.releases.map(({ profile }) => !doc.substance.applyLoss && input.loss.kind !== 'none' && !profile.isInstant);
  const plan = boundedPlan(open, toXy, releases, input.releases.length + besides.filter(Boolean).length);
  const runPlan: RunPlan = { flow: plan.flow, mixing: open.water.mixing, releases: input.releases.map((release, r) => ({ release, ...starts[r]![0]!, track: open.sources[r]!.track })), horizonS: doc.horizonS, loss: input.loss, isPreview: input.isPreview, meter: input.meter };
  const fields = input.releases.map((_, r) => BoundedRun.field(runPlan, r, doc.substance.applyLoss ? input.loss : null));
  const lossy = besides.map((isMeant, r) => (isMeant ? BoundedRun.field(runPlan, r, input.loss) : null));
  const all = [...fields, ...lossy.filter((field) => field !== null)];
  const places = doc.receptors.map((receptor) => placeOf(open, plan, releases, receptor, toXy));
  const run = new BoundedRun(runPlan, all);
  const recorder = new SiteRecorder(places.map((place) => place.cells), all, run.startS, doc.horizonS, input.isPreview);
  const store = new FrameStore({ water: plan.water, origin, capsPerKg: input.releases.map((release) => release.capPerKg), solubility: doc.substance.solubilityKgM3 ?? Infinity, likely: input.weights.likely });
  stepThrough(input, run, all, fields, recorder, store);
  const wet = plan.water.grid.isWater.reduce((sum, mark) => sum + mark, 0);
  const facts: BoundedFacts = { open, plan, figures: run.figures, releases };
  return {
    receptor: (index, receptor) => siteOf(facts, receptor, places[index]!, (r) => responseOf(input, recorder, index, r, lossy[r] ? all.indexOf(lossy[r]) : -1)),
    gridAt: (tS, weights) => store.fieldAt(tS, weights),
    envelope: (timesS, weights) => store.envelope(timesS[timesS.length - 1]!, weights),
    distanceTime: () => null,
    books: (tS, weights) => store.books(tS, weights),
    working: boundedRunWorking(facts),
    checks: boundedRunChecks(facts),
    pathWater: pathWaterOf(facts),
    numerics: {
      maxCourant: run.figures.worstCourant,
      clippedValues: 0,
      resolution: `${wet} cells of ${lengthText(plan.water.grid.dxM)}, ${run.figures.steps} steps; cells of twice the side would start every cloud twice as wide and smear what is narrower than ${lengthText(6 * plan.water.grid.dxM)}`,
    },
  };
}

/** Where a release is let go: its place, or places along its way while it lasts. */
function wayOf({ origins, track, release }: OpenSource): PlanePoint[] {
  if (!track) return [{ xM: origins[0]!.x, yM: origins[0]!.y }];
  const { startS, stopS } = release.profile;
  const at = new Float64Array(2);
  return Array.from({ length: WAY_SAMPLES + 1 }, (_, k) => {
    track.place(startS + ((stopS - startS) * k) / WAY_SAMPLES, at);
    return { xM: at[0]!, yM: at[1]! };
  });
}

function pathWaterOf({ open, plan }: BoundedFacts): PathWater {
  const { mixing } = open.water;
  const turning = mixing.kind === 'constant' && mixing.turnsWithCurrent && mixing.alongM2s !== mixing.acrossM2s ? mixing : null;
  return {
    motionOf: (source) => boundedMotion(plan.flow, plan.fastestMps, motionFor(open.motion, source).spread, turning, open.input.doc.horizonS),
    thicknessM(x, y) {
      const nearest = nearestCell(plan.water.grid, x, y);
      return nearest ? plan.water.thicknessM[nearest.cell]! : open.water.mixingDepthM;
    },
  };
}

function stepThrough({ doc, releases, progress, isPreview }: RunInput, run: BoundedRun, all: readonly TracerField[], fields: readonly TracerField[], recorder: SiteRecorder, store: FrameStore): void {
  const frames = new Set(Array.from({ length: doc.frameCount }, (_, k) => (doc.horizonS * (k + 1)) / doc.frameCount));
  const stops = releases.flatMap(({ profile }) => [profile.startS, profile.stopS]);
  const events = [...new Set([...frames, ...stops, doc.horizonS])].filter((tS) => tS > run.startS && tS <= doc.horizonS).sort((a, b) => a - b);
  recorder.record(run.timeS, true);
  let percent = 0;
  for (const eventS of events) {
    run.advance(eventS, () => {
      recorder.record(run.timeS, run.timeS === doc.horizonS);
      if (run.figures.steps % 2 === 0) store.raise(fields);
      const now = Math.floor((100 * (run.timeS - run.startS)) / (doc.horizonS - run.startS));
      if (now > percent && !isPreview) progress?.('steps', now, 100);
      percent = now;
    });
    store.raise(fields);
    if (!frames.has(eventS) && eventS !== doc.horizonS) continue;
    all.forEach((field) => run.assertFinite(field));
    store.keep(eventS, fields, run.volume);
  }
}

function responseOf(input: RunInput, recorder: SiteRecorder, site: number, r: number, lossyAt: number) {
  const { profile, capPerKg } = input.releases[r]!;
  const plain = recorder.series(site, r);
  const lossy = input.doc.substance.applyLoss ? plain : lossyAt < 0 ? null : recorder.series(site, lossyAt);
  return recordedResponse(plain, lossy, profile.isInstant ? { atS: profile.startS, loss: input.loss } : null, capPerKg);
}

function placeOf(open: OpenFacts, { water }: BoundedPlan, releases: readonly PlanePoint[], receptor: EstimateReceptor, toXy: (position: readonly [number, number]) => PlanePoint): BoundedPlace {
  const asked = toXy(receptor.position);
  const at = onWater(open.area, asked.xM, asked.yM);
  const distanceM = Math.min(...releases.map((release) => Math.hypot(at.x - release.xM, at.y - release.yM)));
  const around = bilinearWeights(water.grid, at.x, at.y);
  const nearest = around.length > 0 ? null : nearestCell(water.grid, at.x, at.y);
  const cells = nearest && nearest.distanceM <= SITE_CELLS * water.grid.dxM ? [{ cell: nearest.cell, weight: 1 }] : around;
  return { xM: at.x, yM: at.y, movedM: at.movedM, distanceM, cells };
}

function siteOf(facts: BoundedFacts, receptor: EstimateReceptor, place: BoundedPlace, responseAt: (release: number) => ReturnType<typeof recordedResponse>): ReceptorSite {
  const { input } = facts.open;
  if (place.cells.length === 0) {
    const check: Check = {
      code: 'cut-off',
      severity: 'stop',
      title: 'No water leads there',
      detail: `On cells of ${lengthText(facts.plan.water.grid.dxM)} no water joins the release to ${receptor.name}.`,
      remedy: 'Draw the passage wider, draw a smaller part of the water, or ask for the closed form.',
      receptorId: receptor.id,
    };
    return { distanceM: place.distanceM, responses: input.releases.map(() => null), reason: check.title, checks: [check], working: () => [] };
  }
  return {
    distanceM: place.distanceM,
    responses: input.releases.map((_, r) => responseAt(r)),
    reason: '',
    checks: boundedReceptorChecks(facts, receptor, place),
    working: (peakS) => boundedReceptorWorking(facts, receptor, place, peakS),
  };
}
