import { alongReach, distanceM, snapToReaches } from '../../../../shared/geo';
import type { LonLat } from '../../../../shared/schemas/basics';
import type { Reach } from '../../../../shared/schemas/estimate';
import type { RegisterItem, RiverData, WaterData } from '../../../../shared/schemas/registers';
import { bankWords, wordOf } from './register-words';

export type WaterItem = RegisterItem<'waters'>;
export type Channel = { reachId: string; chainageKm: number | null; bank: string };
type Bounds = [LonLat, LonLat];

export const isRiverData = (data: WaterData): data is RiverData => data.kind === 'river';
const noReaches: Reach[] = [];
export const reachesOf = (water: WaterItem | undefined): Reach[] => (water && isRiverData(water.data) ? water.data.reaches : noReaches);

const noArea: LonLat[][] = [];
export const areaOf = (water: WaterItem | undefined): LonLat[][] => (water && !isRiverData(water.data) ? water.data.area : noArea);

/** "OL km 42.0, right bank". */
export function channelText(channel: Channel, reaches: readonly Pick<Reach, 'id' | 'chainagePrefix'>[]): string {
  const prefix = reaches.find(({ id }) => id === channel.reachId)?.chainagePrefix;
  return `${prefix && prefix !== 'km' ? `${prefix} ` : ''}km ${channel.chainageKm === null ? '?' : channel.chainageKm.toFixed(1)}, ${wordOf(bankWords, channel.bank)}`;
}

/** "OL km 42.0, right bank, River Ollemar", or the name of the open water. */
export function placeText(place: { waterId: string; channel: Channel | null }, waters: readonly WaterItem[]): string {
  const water = waters.find(({ id }) => id === place.waterId);
  const name = water?.name ?? place.waterId;
  return place.channel ? `${channelText(place.channel, reachesOf(water))}, ${name}` : name;
}

/** What a click on the map means for an entry on a river: the nearest chainage and its bank. */
export function snapped(position: LonLat, reaches: readonly Reach[]): { channel: Channel; offM: number } | null {
  const snap = snapToReaches(position, reaches);
  return snap && { channel: { reachId: snap.reachId, chainageKm: Math.round(snap.chainageKm * 100) / 100, bank: snap.bank }, offM: snap.distanceM };
}

/** A position on the centreline, to the metre. */
export const positionAt = (reach: Reach, chainageKm: number): LonLat => rounded(alongReach(reach, chainageKm).position);
export const rounded = ([lon, lat]: LonLat): LonLat => [Number(lon.toFixed(5)), Number(lat.toFixed(5))];

export const isPosition = (value: unknown): value is LonLat => Array.isArray(value) && value.length === 2 && value.every((part) => typeof part === 'number' && Number.isFinite(part));

export const isDrawable = (line: unknown): boolean => Array.isArray(line) && line.length > 1 && line.every((vertex) => Array.isArray(vertex) && vertex.every((part) => typeof part === 'number' && Number.isFinite(part)));

export function boundsOf(positions: readonly (readonly number[])[]): Bounds | null {
  if (positions.length === 0) return null;
  const lons = positions.map(([lon]) => lon!);
  const lats = positions.map(([, lat]) => lat!);
  return [[Math.min(...lons), Math.min(...lats)], [Math.max(...lons), Math.max(...lats)]];
}

/** A view wide enough to recognise the place by. */
export const around = ([lon, lat]: LonLat, halfDeg = 0.02): Bounds => [[lon - halfDeg * 1.4, lat - halfDeg], [lon + halfDeg * 1.4, lat + halfDeg]];

/** Length of a drawn line beside the length its chainages say, km. */
export function lengthsOf(line: readonly (readonly [number, number, number])[]): { drawnKm: number; chainageKm: number } {
  const drawnM = line.reduce((sum, vertex, i) => (i === 0 ? 0 : sum + distanceM([line[i - 1]![0], line[i - 1]![1]], [vertex[0], vertex[1]])), 0);
  return { drawnKm: drawnM / 1_000, chainageKm: (line[0]?.[2] ?? 0) - (line.at(-1)?.[2] ?? 0) };
}
