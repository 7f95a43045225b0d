import { toPlane } from '../../../shared/geo';
import type { EstimateReceptor, OpenWater } from '../../../shared/schemas/estimate';
import type { WorkingLine } from '../../../shared/schemas/estimate-result';
import { openReceptorChecks, openRunChecks } from '../checks/open-checks';
import type { LonLat } from '../../../shared/schemas/basics';
import type { Books, GriddedField, PreparedField, ReceptorSite, RunInput, Solver } from '../types';
import type { Weights } from '../release-profile';
import { massBetweenShores } from './channel-books';
import { isInPlaneArea, nearestShore, planeArea, clearLand, type PlaneArea } from './area-mask';
import { alongShore, currentOf, type Current } from './current';
import { addField, cloudBox, envelopesOf, fieldAt, gridFor, type OpenGridding } from './open-grid';
import { openResponse } from './open-response';
import { NodeResponses } from './node-response';
import { openReceptorWorking, openRunWorking } from './open-working';
import { motionFor, type OpenMotion, type OpenSource } from './puffs';
import { gridPuffs } from './grid-puffs';
import { gradientOf, shearOf, spreadInShear } from './shear';
import { mirrored, shoreFrame, type ShoreFrame } from './shores';
import { spreadOf } from './spread';
import { trackOf } from './track';
import { depthFactor } from './vertical';

/** A receptor no farther than this outside the water is taken as being at its edge, m. */
export const RECEPTOR_SNAP_M = 300;
const TRACK_SAMPLES = 400;

/** Closed-form normal clouds in open water: lakes, harbours, estuaries and coasts with a current uniform in space. */
export const openWaterSolver: Solver = { name: 'open water, closed form', prepare: prepareOpenWater };

/** All that the checks and the working of open water read. */
export type OpenFacts = {
  readonly input: RunInput;
  readonly water: OpenWater;
  readonly motion: OpenMotion;
  /** The current before a straight shore took its part across away. */
  readonly freeCurrent: Current;
  readonly shore: ShoreFrame | null;
  readonly sources: readonly OpenSource[];
  readonly area: PlaneArea;
};

function prepareOpenWater(input: RunInput): PreparedField {
  const { doc } = input;
  const facts = openFacts(input);
  const { area, motion, sources } = facts;
  const [originLon, originLat] = doc.releases[0]!.position;
  const plane = { originLon, originLat };
  const gridding: OpenGridding = {
    motion,
    sources,
    area,
    originLon,
    originLat,
    maxNodes: input.isPreview ? 96 : 160,
    withLoss: doc.substance.applyLoss,
    solubility: doc.substance.solubilityKgM3 ?? Infinity,
    meter: input.meter,
  };
  const envelopes = (untilS: readonly number[], weights: Weights): GriddedField[] => envelopesOf(gridding, weights, untilS, input.isPreview ? 60 : 300);
  const nodes = sources.map((source) => (input.isPreview && NodeResponses.fits(motion, source) ? new NodeResponses(motionFor(motion, source), source, doc.horizonS, input.meter) : null));
  return {
    receptor: (_index, receptor) => siteOf(facts, nodes, receptor, (position) => toPlane(plane, position)),
    gridAt: (tS, weights) => fieldAt(gridding, weights, tS),
    envelope: (timesS, weights) => envelopes(timesS.slice(-1), weights)[0]!,
    envelopes,
    distanceTime: () => null,
    books: (tS, weights) => booksAt(gridding, weights, tS),
    working: openRunWorking(facts),
    checks: openRunChecks(facts),
  };
}

/** Plane, current, spreading and sources of a document in open water; the plane has its origin at the first release. */
export function openFacts(input: RunInput): OpenFacts {
  const { doc } = input;
  const water = doc.water as OpenWater;
  const [originLon, originLat] = doc.releases[0]!.position;
  const plane = { originLon, originLat };
  const area = planeArea(water.area, originLon, originLat);
  const starts = input.releases.map(({ release }) => toPlane(plane, release.path?.[0]?.position ?? release.position));
  const drawn = water.straightShore;
  const shore = drawn ? shoreFrame(toPlane(plane, drawn.from), toPlane(plane, drawn.to), ...starts[0]!, drawn.oppositeM ?? null) : null;
  const freeCurrent = currentOf(water.current);
  const current = shore ? alongShore(freeCurrent, shore.ex, shore.ey) : freeCurrent;
  const fromS = Math.min(0, ...input.releases.map((release) => release.profile.startS));
  const base = { current, loss: input.loss, mixingDepthM: water.mixingDepthM, shore };
  const gradient = gradientOf(water);
  const motion: OpenMotion = gradient
    ? { ...base, spread: spreadInShear(water.mixing, gradient, doc.horizonS - fromS), shear: shearOf(gradient, current, fromS, doc.horizonS, placeOf(toPlane(plane, water.velocityGradient?.at ?? doc.releases[0]!.position))) }
    : { ...base, spread: spreadOf(water.mixing, current, fromS, doc.horizonS, shore) };
  const sources = input.releases.map((release, index): OpenSource => {
    const at = placeOf(starts[index]!);
    const { path, initialRadiusM } = release.release;
    const track = path && trackOf(path.map((row) => ({ atS: row.atS, ...placeOf(toPlane(plane, row.position)) })));
    return { release, origins: shore && shore.oppositeM === null ? [at, mirrored(at, shore)] : [at], startVarianceM2: initialRadiusM ** 2 / 4, ...(track ? { track } : {}) };
  });
  return { input, water, motion, freeCurrent, shore, sources, area };
}

