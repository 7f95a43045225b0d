import { fromPlane } from '../../shared/geo';
import { ESTIMATE_FORMAT, estimateDocumentSchema, type EstimateDocument, type EstimateDocumentInput } from '../../shared/schemas/estimate';
import type { LonLat } from '../../shared/schemas/basics';
import type { StreamHead } from '../../shared/frames';
import { solveEstimate, type SolveOptions } from '../../server/solver/estimate';

/** Metres east and north of 0, 0, where the local plane of these documents has its origin. */
export const at = (x: number, y: number): LonLat => fromPlane({ originLon: 0, originLat: 0 }, x, y);

const square = (halfM: number): LonLat[] => [at(-halfM, -halfM), at(halfM, -halfM), at(halfM, halfM), at(-halfM, halfM), at(-halfM, -halfM)];

type OpenInput = Extract<EstimateDocumentInput['water'], { kind: 'open' }>;
type RiverInput = Extract<EstimateDocumentInput['water'], { kind: 'river' }>;
export type ReleaseInput = EstimateDocumentInput['releases'][number];
export type ReceptorInput = NonNullable<EstimateDocumentInput['receptors']>[number];

export const release = (over: Partial<ReleaseInput> = {}): ReleaseInput => ({
  id: 'a',
  name: 'Release',
  position: at(0, 0),
  timing: { kind: 'instantaneous' },
  amount: { how: 'mass', massKg: { likely: 100 } },
  ...over,
});

export const receptor = (over: Partial<ReceptorInput> = {}): ReceptorInput => ({ id: 'x', name: 'Intake', kind: 'intake', position: at(3_000, 0), ...over });

type Rest = Partial<Omit<EstimateDocumentInput, 'water'>>;
const common = { format: ESTIMATE_FORMAT, startAt: '2031-05-12T06:40:00-08:00', frameCount: 8, substance: { name: 'Tracer' } } as const;

/** Open water 100 km square, 5 m deep, current 0.2 m/s to the east, constant mixing 4 and 1 m2/s. */
export const openDocument = (water: Partial<OpenInput> = {}, rest: Rest = {}): EstimateDocument =>
  estimateDocumentSchema.parse({
    ...common,
    horizonS: 36_000,
    releases: [release()],
    receptors: [receptor()],
    water: {
      kind: 'open',
      waterKind: 'coast',
      name: 'Open water',
      area: [square(50_000)],
      depthM: 5,
      mixingDepthM: 5,
      current: [{ kind: 'residual', speedMps: 0.2, towardDeg: 90 }],
      mixing: { kind: 'constant', alongM2s: 4, acrossM2s: 1 },
      ...water,
    },
    ...rest,
  });

type ReachInput = RiverInput['reaches'][number];
export type ReachFigures = { id: string; lengthKm: number; Q: number; W: number; H: number; U: number; D: number; e: number };

/** A reach running east along the equator; its figures need not obey Q = W H U where a test sets the area by Q/U. */
export const reachOf = ({ id, lengthKm, Q, W, H, U, D, e }: ReachFigures, over: Partial<ReachInput> = {}): ReachInput => ({
  id,
  name: `Reach ${id}`,
  centreline: [[...at(0, 0), lengthKm], [...at(lengthKm * 1_000, 0), 0]],
  hydraulics: [{ flowName: 'mean', dischargeM3s: Q, widthM: W, depthM: H, velocityMps: U }],
  dispersionM2s: D,
  transverseM2s: e,
  ...over,
});

export const riverDocument = (reaches: ReachInput[], rest: Rest): EstimateDocument =>
  estimateDocumentSchema.parse({
    ...common,
    horizonS: 86_400,
    releases: [],
    water: { kind: 'river', name: 'River', reaches, flow: { name: 'mean' } } satisfies RiverInput,
    ...rest,
  });

export type Solved = { result: ReturnType<typeof solveEstimate>; messages: { head: StreamHead; payload: Uint8Array }[] };

export function solve(doc: EstimateDocument, options: SolveOptions = {}): Solved {
  const messages: Solved['messages'] = [];
  const result = solveEstimate(doc, (head, payload = new Uint8Array(0)) => messages.push({ head, payload }), options);
  return { result, messages };
}
