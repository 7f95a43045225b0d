import type { RegisterName } from '../../../../shared/schemas/registers';

/** What a form holds: the body of a write, with null where a figure is still missing. */
export type EntryValues = { code: string; name: string; ownerName: string; lastCheckedOn: string | null; reason: string; data: Record<string, unknown> };

const contact = { name: '', phone: '', email: '' };
const place = { position: [null, null], waterId: '', channel: null };

export const emptyReach = (n: number, flowNames: readonly string[]): Record<string, unknown> => ({
  id: `reach-${n}`, name: '', chainagePrefix: 'km', centreline: [], downstreamReachId: null, joinsOnBank: null, slope: null, manningN: null,
  hydraulics: flowNames.map((flowName) => emptyFlow(flowName)),
  dispersionM2s: null, transverseM2s: null, coefficientNote: '', calibrated: false, tidal: false,
});
export const emptyFlow = (flowName: string): Record<string, unknown> => ({ flowName, exceededPercent: null, dischargeM3s: null, widthM: null, depthM: null, velocityMps: null });

export const emptyRiver = (): Record<string, unknown> => ({ kind: 'river', chainageOrigin: '', flowNames: ['Q50'], reaches: [emptyReach(1, ['Q50'])], note: '' });
export const emptyOpenWater = (kind: string): Record<string, unknown> => ({ kind, area: [], depthM: null, mixingDepthM: null, currents: [{ name: 'Still', parts: [] }], tide: '', mixing: { kind: 'okubo', varianceFactor: 1 }, calibrated: false, note: '' });

const emptyData: Record<RegisterName, () => Record<string, unknown>> = {
  waters: emptyRiver,
  receptors: () => ({ kind: 'intake', ...place, depthsM: [], closingMinutes: null, storageHours: null, peopleServed: null, contact, actionValues: [], note: '' }),
  sources: () => ({ kind: 'site', ...place, drainPath: '', operator: '', contact, holdings: [], note: '' }),
  substances: () => ({ otherNames: [], cas: '', unNumber: '', basis: '', measure: 'mass', form: '', activeFraction: 1, productDensityKgM3: null, solubilityKgM3: null, loss: { kind: 'none' }, hazards: '', publishedValues: [], sheetSource: '', note: '' }),
  stations: () => ({ kind: 'sampling-point', ...place, access: '', note: '' }),
};

export const emptyEntry = (register: RegisterName): EntryValues => ({ code: '', name: '', ownerName: '', lastCheckedOn: null, reason: '', data: emptyData[register]() });

type Written = Omit<EntryValues, 'reason' | 'data'> & { data: unknown };
/** A stored entry as the form holds it. */
export const valuesOf = ({ code, name, ownerName, lastCheckedOn, data }: Written): EntryValues => ({ code, name, ownerName, lastCheckedOn, reason: '', data: structuredClone(data) as Record<string, unknown> });