const placeOf = ([x, y]: [number, number]): { x: number; y: number } => ({ x, y });

/** A place as it stands on the water: itself, or the nearest point of the outline. */
export const onWater = (area: PlaneArea, x: number, y: number): { x: number; y: number; movedM: number } => {
  if (isInPlaneArea(area, x, y)) return { x, y, movedM: 0 };
  const shore = nearestShore(area, x, y);
  return { x: shore.x, y: shore.y, movedM: shore.distanceM };
};

/** Distance to the start of a release, or to the nearest place on the way of one that moves, m. */
function nearestStartM(source: OpenSource, x: number, y: number): number {
  if (!source.track) return Math.hypot(x - source.origins[0]!.x, y - source.origins[0]!.y);
  const { startS, stopS } = source.release.profile;
  const at = new Float64Array(2);
  let least = Infinity;
  for (let k = 0; k <= TRACK_SAMPLES; k++) {
    source.track.place(startS + ((stopS - startS) * k) / TRACK_SAMPLES, at);
    least = Math.min(least, Math.hypot(x - at[0]!, y - at[1]!));
  }
  return least;
}

function siteOf(facts: OpenFacts, nodes: readonly (NodeResponses | null)[], receptor: EstimateReceptor, toXy: (position: LonLat) => [number, number]): ReceptorSite {
  const { input, motion, sources, area } = facts;
  const at = onWater(area, ...toXy(receptor.position));
  const distanceM = Math.min(...sources.map((source) => nearestStartM(source, at.x, at.y)));
  const responses = sources.map((source, i) => openResponse(motion, source, at.x, at.y, input.doc.horizonS, input.tolerance, input.meter, depthFactor(facts.water, source.release.release.depthM ?? 0, receptor.depthM), nodes[i]));
  return {
    distanceM,
    responses,
    reason: '',
    checks: openReceptorChecks({ ...facts, receptor, distanceM, movedM: at.movedM }),
    working: (peakS): WorkingLine[] => openReceptorWorking(facts, receptor, at, distanceM, peakS),
  };
}

/** Books by summing a grid over the whole cloud: in the water, lost, and the part that the closed form lays over land. */
function booksAt(gridding: OpenGridding, weights: Weights, tS: number): Books {
  const { motion, sources } = gridding;
  const released = sources.reduce((sum, source) => sum + weights[source.release.index]! * source.release.profile.released(tS), 0);
  if (released === 0) return { released: 0, inWater: 0, lost: 0, left: 0 };
  const { all, overLand } = cloudMass(gridding, weights, tS);
  const surviving = gridding.withLoss
    ? sources.reduce((sum, source) => {
        const alone = gridPuffs({ ...motion, shore: null }, { ...source, origins: source.origins.slice(0, 1) }, tS, weights[source.release.index]!, 1, true);
        return sum + alone.amount.reduce((part, amount) => part + amount * motion.mixingDepthM, 0);
      }, 0)
    : released;
  return { released, inWater: all - overLand, lost: released - surviving, left: overLand };
}

/** The amount of all clouds and the part laid over land, summed over a grid. */
function cloudMass(gridding: OpenGridding, weights: Weights, tS: number): { all: number; overLand: number } {
  const { motion, sources, area } = gridding;
  const uncapped: OpenGridding = { ...gridding, sources: sources.map((source) => ({ ...source, release: { ...source.release, capPerKg: Infinity } })) };
  if (typeof motion.shore?.oppositeM === 'number') return massBetweenShores(uncapped, motion.shore, weights, tS);
  const box = cloudBox(motion, sources, weights, tS)!;
  const grid = gridFor(box, gridding, 160);
  const values = new Float64Array(grid.nx * grid.ny);
  addField(values, grid, uncapped, weights, tS);
  const volume = grid.dxM * grid.dyM * motion.mixingDepthM;
  const all = values.reduce((sum, value) => sum + value, 0) * volume;
  const removed = clearLand(values, grid, area) * volume;
  // Behind a straight shore the grid holds the cloud twice: its mirror half lies over land by construction.
  const isMirrored = sources[0]!.origins.length > 1;
  return isMirrored ? { all: all / 2, overLand: Math.max(0, removed - all / 2) } : { all, overLand: removed };
}
