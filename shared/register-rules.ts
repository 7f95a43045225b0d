/**
 * Rules of the registers that need more than one field, or more than one entry. Both sides use them: the server refuses,
 * the form says the same words before anything is sent.
 */
import { alongReach, distanceM, distanceToAreaM } from './geo';
import type { LonLat } from './schemas/basics';
import type { OpenWaterData, ReceptorData, RiverData, SourceData, StationData, SubstanceData, WaterData } from './schemas/registers';
import { unitLabel, type ConcentrationUnit } from './units';

export type RuleProblem = { path: (string | number)[]; message: string };

/** How far a place on an open water may lie outside its outline, m. Outlines are generalised; common practice, no source. */
export const OFF_AREA_M = 500;
/** How far a place may lie from its chainage on the centreline, m: an intake well can stand off the river, a mistyped degree cannot. */
export const OFF_REACH_M = 5_000;

/* ---------- one entry ---------- */

export const waterProblems = (data: WaterData): RuleProblem[] => (data.kind === 'river' ? riverProblems(data) : openWaterProblems(data));

function openWaterProblems(data: OpenWaterData): RuleProblem[] {
  const problems: RuleProblem[] = [];
  if (data.mixingDepthM > data.depthM) problems.push({ path: ['mixingDepthM'], message: `The mixing depth (${data.mixingDepthM} m) is above the water depth (${data.depthM} m): lower it` });
  repeated(data.currents.map(({ name }) => name)).forEach((i) => problems.push({ path: ['currents', i, 'name'], message: `Two states are called "${data.currents[i]!.name}": rename one` }));
  return problems;
}

function riverProblems(data: RiverData): RuleProblem[] {
  const problems: RuleProblem[] = [];
  const byId = new Map(data.reaches.map((reach) => [reach.id, reach] as const));
  repeated(data.flowNames).forEach((i) => problems.push({ path: ['flowNames', i], message: `The flow "${data.flowNames[i]}" is named twice: remove one` }));
  repeated(data.reaches.map(({ id }) => id)).forEach((i) => problems.push({ path: ['reaches', i, 'id'], message: `Two reaches have the id ${data.reaches[i]!.id}: rename one` }));
  data.reaches.forEach((reach, i) => {
    const next = reach.downstreamReachId;
    if (next !== null && !byId.has(next)) problems.push({ path: ['reaches', i, 'downstreamReachId'], message: `There is no reach ${next}: choose one of ${[...byId.keys()].join(', ')}` });
    else if (runsInCircle(reach.id, byId)) problems.push({ path: ['reaches', i, 'downstreamReachId'], message: `From ${reach.name} the reaches run in a circle: water must leave the network` });
    for (const flow of data.flowNames)
      if (!reach.hydraulics.some((row) => row.flowName === flow)) problems.push({ path: ['reaches', i, 'hydraulics'], message: `${reach.name} has no figures for the flow "${flow}": add a row, or take the flow off the list` });
    repeated(reach.hydraulics.map(({ flowName }) => flowName)).forEach((row) =>
      problems.push({ path: ['reaches', i, 'hydraulics', row, 'flowName'], message: `${reach.name} has two rows for "${reach.hydraulics[row]!.flowName}": remove one` }),
    );
  });
  return problems;
}

function runsInCircle(start: string, byId: ReadonlyMap<string, { downstreamReachId: string | null }>): boolean {
  const met = new Set([start]);
  for (let next = byId.get(start)?.downstreamReachId ?? null; next !== null; next = byId.get(next)?.downstreamReachId ?? null) {
    if (met.has(next)) return true;
    met.add(next);
  }
  return false;
}

/** Indices of what stood in the list before. */
const repeated = (values: readonly string[]): number[] => values.flatMap((value, i) => (values.indexOf(value) < i ? [i] : []));

export const isUnitOf = (unit: ConcentrationUnit, measure: SubstanceData['measure']): boolean => (unit === 'counts/100ml') === (measure === 'count');

const unitProblem = (unit: ConcentrationUnit, measure: SubstanceData['measure'], substance: string): string =>
  measure === 'count' ? `${substance} is counted, so its values are in ${unitLabel['counts/100ml']}, not ${unitLabel[unit]}` : `${substance} is weighed, so its values are in µg/l or mg/l, not ${unitLabel[unit]}`;

/** The last figure of a CAS number: the others weighted by their place from the right, modulo 10 (CAS Registry, check digit verification). */
const hasCasCheckDigit = (cas: string): boolean => {
  const figures = [...cas.replaceAll('-', '')].map(Number);
  const check = figures.pop();
  return figures.reverse().reduce((sum, figure, i) => sum + figure * (i + 1), 0) % 10 === check;
};

export const substanceProblems = (data: SubstanceData): RuleProblem[] => [
  ...(/^\d{2,7}-\d{2}-\d$/.test(data.cas) && !hasCasCheckDigit(data.cas) ? [{ path: ['cas'], message: `${data.cas} is no CAS number: its last figure does not fit the others. Look it up again` }] : []),
  ...data.publishedValues.flatMap(({ unit }, i) => (isUnitOf(unit, data.measure) ? [] : [{ path: ['publishedValues', i, 'unit'], message: unitProblem(unit, data.measure, 'This substance') }])),
];

/* ---------- an entry and those it refers to ---------- */

