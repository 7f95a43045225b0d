import { alongReach, distanceM, isInArea, snapToReaches } from '../../../../shared/geo';
import { isRiver } from '../../../../shared/assemble';
import type { LonLat } from '../../../../shared/schemas/basics';
import type { ChannelPlace, Reach } from '../../../../shared/schemas/estimate';
import type { RegisterItem } from '../../../../shared/schemas/registers';

export type WaterItem = RegisterItem<'waters'>;

/** How far off a river's edge a typed or clicked place still counts as meant for it, m. Common practice, no source. */
export const NEAR_WATER_M = 400;
/** Within this share of the half width of the bankfull channel the release is taken as mid-channel. */
const MID_SHARE = 1 / 3;

/** A river place farther off is not offered: it can hardly be meant. */
const FARTHEST_OFFER_KM = 10;

export type Place = { water: WaterItem; position: LonLat; channel: ChannelPlace | null; words: string };
export type PlaceAnswer = { place: Place } | { place: null; why: string; nearest: Place | null };

const halfWidthM = (reach: Reach): number => Math.max(...reach.hydraulics.map((row) => row.widthM)) / 2;

type RiverHit = { place: Place; offM: number; isTidal: boolean };

function inRiver(position: LonLat, water: WaterItem): RiverHit | null {
  if (!isRiver(water.data)) return null;
  const snap = snapToReaches(position, water.data.reaches);
  const reach = water.data.reaches.find((candidate) => candidate.id === snap?.reachId);
  if (!snap || !reach) return null;
  const half = halfWidthM(reach);
  const bank = snap.distanceM < half * MID_SHARE && half > 20 ? 'mid' : snap.bank;
  const chainageKm = Math.round(snap.chainageKm * 100) / 100;
  return {
    offM: Math.max(0, snap.distanceM - half),
    isTidal: reach.tidal,
    place: { water, position: onBank(reach, chainageKm, bank), channel: { reachId: reach.id, chainageKm, bank }, words: channelWords(reach, chainageKm, bank) },
  };
}

export const channelWords = (reach: Pick<Reach, 'chainagePrefix' | 'name'>, chainageKm: number, bank: ChannelPlace['bank']): string =>
  `${reach.chainagePrefix} km ${chainageKm.toFixed(1)}, ${bank === 'mid' ? 'mid-channel' : `${bank} bank`}`;

/** Position of a place in the channel: on the bank, half the usual width off the centreline. */
export function onBank(reach: Reach, chainageKm: number, bank: ChannelPlace['bank']): LonLat {
  const side = bank === 'left' ? 1 : bank === 'right' ? -1 : 0;
  return alongReach(reach, chainageKm, side * ((reach.hydraulics[0]?.widthM ?? 0) / 2)).position;
}

function areaSize(item: WaterItem): number {
  if (isRiver(item.data)) return Infinity;
  const ring = item.data.area[0] ?? [];
  return Math.abs(ring.reduce((sum, [x, y], i) => { const next = ring[(i + 1) % ring.length]!; return sum + x * next[1] - next[0] * y; }, 0));
}

/** The water a position belongs to: the smallest area around it, else the nearest river within `nearM` of its edge. */
export function placeAt(position: LonLat, waters: readonly WaterItem[], nearM = NEAR_WATER_M): PlaceAnswer {
  const usable = waters.filter((water) => !water.isArchived);
  const rivers = usable.flatMap((water) => inRiver(position, water) ?? []).sort((a, b) => a.offM - b.offM);
  const nearest = rivers[0];
  const area = usable.filter((water) => !isRiver(water.data) && isInArea(position, water.data.area)).sort((a, b) => areaSize(a) - areaSize(b))[0];
  // Where a tidal reach and a tidal water overlap, the water is meant: it knows the tide.
  if (nearest && nearest.offM === 0 && !(nearest.isTidal && area)) return { place: nearest.place };
  if (area) return { place: { water: area, position, channel: null, words: `in ${area.name}` } };
  if (nearest && nearest.offM <= nearM) return { place: nearest.place };
  return notInWater(nearest ?? null, position);
}

function notInWater(nearest: RiverHit | null, position: LonLat): PlaceAnswer {
  const where = `${position[1].toFixed(4)}, ${position[0].toFixed(4)}`;
  if (!nearest) return { place: null, nearest: null, why: `${where} is in no registered water: click in a water, or register this one first` };
  const offKm = (distanceM(position, nearest.place.position) / 1_000).toFixed(1);
  const isNear = Number(offKm) <= FARTHEST_OFFER_KM;
  return {
    place: null,
    nearest: isNear ? nearest.place : null,
    why: `${where} is on land or outside the registered waters, ${offKm} km from ${nearest.place.water.name} at ${nearest.place.words}: click in a water${isNear ? ', or use that place' : ''}`,
  };
}
