import { fromPlane, toPlane } from '../../../shared/geo';
import type { LonLat } from '../../../shared/schemas/basics';
import { lengthText } from '../format';
import { onWater, openFacts, type OpenFacts } from '../open/open-solver';
import { motionFor, type OpenSource } from '../open/puffs';
import type { PathWater, RunInput } from '../types';
import { birthsOf } from './births';
import { uniformMotion } from './motion';
import { arrivalFigures } from './passage';
import { isDrawn, rounded, type CloudPlace, type PathCurve, type PathPlan, type PathRun, type WatchedReceptor, watchStream } from './plan';
import { walkPlane, type PlaneObserver } from './plane-walk';
import { PlaneKernel, PlaneWatch } from './plane-watch';
import { PathRandom } from './random';
import { Walls } from './walls';

/** Youngest cloud whose size may set a kernel, s. */
const LEAST_AGE_S = 600;

/**
 * Random paths in open water: concentrations and arrivals at the watched receptors, the cloud at one time, lines to draw.
 * `water` is the current between shores where one is known; without it the current is the same everywhere.
 */
export function openPaths(input: RunInput, plan: PathPlan, water: PathWater | null): PathRun {
  const facts = openFacts(input);
  const walls = new Walls(facts.area);
  const [originLon, originLat] = input.doc.releases[0]!.position;
  const plane = { originLon, originLat };
  const count = Math.max(1, Math.floor(plan.paths / facts.sources.length));
  const places: CloudPlace[] = [];
  const lines: LonLat[][] = [];
  let ashore = 0;
  const watches = facts.sources.map((source) => {
    const share = (input.weights.likely[source.release.index]! * (1 / count));
    const watched = plan.watched.map((item, w) => watchFor(facts, source, item, w, water, walls, plan, count, (position) => toPlane(plane, position)));
    const scene: PlaneObserver = {
      ended: (_x, _y, _atS, how) => void (how === 'ashore' && ashore++),
      seen(k, x, y, bornS) {
        if (k === plan.cloudAt) places.push({ amount: share * survival(facts, bornS, plan.timesS[k]!), position: fromPlane(plane, x, y), reachId: null, chainageKm: 0, eta: 0 });
      },
    };
    const drawn = linesOf(plan, count, Math.ceil(plan.drawn / facts.sources.length), (x, y) => rounded(fromPlane(plane, x, y)), lines);
    walkPlane(
      {
        motion: water ? water.motionOf(source) : uniformMotion(facts.motion.shear ? facts.motion : motionFor(facts.motion, source), input.doc.horizonS),
        walls,
        line: water ? null : facts.shore,
        x: source.origins[0]!.x,
        y: source.origins[0]!.y,
        startVarianceM2: source.startVarianceM2,
        birthsS: birthsOf(source.release.profile, count),
        timesS: plan.timesS,
        random: new PathRandom(input.doc.seed, source.release.index),
        meter: input.meter,
      },
      [...watched.map(({ watch }) => watch), scene, drawn],
    );
    drawn.finish();
    return watched;
  });
  return {
    curves: plan.watched.map((item, i) => curveOf(facts, item, watches.map((list) => list[i]!), count, plan.timesS)),
    ashoreShare: ashore / (count * facts.sources.length),
    cloud: { places },
    lines,
  };
}

const survival = ({ input }: OpenFacts, bornS: number, tS: number): number => (input.doc.substance.applyLoss ? Math.exp(input.loss.exposure(bornS) - input.loss.exposure(tS)) : 1);

type Watched = { watch: PlaneWatch; kernel: PlaneKernel; depthM: number };

function watchFor(facts: OpenFacts, source: OpenSource, item: WatchedReceptor, w: number, water: PathWater | null, walls: Walls, plan: PathPlan, count: number, toXy: (position: LonLat) => [number, number]): Watched {
  const { profile } = source.release;
  const at = onWater(facts.area, ...toXy(item.receptor.position));
  const bornS = Math.min((profile.startS + profile.stopS) / 2, item.aboutS - LEAST_AGE_S);
  const covariance = new Float64Array(3);
  motionFor(facts.motion, source).spread.gained(bornS, Math.max(item.aboutS, bornS + LEAST_AGE_S), covariance);
  covariance[0]! += source.startVarianceM2;
  covariance[2]! += source.startVarianceM2;
  const kernel = new PlaneKernel(at.x, at.y, covariance, walls);
  const depthM = water ? water.thicknessM(at.x, at.y) : facts.motion.mixingDepthM;
  const perDepth = 1 / depthM;
  return { kernel, depthM, watch: new PlaneWatch(kernel, plan.timesS.length, count, (born, k) => perDepth * survival(facts, born, plan.timesS[k]!), new PathRandom(facts.input.doc.seed, watchStream(source.release.index, w))) };
}

function curveOf(facts: OpenFacts, { receptor }: WatchedReceptor, watched: readonly Watched[], count: number, timesS: readonly number[]): PathCurve {
  const { input, sources } = facts;
  const times = timesS.length;
  const values = new Float64Array(times);
  const variances = new Float64Array(times);
  const onePath = new Float64Array(times);
  watched.forEach(({ watch, kernel, depthM }, i) => {
    const release = sources[i]!.release;
    const weight = input.weights.likely[release.index]!;
    watch.tally.addMeanTo(values, variances, count, weight, release.capPerKg);
    const bornS = (release.profile.startS + release.profile.stopS) / 2;
    timesS.forEach((t, k) => (onePath[k] = Math.max(onePath[k]!, (weight * kernel.peak * survival(facts, Math.min(bornS, t), t)) / (depthM * count))));
  });
  const cap = input.doc.substance.solubilityKgM3 ?? Infinity;
  const arrivals = Float64Array.from(watched.flatMap(({ watch }) => [...watch.arrivalsS]));
  return {
    receptorId: receptor.id,
    values: values.map((value) => Math.min(cap, value)),
    errors: variances.map(Math.sqrt),
    onePath,
    counted: `within ${lengthText(watched[0]!.kernel.radiusM)}`,
    arrival: arrivalFigures(arrivals),
  };
}

type LineKeeper = PlaneObserver & { finish(): void };

/** Keeps some paths for drawing; one that ends stays where it left or came ashore. */
function linesOf(plan: PathPlan, count: number, wanted: number, toLonLat: (x: number, y: number) => LonLat, lines: LonLat[][]): LineKeeper {
  const isKept = new Set(plan.drawnAt);
  let line: LonLat[] | null = null;
  let last: LonLat | null = null;
  let missing = 0;
  const close = (): void => {
    if (line && last) for (; missing > 0; missing--) line.push(last);
    if (line && line.length > 0) lines.push(line);
    line = null;
  };
  return {
    begin(path, _x, _y, bornS) {
      close();
      line = isDrawn(path, count, wanted) ? [] : null;
      last = null;
      missing = line ? plan.drawnAt.filter((k) => plan.timesS[k]! >= bornS).length : 0;
    },
    seen(k, x, y) {
      if (!line || !isKept.has(k)) return;
      line.push(toLonLat(x, y));
      missing--;
    },
    ended(x, y) {
      last = toLonLat(x, y);
    },
    finish: close,
  };
}
