import { toPlane } from '../../../shared/geo';
import type { EstimateReceptor, OpenWater } from '../../../shared/schemas/estimate';
import type { WorkingLine } from '../../../shared/schemas/estimate-result';
import { openReceptorChecks, openRunChecks } from '../checks/open-checks';
import type { LonLat } from '../../../shared/schemas/basics';
import type { Books, GriddedField, PreparedField, ReceptorSite, RunInput, Solver } from '../types';
import type { Weights } from '../release-profile';
import { isInPlaneArea, nearestShore, planeArea, clearLand, type PlaneArea } from './area-mask';
import { alongShore, currentOf, type Current } from './current';
import { addField, cloudBox, envelopesOf, fieldAt, gridFor, type OpenGridding } from './open-grid';
import { openResponse } from './open-response';
import { openReceptorWorking, openRunWorking } from './open-working';
import type { OpenMotion, OpenSource } from './puffs';
import { gridPuffs } from './grid-puffs';
import { spreadOf } from './spread';

/** A receptor no farther than this outside the water is taken as being at its edge, m. */
export const RECEPTOR_SNAP_M = 300;

/** Closed-form normal clouds in open water: lakes, harbours, estuaries and coasts with a current uniform in space. */
export const openWaterSolver: Solver = { name: 'open water, closed form', prepare: prepareOpenWater };

export type ShoreFrame = { ex: number; ey: number; x: number; y: number };

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
  return {
    receptor: (_index, receptor) => siteOf(facts, receptor, (position) => toPlane(plane, position)),
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
  const shore = water.straightShore ? shoreFrame(toPlane(plane, water.straightShore.from), toPlane(plane, water.straightShore.to)) : null;
  const freeCurrent = currentOf(water.current);
  const current = shore ? alongShore(freeCurrent, shore.ex, shore.ey) : freeCurrent;
  const fromS = Math.min(0, ...input.releases.map((release) => release.profile.startS));
  const motion: OpenMotion = { current, spread: spreadOf(water.mixing, current, fromS, doc.horizonS, shore), loss: input.loss, mixingDepthM: water.mixingDepthM };
  const sources = input.releases.map((release): OpenSource => {
    const [x, y] = toPlane(plane, release.release.position);
    const at = { x, y };
    return { release, origins: shore ? [at, mirrored(at, shore)] : [at], startVarianceM2: release.release.initialRadiusM ** 2 / 4 };
  });
  return { input, water, motion, freeCurrent, shore, sources, area };
}

const shoreFrame = ([ax, ay]: [number, number], [bx, by]: [number, number]): ShoreFrame => {
  const length = Math.hypot(bx - ax, by - ay);
  return { ex: (bx - ax) / length, ey: (by - ay) / length, x: ax, y: ay };
};

/** Mirror image of a place beyond the shore's line. */
const mirrored = (at: { x: number; y: number }, shore: ShoreFrame): { x: number; y: number } => {
  const off = (at.x - shore.x) * -shore.ey + (at.y - shore.y) * shore.ex;
  return { x: at.x + 2 * off * shore.ey, y: at.y - 2 * off * shore.ex };
};

/** A place as it stands on the water: itself, or the nearest point of the outline. */
export const onWater = (area: PlaneArea, x: number, y: number): { x: number; y: number; movedM: number } => {
  if (isInPlaneArea(area, x, y)) return { x, y, movedM: 0 };
  const shore = nearestShore(area, x, y);
  return { x: shore.x, y: shore.y, movedM: shore.distanceM };
};

function siteOf(facts: OpenFacts, receptor: EstimateReceptor, toXy: (position: LonLat) => [number, number]): ReceptorSite {
  const { input, motion, sources, area } = facts;
  const at = onWater(area, ...toXy(receptor.position));
  const distanceM = Math.min(...sources.map((source) => Math.hypot(at.x - source.origins[0]!.x, at.y - source.origins[0]!.y)));
  const responses = sources.map((source) => openResponse(motion, source, at.x, at.y, input.doc.horizonS, input.tolerance, input.meter));
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
  const { motion, sources, area } = gridding;
  const released = sources.reduce((sum, source) => sum + weights[source.release.index]! * source.release.profile.released(tS), 0);
  const box = cloudBox(motion, sources, weights, tS);
  if (!box) return { released: 0, inWater: 0, lost: 0, left: 0 };
  const grid = gridFor(box, gridding, 160);
  const values = new Float64Array(grid.nx * grid.ny);
  addField(values, grid, { ...gridding, sources: sources.map((source) => ({ ...source, release: { ...source.release, capPerKg: Infinity } })) }, weights, tS);
  const volume = grid.dxM * grid.dyM * motion.mixingDepthM;
  const all = values.reduce((sum, value) => sum + value, 0) * volume;
  const removed = clearLand(values, grid, area) * volume;
  // Behind a straight shore the grid holds the cloud twice: its mirror half lies over land by construction.
  const isMirrored = sources[0]!.origins.length > 1;
  const cloud = isMirrored ? all / 2 : all;
  const overLand = Math.max(0, isMirrored ? removed - all / 2 : removed);
  const surviving = gridding.withLoss
    ? sources.reduce((sum, source) => {
        const puffs = gridPuffs(motion, source, tS, weights[source.release.index]!, 0.7 * Math.max(grid.dxM, grid.dyM), true);
        return sum + puffs.amount.reduce((part, amount) => part + amount * motion.mixingDepthM, 0) / source.origins.length;
      }, 0)
    : released;
  return { released, inWater: cloud - overLand, lost: released - surviving, left: overLand };
}
