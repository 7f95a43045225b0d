import { alongReach } from '../../../../shared/geo';
import type { Bank, LonLat } from '../../../../shared/schemas/basics';
import shapes from './shapes.json';

type ShapeId = keyof typeof shapes.centrelines;
const ids = { 'ol-upper': 'r1', 'ol-middle': 'r2', 'ol-lower': 'r3', 'ol-estuary': 'estuary', evarrow: 'evarrow', quillock: 'quillock' } as const satisfies Record<string, ShapeId>;
export type ReachId = keyof typeof ids;

export const centrelineOf = (reachId: ReachId): [number, number, number][] => shapes.centrelines[ids[reachId]] as [number, number, number][];
export const areaOf = (id: keyof typeof shapes.areas): LonLat[][] => shapes.areas[id] as LonLat[][];

/** A place on the network, with its position on the centreline. */
export function onReach(reachId: ReachId, chainageKm: number, bank: Bank): { waterId: 'river-ollemar'; position: LonLat; channel: { reachId: ReachId; chainageKm: number; bank: Bank } } {
  const { position } = alongReach({ centreline: centrelineOf(reachId) }, chainageKm);
  const rounded: LonLat = [Number(position[0].toFixed(5)), Number(position[1].toFixed(5))];
  return { waterId: 'river-ollemar', position: rounded, channel: { reachId, chainageKm, bank } };
}
