/**
 * Turns register entries into parts of an estimate document. The document keeps copies: a later change of a
 * register alters no saved revision.
 */
import type { EstimateReceptor, EstimateSubstance, EstimateWater, Release } from './schemas/estimate';
import type { OpenWaterData, ReceptorData, RegisterItem, RiverData, SourceData, SubstanceData, WaterData } from './schemas/registers';
import { fromConcentrationUnit } from './units';

type Entry<D> = Pick<RegisterItem, 'id' | 'code' | 'name'> & { data: D };

export const isRiver = (data: WaterData): data is RiverData => data.kind === 'river';

export function assembleWater(water: Entry<WaterData>, choice: { flowName?: string; currentName?: string } = {}): EstimateWater {
  return isRiver(water.data) ? assembleRiver(water.id, water.name, water.data, choice.flowName) : assembleOpen(water.id, water.name, water.data, choice.currentName);
}

function assembleRiver(id: string, name: string, data: RiverData, flowName: string | undefined): EstimateWater {
  return {
    kind: 'river',
    registerId: id,
    name,
    chainageOrigin: data.chainageOrigin,
    reaches: data.reaches,
    flow: { name: flowName ?? data.flowNames[0] ?? '', discharges: [], source: '', readAt: null },
    temperatureC: null,
  };
}

function assembleOpen(id: string, name: string, data: OpenWaterData, currentName: string | undefined): EstimateWater {
  const state = data.currents.find((current) => current.name === currentName) ?? data.currents[0];
  return {
    kind: 'open',
    registerId: id,
    waterKind: data.kind,
    name,
    area: data.area,
    depthM: data.depthM,
    mixingDepthM: data.mixingDepthM,
    current: state?.parts ?? [],
    mixing: data.mixing,
    straightShore: null,
    coefficientNote: '',
    calibrated: data.calibrated,
  };
}

export function assembleSubstance(substance: Entry<SubstanceData>): EstimateSubstance {
  const { data } = substance;
  return {
    registerId: substance.id,
    name: substance.name,
    cas: data.cas,
    basis: data.basis,
    measure: data.measure,
    solubilityKgM3: data.solubilityKgM3,
    densityKgM3: data.productDensityKgM3,
    loss: data.loss,
    applyLoss: false,
  };
}

/** Receptors on the given water with their action values for the given substance, most urgent kinds first as registered. */
export const assembleReceptors = (receptors: readonly Entry<ReceptorData>[], waterId: string, substanceId: string | null): EstimateReceptor[] =>
  receptors.filter((receptor) => receptor.data.waterId === waterId).map((receptor) => assembleReceptor(receptor, substanceId));

export function assembleReceptor(receptor: Entry<ReceptorData>, substanceId: string | null): EstimateReceptor {
  const { data } = receptor;
  return {
    id: receptor.id,
    registerId: receptor.id,
    code: receptor.code,
    name: receptor.name,
    kind: data.kind,
    position: data.position,
    channel: data.channel,
    depthM: data.depthsM[0] ?? null,
    closingS: data.closingMinutes === null ? null : data.closingMinutes * 60,
    storageS: data.storageHours === null ? null : data.storageHours * 3_600,
    actionValues: data.actionValues
      .filter((value) => value.substanceId === substanceId)
      .map((value) => ({
        value: fromConcentrationUnit(value.value, value.unit),
        basis: value.basis,
        averagingS: value.averagingMinutes * 60,
        source: value.source,
        label: '',
      })),
  };
}

/** A release at a registered source: its place, and the largest credible amount as stand-in for what is not known yet. */
export function assembleRelease(source: Entry<SourceData>, substanceId: string | null, id: string): Release {
  const holding = source.data.holdings.find((item) => item.substanceId === substanceId) ?? source.data.holdings[0];
  return {
    id,
    name: source.name,
    position: source.data.position,
    channel: source.data.channel,
    timing: { kind: 'instantaneous', atS: 0 },
    amount: { how: 'unknown', standIn: holding?.largestCredible ?? null },
    initialRadiusM: 0,
    spilledVolumeM3: null,
    evidence: '',
  };
}
