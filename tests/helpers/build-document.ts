import { ESTIMATE_FORMAT, type EstimateDocumentInput } from '../../shared/schemas/estimate';

const startAt = '2031-05-12T06:40:00-08:00';
const substance = { name: 'Tracer', measure: 'mass' as const };
const drinking = { value: 1e-4, source: 'invented for this test' };

/** A small straight river with one release and one intake 10 km below; invented. */
export function buildRiverDocument(overrides: Partial<EstimateDocumentInput> = {}): EstimateDocumentInput {
  return {
    format: ESTIMATE_FORMAT,
    title: 'Straight river',
    startAt,
    horizonS: 12 * 3_600,
    frameCount: 6,
    substance,
    water: {
      kind: 'river',
      name: 'Straight river',
      reaches: [
        {
          id: 'r1',
          name: 'Upper reach',
          centreline: [[-118, -44, 30], [-118, -44.1, 19], [-118, -44.27, 0]],
          hydraulics: [{ flowName: 'usual', dischargeM3s: 10, widthM: 20, depthM: 1, velocityMps: 0.5 }],
        },
      ],
      flow: { name: 'usual' },
    },
    releases: [
      {
        id: 'spill',
        name: 'Spill',
        position: [-118, -44.05],
        channel: { reachId: 'r1', chainageKm: 25, bank: 'mid' },
        timing: { kind: 'instantaneous', atS: 0 },
        amount: { how: 'mass', massKg: { low: 50, likely: 100, high: 200 } },
      },
    ],
    receptors: [{ id: 'int-1', code: 'INT-1', name: 'Intake', kind: 'intake', position: [-118, -44.14], channel: { reachId: 'r1', chainageKm: 15, bank: 'left' }, closingS: 1_800, actionValues: [drinking] }],
    ...overrides,
  };
}

/** A square lake of about 8 by 11 km with a steady current; invented. */
export function buildLakeDocument(overrides: Partial<EstimateDocumentInput> = {}): EstimateDocumentInput {
  return {
    format: ESTIMATE_FORMAT,
    title: 'Square lake',
    startAt,
    horizonS: 24 * 3_600,
    frameCount: 8,
    substance,
    water: {
      kind: 'open',
      waterKind: 'lake',
      name: 'Square lake',
      area: [[[-117.1, -44.1], [-117, -44.1], [-117, -44], [-117.1, -44], [-117.1, -44.1]]],
      depthM: 20,
      mixingDepthM: 5,
      current: [{ kind: 'residual', speedMps: 0.05, towardDeg: 90 }],
      mixing: { kind: 'constant', alongM2s: 1, acrossM2s: 0.5 },
    },
    releases: [{ id: 'spill', name: 'Spill', position: [-117.07, -44.05], timing: { kind: 'steady', startS: 0, durationS: 3_600 }, amount: { how: 'mass', massKg: { likely: 500 } } }],
    receptors: [{ id: 'bch-1', code: 'BCH-1', name: 'Beach', kind: 'bathing', position: [-117.04, -44.05], actionValues: [drinking] }],
    ...overrides,
  };
}