/** What the rules need to know of another entry; null where there is none. */
export type WaterRef = { id: string; name: string; isArchived: boolean; data: WaterData } | null;
export type SubstanceRef = { id: string; name: string; isArchived: boolean; data: Pick<SubstanceData, 'measure'> } | null;
type Placed = Pick<ReceptorData, 'position' | 'waterId' | 'channel'>;

const isOnRiver = (water: NonNullable<WaterRef>): water is NonNullable<WaterRef> & { data: RiverData } => water.data.kind === 'river';

/** Where an entry stands: its water exists, its reach exists, its chainage lies inside the reach. */
export function placeProblems(place: Placed, water: WaterRef): RuleProblem[] {
  if (!water) return [{ path: ['waterId'], message: `There is no water "${place.waterId}" in the register: choose one, or register it first` }];
  if (water.isArchived) return [{ path: ['waterId'], message: `${water.name} is archived: choose another water, or restore it first` }];
  if (!isOnRiver(water)) return place.channel ? [{ path: ['channel'], message: `${water.name} is no river and has no reaches: leave reach and chainage out` }] : [];
  if (!place.channel) return [{ path: ['channel'], message: `${water.name} is a river: give reach, chainage and bank` }];
  const { reachId, chainageKm } = place.channel;
  const reach = water.data.reaches.find(({ id }) => id === reachId);
  if (!reach) return [{ path: ['channel', 'reachId'], message: `${water.name} has no reach "${reachId}": choose one of ${water.data.reaches.map(({ id }) => id).join(', ')}` }];
  const top = reach.centreline[0]![2];
  const bottom = reach.centreline.at(-1)![2];
  if (chainageKm > top || chainageKm < bottom) return [{ path: ['channel', 'chainageKm'], message: `km ${chainageKm} is outside ${reach.name}, which runs from km ${top} down to km ${bottom}` }];
  return [];
}

/** A position must lie by the water it names. Sources may stand far inland, where a drain leads to the water. */
export function positionProblems(place: Placed, water: NonNullable<WaterRef>): RuleProblem[] {
  const { offM, from, mostM } = offWater(place, water);
  if (offM <= mostM) return [];
  return [{ path: ['position'], message: `The position (${written(place.position)}) is ${distanceWords(offM)} from ${from}: at most ${distanceWords(mostM)}. Mend longitude and latitude, or choose another water` }];
}

function offWater(place: Placed, water: NonNullable<WaterRef>): { offM: number; from: string; mostM: number } {
  if (!isOnRiver(water)) return { offM: distanceToAreaM(place.position, (water.data as OpenWaterData).area), from: water.name, mostM: OFF_AREA_M };
  const reach = water.data.reaches.find(({ id }) => id === place.channel?.reachId);
  if (!reach || !place.channel) return { offM: 0, from: '', mostM: OFF_REACH_M };
  const on = alongReach(reach, place.channel.chainageKm).position;
  return { offM: distanceM(place.position, on), from: `${reach.name} at km ${place.channel.chainageKm}`, mostM: OFF_REACH_M };
}

const written = ([lon, lat]: LonLat): string => `lon ${lon}, lat ${lat}`;
const distanceWords = (metres: number): string => (metres < 1_000 ? `${Math.round(metres)} m` : `${(metres / 1_000).toFixed(1)} km`);

const substanceProblem = (id: string, substance: SubstanceRef): string | null => {
  if (!substance) return `There is no substance "${id}" in the register: choose one, or register it first`;
  return substance.isArchived ? `${substance.name} is archived: choose another substance, or restore it first` : null;
};

export const actionValueProblems = (data: ReceptorData, find: (id: string) => SubstanceRef): RuleProblem[] =>
  data.actionValues.flatMap(({ substanceId, unit }, i): RuleProblem[] => {
    const substance = find(substanceId);
    const missing = substanceProblem(substanceId, substance);
    if (missing) return [{ path: ['actionValues', i, 'substanceId'], message: missing }];
    return isUnitOf(unit, substance!.data.measure) ? [] : [{ path: ['actionValues', i, 'unit'], message: unitProblem(unit, substance!.data.measure, substance!.name) }];
  });

export const holdingProblems = (data: SourceData, find: (id: string) => SubstanceRef): RuleProblem[] =>
  data.holdings.flatMap(({ substanceId }, i): RuleProblem[] => {
    const missing = substanceProblem(substanceId, find(substanceId));
    return missing ? [{ path: ['holdings', i, 'substanceId'], message: missing }] : [];
  });

type Finders = { water: (id: string) => WaterRef; substance: (id: string) => SubstanceRef };

const standing = (place: Placed, water: WaterRef, isByTheWater: boolean): RuleProblem[] => {
  const problems = placeProblems(place, water);
  return problems.length === 0 && water && isByTheWater ? positionProblems(place, water) : problems;
};

/** What is wrong between an entry and the entries it refers to. */
export const referenceProblems = {
  waters: (): RuleProblem[] => [],
  substances: (): RuleProblem[] => [],
  receptors: (data: ReceptorData, find: Finders): RuleProblem[] => [...standing(data, find.water(data.waterId), true), ...actionValueProblems(data, find.substance)],
  sources: (data: SourceData, find: Finders): RuleProblem[] => [...standing(data, find.water(data.waterId), false), ...holdingProblems(data, find.substance)],
  // A weather station serves a water without standing on it.
  stations: (data: StationData, find: Finders): RuleProblem[] =>
    data.kind === 'weather' && !data.channel ? standing(data, find.water(data.waterId), false).filter(({ path }) => path[0] !== 'channel') : standing(data, find.water(data.waterId), data.kind !== 'weather'),
};
