import { assembleReceptors, assembleSubstance, assembleWater } from '../../../../shared/assemble';
import { estimateDocumentSchema, type CurrentPart, type EstimateDocument, type EstimateDocumentInput, type Loss } from '../../../../shared/schemas/estimate';
import type { Marking } from '../../../../shared/schemas/incidents';
import type { RegisterName } from '../../../../shared/schemas/registers';
import { rateFromT90 } from '../../../../shared/units';
import { districtRegisters } from './index';
import type { SeedItem } from './seed-item';

function item<R extends RegisterName>(register: R, id: string): SeedItem<R> {
  const found = districtRegisters[register].find((entry) => entry.id === id);
  if (!found) throw new Error(`The district has no ${register} entry "${id}"`);
  return found;
}
const receptorsOf = (waterId: string, substanceId: string) => assembleReceptors(districtRegisters.receptors, waterId, substanceId);
const source = (id: string) => {
  const { name, data } = item('sources', id);
  return { name, position: data.position, channel: data.channel };
};
const HOUR_S = 3_600;

/** Tanker on the V2 bridge: 4 t of ammonia solution in ten minutes, usual flow. */
function tankerAtBridge(): EstimateDocumentInput {
  return {
    format: 'downreach-estimate/1',
    title: 'Tanker on the V2 bridge, ammonia solution 25 %',
    startAt: '2031-05-12T06:40:00-08:00',
    horizonS: 36 * HOUR_S,
    frameCount: 73,
    substance: assembleSubstance(item('substances', 'ammonia-solution')),
    water: { ...assembleWater(item('waters', 'river-ollemar'), { flowName: 'Q50' }), temperatureC: 12 } as EstimateDocumentInput['water'],
    releases: [
      {
        id: 'release-1', ...source('v2-bridge'),
        timing: { kind: 'steady', startS: 0, durationS: 600 },
        amount: { how: 'mass', massKg: { low: 2_000, likely: 4_000, high: 8_000 }, activeFraction: 0.2056 },
        evidence: 'Driver says about half the load of one chamber is gone; the other chambers hold.',
      },
    ],
    receptors: receptorsOf('river-ollemar', 'ammonia-solution'),
  };
}

/** Slurry reaching the lake at the jetty in three hours, winter, with a slow current along the south shore. */
function slurryAtJetty(substanceId: 'e-coli' | 'digester-ammonia'): EstimateDocumentInput {
  const isCount = substanceId === 'e-coli';
  const lake = assembleWater(item('waters', 'lake-thessaby'));
  const drift: CurrentPart[] = [{ kind: 'residual', speedMps: 0.02, towardDeg: 298 }];
  const loss: Loss = isCount ? { kind: 'first-order', ratePerS: rateFromT90(40 * HOUR_S), source: 'T90 of 40 h in cold water (demonstration)' } : { kind: 'none' };
  return {
    format: 'downreach-estimate/1',
    title: `Digester slurry at the lake jetty, ${isCount ? 'E. coli' : 'ammonia nitrogen'}`,
    startAt: '2031-07-06T05:30:00-08:00',
    horizonS: 4 * 24 * HOUR_S,
    frameCount: 97,
    substance: { ...assembleSubstance(item('substances', substanceId)), loss, applyLoss: isCount },
    water: { ...lake, mixingDepthM: 6, current: drift, coefficientNote: 'Mixed depth and current as seen from the jetty: 6 m, 2 cm/s along the shore' } as EstimateDocumentInput['water'],
    releases: [
      {
        id: 'release-1', ...source('digester'),
        timing: { kind: 'steady', startS: 0, durationS: 3 * HOUR_S },
        amount: isCount ? { how: 'volume-count', volumeM3: { low: 200, likely: 300, high: 400 }, countPerM3: 3e11 } : { how: 'volume-strength', volumeM3: { low: 200, likely: 300, high: 400 }, strengthKgM3: 3 },
        spilledVolumeM3: 300,
        evidence: 'Level of the digester before and after.',
      },
    ],
    receptors: receptorsOf('lake-thessaby', substanceId),
  };
}

