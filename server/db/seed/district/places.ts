import { alongReach } from '../../../../shared/geo';
import type { Bank, LonLat } from '../../../../shared/schemas/basics';
import shapes from './shapes.json';

type ShapeId = keyof typeof shapes.centrelines;
type Vertex = [lon: number, lat: number, km: number];
const ids = { 'ol-upper': 'r1', 'ol-middle': 'r2', 'ol-lower': 'r3', 'ol-estuary': 'estuary', evarrow: 'evarrow', quillock: 'quillock' } as const satisfies Record<string, ShapeId>;
export type LineId = keyof typeof ids;

/**
 * Stretches of the estuary from Low Weir to the bar: chainage of the upper and lower end, mean width and mean depth between
 * the surveyed sections (width 60 / 150 / 350 / 600 / 900 / 1,220 m, depth 2 / 3 / 4 / 5 / 6 / 6 m at km 14 / 12 / 9 / 6 / 3 / 0);
 * strongest tidal current at springs at the lower end (0.90 m/s at the bar, 0.75 at km 7, 0.45 at km 12, linear between).
 */
export const estuaryStretches = [
  { id: 'ol-estuary-12', fromKm: 14, toKm: 12, widthM: 105, depthM: 2.5, springsMps: 0.45 },
  { id: 'ol-estuary-9', fromKm: 12, toKm: 9, widthM: 250, depthM: 3.5, springsMps: 0.63 },
  { id: 'ol-estuary-6', fromKm: 9, toKm: 6, widthM: 475, depthM: 4.5, springsMps: 0.77 },
  { id: 'ol-estuary-3', fromKm: 6, toKm: 3, widthM: 750, depthM: 5.5, springsMps: 0.84 },
  { id: 'ol-estuary-0', fromKm: 3, toKm: 0, widthM: 1_060, depthM: 6, springsMps: 0.9 },
] as const;
export type ReachId = Exclude<LineId, 'ol-estuary'> | (typeof estuaryStretches)[number]['id'];

const lineOf = (id: LineId): Vertex[] => shapes.centrelines[ids[id]] as Vertex[];
const stretchOf = (reachId: ReachId) => estuaryStretches.find(({ id }) => id === reachId);
const rounded = ([lon, lat]: LonLat): LonLat => [Number(lon.toFixed(5)), Number(lat.toFixed(5))];

export function centrelineOf(reachId: ReachId): Vertex[] {
  const stretch = stretchOf(reachId);
  return stretch ? cutOut(lineOf('ol-estuary'), stretch.fromKm, stretch.toKm) : lineOf(reachId as LineId);
}

/** The part of a line between two chainages, with both ends on it. */
function cutOut(line: Vertex[], fromKm: number, toKm: number): Vertex[] {
  const end = (km: number): Vertex => [...rounded(alongReach({ centreline: line }, km).position), km];
  return [end(fromKm), ...line.filter(([, , km]) => km < fromKm && km > toKm), end(toKm)];
}

export const areaOf = (id: keyof typeof shapes.areas): LonLat[][] => shapes.areas[id] as LonLat[][];

/** A place on the network, with its position on the centreline; `line` names a river or the estuary as a whole. */
export function onReach(line: LineId, chainageKm: number, bank: Bank): { waterId: 'river-ollemar'; position: LonLat; channel: { reachId: ReachId; chainageKm: number; bank: Bank } } {
  const reachId = line === 'ol-estuary' ? estuaryStretches.find(({ fromKm, toKm }) => chainageKm <= fromKm && chainageKm >= toKm)!.id : line;
  return { waterId: 'river-ollemar', position: rounded(alongReach({ centreline: lineOf(line) }, chainageKm).position), channel: { reachId, chainageKm, bank } };
}
