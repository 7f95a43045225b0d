import { alongReach, distanceM, toPlane } from '../../shared/geo';
import type { FieldError } from '../../shared/problem';
import type { EstimateDocument, OpenWater, RiverWater } from '../../shared/schemas/estimate';
import { SolverInputError } from './errors';
import { lengthText, sig } from './format';
import { lossErrors } from './losses/loss-parts';
import { networkErrors } from './network/network-door';
import { gradientProblem } from './open/shear';
import { isInPlaneArea, nearestShore, planeArea } from './open/area-mask';
import { RECEPTOR_SNAP_M } from './open/open-solver';
import { reachStates } from './river/reach-state';
import { releaseProfile } from './release-profile';

/** A position this much farther off its river than the river is wide does not belong to it, m. */
const RIVER_SLACK_M = 1_000;

/** Refuses a document that its schema allows but no solver can take: places off the water, series too short. */
export function checkDoor(doc: EstimateDocument): void {
  const errors = doc.water.kind === 'open' ? openErrors(doc, doc.water) : riverErrors(doc, doc.water);
  if (errors.length === 0) errors.push(...lossErrors(doc));
  if (errors.length > 0) throw new SolverInputError(errors);
}

const positionText = ([lon, lat]: readonly [number, number]): string => `${lon}, ${lat}`;

function openErrors(doc: EstimateDocument, water: OpenWater): FieldError[] {
  const errors: FieldError[] = [];
  const [originLon, originLat] = doc.releases[0]!.position;
  const plane = { originLon, originLat };
  const area = planeArea(water.area, originLon, originLat);
  if (area.areaM2 < 1) errors.push({ path: 'water.area.0', message: `The outline of ${water.name} encloses ${sig(area.areaM2, 2)} m²: draw it round the water` });
  // The schema holds releases to the water itself; receptors at the shore may lie a little outside.
  doc.receptors.forEach((receptor, i) => {
    const [x, y] = toPlane(plane, receptor.position);
    if (isInPlaneArea(area, x, y)) return;
    const { distanceM: off } = nearestShore(area, x, y);
    if (off > RECEPTOR_SNAP_M)
      errors.push({ path: `receptors.${i}.position`, message: `${receptor.name} at ${positionText(receptor.position)} lies ${lengthText(off)} outside ${water.name}: move it onto the water, or choose the water it belongs to` });
  });
  errors.push(...seriesErrors(doc, water), ...shoreErrors(doc, water), ...formErrors(doc, water));
  return errors;
}

/** A measured current has to cover the whole estimate: its ends are not guessed. */
function seriesErrors(doc: EstimateDocument, water: OpenWater): FieldError[] {
  const fromS = Math.min(...doc.releases.map((release) => releaseProfile(release.timing).startS));
  return water.current.flatMap((part, i) => {
    if (part.kind !== 'series') return [];
    const [first, last] = [part.rows[0]!.atS, part.rows[part.rows.length - 1]!.atS];
    return first > fromS || last < doc.horizonS
      ? [{ path: `water.current.${i}.rows`, message: `The current series runs from ${first} s to ${last} s; the estimate needs ${fromS} s to ${doc.horizonS} s: add rows, or shorten the estimate` }]
      : [];
  });
}

/** Closed forms that cannot be joined, depths below the layer, and a path that does not cover its release. */
function formErrors(doc: EstimateDocument, water: OpenWater): FieldError[] {
  const profiles = doc.releases.map((release) => releaseProfile(release.timing));
  const problem = gradientProblem(water, doc.horizonS - Math.min(0, ...profiles.map((profile) => profile.startS)));
  const errors: FieldError[] = problem ? [{ path: `water.${problem.path}`, message: problem.message }] : [];
  doc.releases.forEach(({ depthM, path, name }, i) => {
    if (depthM !== undefined && depthM > water.mixingDepthM)
      errors.push({ path: `releases.${i}.depthM`, message: `${name} at ${depthM} m lies below the mixing depth of ${water.mixingDepthM} m: raise it, or mix deeper` });
    const { startS, stopS } = profiles[i]!;
    if (path && (path[0]!.atS > startS || path[path.length - 1]!.atS < stopS))
      errors.push({ path: `releases.${i}.path`, message: `The path runs from ${path[0]!.atS} s to ${path[path.length - 1]!.atS} s, the release from ${startS} s to ${stopS} s: let the path cover it` });
  });
  return errors;
}

function shoreErrors(doc: EstimateDocument, water: OpenWater): FieldError[] {
  const shore = water.straightShore;
  if (!shore) return [];
  const plane = { originLon: shore.from[0], originLat: shore.from[1] };
  const [bx, by] = toPlane(plane, shore.to);
  if (Math.hypot(bx, by) < 1) return [{ path: 'water.straightShore.to', message: `The straight shore runs from ${positionText(shore.from)} to the same place: give two places` }];
  const sides = doc.releases.map((release) => {
    const [x, y] = toPlane(plane, release.position);
    return Math.sign(bx * y - by * x);
  });
  if (shore.oppositeM !== undefined) {
    const across = doc.releases.map((release) => {
      const [x, y] = toPlane(plane, release.position);
      return Math.abs(bx * y - by * x) / Math.hypot(bx, by);
    });
    const beyond = across.findIndex((off) => off > shore.oppositeM!);
    if (beyond >= 0)
      return [{ path: 'water.straightShore.oppositeM', message: `The opposite shore stands ${shore.oppositeM} m across, and ${doc.releases[beyond]!.name} lies ${lengthText(across[beyond]!)} off the first: move it farther` }];
  }
  const odd = sides.findIndex((side) => side !== 0 && side !== sides[0]);
  return odd > 0 ? [{ path: `releases.${odd}.position`, message: 'This release lies on the other side of the straight shore from the first: move it, or leave the straight shore out' }] : [];
}

function riverErrors(doc: EstimateDocument, water: RiverWater): FieldError[] {
  const states = new Map(reachStates(water).map((state) => [state.reach.id, state] as const));
  const offRiver = (place: { position: [number, number]; channel: { reachId: string; chainageKm: number } | null }, path: string): FieldError[] => {
    const state = place.channel && states.get(place.channel.reachId);
    if (!place.channel || !state) return [];
    const off = distanceM(place.position, alongReach(state.reach, place.channel.chainageKm).position);
    return off > RIVER_SLACK_M + state.widthM
      ? [{ path, message: `${positionText(place.position)} lies ${lengthText(off)} from km ${place.channel.chainageKm} of ${state.reach.name}: mend the position or the chainage` }]
      : [];
  };
  return [...networkErrors(doc, water), ...doc.releases.flatMap((release, i) => offRiver(release, `releases.${i}.position`)), ...doc.receptors.flatMap((receptor, i) => offRiver(receptor, `receptors.${i}.position`))];
}