const TIDE_S = 12.42 * HOUR_S;
/** Strongest flood, s after T0: a quarter of a tide before high water, counted on from 12 May 2031 05:10 UTC-08:00. */
function maxFloodS(startAt: string): number {
  const sinceHighWaterS = (Date.parse(startAt) - Date.parse('2031-05-12T05:10:00-08:00')) / 1_000;
  return Math.round(-(sinceHighWaterS % TIDE_S) - TIDE_S / 4);
}

/** Damaged tank container off the coast: 20 t of phenol in twelve hours, neaps, south-westerly wind. */
function containerAtSea(): EstimateDocumentInput {
  const startAt = '2031-08-02T03:00:00-08:00';
  const current: CurrentPart[] = [
    { kind: 'tide', name: 'M2', majorMps: 0.18, minorMps: 0, floodTowardDeg: 350, periodS: TIDE_S, maxFloodS: maxFloodS(startAt) },
    { kind: 'residual', speedMps: 0.1, towardDeg: 30 },
    { kind: 'wind', windSpeedMps: 8, windFromDeg: 225, driftFraction: 0.02, turnDeg: 0 },
  ];
  return {
    format: 'downreach-estimate/1',
    title: 'Damaged tank container off Branvell Bay, phenol',
    startAt,
    horizonS: 36 * HOUR_S,
    frameCount: 73,
    substance: assembleSubstance(item('substances', 'phenol')),
    water: { ...assembleWater(item('waters', 'branvell-bay')), current, coefficientNote: 'Neaps; residual 0.10 m/s toward 030; wind 8 m/s from 225, of which 2 % moves the upper 6 m (1 to 2 % for 1 to 5 m is common practice, no source)' } as EstimateDocumentInput['water'],
    releases: [
      {
        id: 'release-1', ...source('container-route'),
        timing: { kind: 'steady', startS: 0, durationS: 12 * HOUR_S },
        amount: { how: 'mass', massKg: { low: 10_000, likely: 20_000, high: 20_000 } },
        evidence: 'One container of 20 t reported holed; the ship keeps its place.',
      },
    ],
    receptors: receptorsOf('branvell-bay', 'phenol'),
  };
}

export type SeedScenario = { key: string; name: string; note: string; document: EstimateDocument };
/** `startedMinutesAgo` moves T0 of its scenarios to shortly before the seeding; without it they keep their written dates. */
export type SeedIncident = { name: string; marking: Marking; summary: string; utcOffset: string; startedMinutesAgo?: number; scenarios: SeedScenario[] };

const scenario = (key: string, name: string, note: string, input: EstimateDocumentInput): SeedScenario => ({ key, name, note, document: estimateDocumentSchema.parse(input) });

/** Incidents of the demonstration with their scenarios, ready to be saved as revisions. */
export const districtIncidents: SeedIncident[] = [
  {
    name: 'Tanker at V2 bridge', marking: 'EXERCISE', utcOffset: '-08:00',
    summary: 'Table-top exercise. Road tanker through the rail of the V2 bridge, ammonia solution running into the Ollemar at the right bank.',
    startedMinutesAgo: 40,
    scenarios: [scenario('S01', 'As reported, 4 t in 10 minutes', 'First figures from the driver', tankerAtBridge())],
  },
  {
    name: 'Lake and coast planning 2031', marking: 'PLANNING', utcOffset: '-08:00',
    summary: 'Largest credible releases for the contingency plan: the digester at the lake, and a container on the coastal route.',
    scenarios: [
      scenario('S06', 'Digester slurry at the jetty, E. coli', 'Winter, lake mixed', slurryAtJetty('e-coli')),
      scenario('S06-N', 'Digester slurry at the jetty, ammonia', 'Winter, lake mixed', slurryAtJetty('digester-ammonia')),
      scenario('S11', 'Phenol container off the bay', 'Neaps, south-westerly wind', containerAtSea()),
    ],
  },
];
