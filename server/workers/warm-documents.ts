import { ESTIMATE_FORMAT, estimateDocumentSchema, type EstimateDocument } from '../../shared/schemas/estimate';

/** A river and a coast that exist nowhere: small documents that pass through the busiest code. */
export function warmDocuments(): EstimateDocument[] {
  const common = { format: ESTIMATE_FORMAT, startAt: '2031-01-01T00:00:00Z', horizonS: 36_000, frameCount: 12, substance: { name: 'Tracer' } };
  const release = { id: 'a', name: 'Release', timing: { kind: 'steady', startS: 0, durationS: 3_600 }, amount: { how: 'mass', massKg: { likely: 100 } } } as const;
  const river = estimateDocumentSchema.parse({
    ...common,
    water: {
      kind: 'river',
      name: 'River',
      reaches: [{ id: 'r', name: 'Reach', centreline: [[0, 0, 20], [0.18, 0, 0]], slope: 0.0005, hydraulics: [{ flowName: 'mean', dischargeM3s: 10, widthM: 25, depthM: 1, velocityMps: 0.4 }] }],
      flow: { name: 'mean' },
    },
    releases: [{ ...release, position: [0.01, 0], channel: { reachId: 'r', chainageKm: 19, bank: 'left' } }],
    receptors: [{ id: 'x', name: 'Intake', kind: 'intake', position: [0.09, 0], channel: { reachId: 'r', chainageKm: 10, bank: 'right' }, actionValues: [{ value: 1e-4 }] }],
  });
  const coast = estimateDocumentSchema.parse({
    ...common,
    water: {
      kind: 'open',
      waterKind: 'coast',
      name: 'Coast',
      area: [[[-0.2, -0.2], [0.2, -0.2], [0.2, 0.2], [-0.2, 0.2], [-0.2, -0.2]]],
      depthM: 10,
      mixingDepthM: 5,
      current: [{ kind: 'residual', speedMps: 0.1, towardDeg: 90 }, { kind: 'tide', majorMps: 0.2, floodTowardDeg: 0, periodS: 44_712, maxFloodS: 0 }],
      mixing: { kind: 'constant', alongM2s: 5, acrossM2s: 0.5 },
    },
    releases: [{ ...release, position: [0, 0] }],
    receptors: [{ id: 'x', name: 'Intake', kind: 'intake', position: [0.02, 0.01], actionValues: [{ value: 1e-6 }] }],
  });
  return [river, coast];
}
