import { assembleReceptors, assembleSubstance, assembleWater } from '../../../../shared/assemble';
import { estimateDocumentSchema, type EstimateDocument, type EstimateDocumentInput, type EstimateReceptor } from '../../../../shared/schemas/estimate';
import type { Marking } from '../../../../shared/schemas/incidents';
import type { RegisterName } from '../../../../shared/schemas/registers';
import { districtRegisters } from './index';
import { estuaryStretches } from './places';
import type { SeedItem } from './seed-item';

export type SeedScenario = { key: string; name: string; note: string; document: EstimateDocument };
/** `startedMinutesAgo` moves T0 of its scenarios to shortly before the seeding; without it they keep their written dates. */
export type SeedIncident = { name: string; marking: Marking; summary: string; utcOffset: string; startedMinutesAgo?: number; scenarios: SeedScenario[] };

export const HOUR_S = 3_600;
/** Semidiurnal tide of the district. */
export const TIDE_S = 12.42 * HOUR_S;

type RiverInput = Extract<EstimateDocumentInput['water'], { kind: 'river' }>;
type OpenInput = Extract<EstimateDocumentInput['water'], { kind: 'open' }>;

export function item<R extends RegisterName>(register: R, id: string): SeedItem<R> {
  const found = districtRegisters[register].find((entry) => entry.id === id);
  if (!found) throw new Error(`The district has no ${register} entry "${id}"`);
  return found;
}

export const substance = (id: string) => assembleSubstance(item('substances', id));

/** Receptors of a water with their action values for a substance. */
export const receptorsOf = (waterId: string, substanceId: string): EstimateReceptor[] => assembleReceptors(districtRegisters.receptors, waterId, substanceId);

export const source = (id: string) => {
  const { name, data } = item('sources', id);
  return { name, position: data.position, channel: data.channel };
};

type Flow = { name: string } & Partial<RiverInput['flow']>;
const isTidal = (reachId: string): boolean => estuaryStretches.some(({ id }) => id === reachId);

/** Reaches of the Ollemar, cut where the tide begins, at a flow: named, with discharges set for single reaches. */
function ollemar(flow: Flow, isPart: (reachId: string) => boolean): RiverInput {
  const water = assembleWater(item('waters', 'river-ollemar'), { flowName: flow.name }) as RiverInput;
  const reaches = water.reaches.filter(({ id }) => isPart(id));
  const kept = new Set(reaches.map(({ id }) => id));
  return { ...water, reaches: reaches.map((reach) => ({ ...reach, downstreamReachId: kept.has(reach.downstreamReachId ?? '') ? reach.downstreamReachId : null })), flow: { ...water.flow, ...flow } };
}

/** The river and its tributaries down to Low Weir, where the tide begins and an estimate of its own with it. */
export const river = (flow: Flow, temperatureC: number | null = null): RiverInput => ({ ...ollemar(flow, (id) => !isTidal(id)), temperatureC });

/** The estuary from Low Weir to the bar with the tide at springs, strongest ebb `maxEbbS` after T0. */
export function estuary(flow: Flow, maxEbbS: number): RiverInput {
  const water = ollemar(flow, isTidal);
  return { ...water, reaches: water.reaches.map((reach) => ({ ...reach, tide: { amplitudeMps: estuaryStretches.find(({ id }) => id === reach.id)!.springsMps, periodS: TIDE_S, maxEbbS } })) };
}

/** Receptors on the reaches of a river document. */
export const receptorsOn = (water: RiverInput, substanceId: string): EstimateReceptor[] =>
  receptorsOf('river-ollemar', substanceId).filter(({ channel }) => water.reaches.some(({ id }) => id === channel?.reachId));

export const openWater = (id: string, over: Partial<OpenInput>): OpenInput => ({ ...(assembleWater(item('waters', id)) as OpenInput), ...over });

/** Seconds from T0 to the strongest flood before or after it: a quarter of a tide before high water, counted from 12 May 2031 05:10 UTC-08:00. */
export function maxFloodS(startAt: string): number {
  const sinceHighWaterS = (Date.parse(startAt) - Date.parse('2031-05-12T05:10:00-08:00')) / 1_000;
  return Math.round(-(sinceHighWaterS % TIDE_S) - TIDE_S / 4);
}

type Case = Omit<EstimateDocumentInput, 'format' | 'title'>;

export const scenario = (key: string, name: string, note: string, input: Case): SeedScenario => ({
  key, name, note, document: estimateDocumentSchema.parse({ format: 'downreach-estimate/1', title: name, ...input }),
});
