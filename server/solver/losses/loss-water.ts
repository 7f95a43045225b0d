import type { EstimateDocument } from '../../../shared/schemas/estimate';
import { currentOf } from '../open/current';
import { reachStates } from '../river/reach-state';
import { REFERENCE_C } from './temperature';

/** What the loss processes need of the water. */
export type LossWater = {
  readonly depthM: number;
  readonly speedMps: number;
  readonly temperatureC: number;
  /** Null where nobody said. */
  readonly windMps: number | null;
  readonly pH: number | null;
  readonly suspendedKgM3: number | null;
  readonly isIced: boolean;
  /** Where depth, speed and temperature come from. */
  readonly how: string;
};

const SAMPLES = 200;

/** Depth and speed: the mixing depth and the mean speed of open water, or the reach of the first release. Temperature 20 °C unless stated. */
export function lossWaterOf(doc: EstimateDocument): LossWater {
  const { conditions } = doc;
  const stated = conditions?.temperatureC ?? (doc.water.kind === 'river' ? doc.water.temperatureC : null);
  const place = doc.water.kind === 'river' ? reachFigures(doc, doc.water) : openFigures(doc, doc.water);
  return {
    depthM: place.depthM,
    speedMps: place.speedMps,
    temperatureC: stated ?? REFERENCE_C,
    windMps: conditions?.windSpeedMps ?? windOf(doc),
    pH: conditions?.pH ?? null,
    suspendedKgM3: conditions?.suspendedKgM3 ?? null,
    isIced: conditions?.ice ?? false,
    how: `${place.how}; ${stated === null ? 'water at 20 °C, not stated' : `water at ${stated} °C`}`,
  };
}

type Water<Kind> = Extract<EstimateDocument['water'], { kind: Kind }>;
type Figures = { depthM: number; speedMps: number; how: string };

function reachFigures(doc: EstimateDocument, water: Water<'river'>): Figures {
  const states = reachStates(water);
  const id = doc.releases[0]!.channel?.reachId;
  const state = states.find((item) => item.reach.id === id) ?? states[0]!;
  return { depthM: state.depthM, speedMps: state.speedMps, how: `depth and speed of ${state.reach.name}` };
}

function openFigures(doc: EstimateDocument, water: Water<'open'>): Figures {
  const current = currentOf(water.current);
  const velocity = new Float64Array(2);
  let sum = 0;
  for (let i = 0; i < SAMPLES; i++) {
    current.velocity((doc.horizonS * (i + 0.5)) / SAMPLES, velocity);
    sum += Math.hypot(velocity[0]!, velocity[1]!);
  }
  return { depthM: water.mixingDepthM, speedMps: sum / SAMPLES, how: 'mixing depth and mean speed' };
}

/** The wind that drives the current, where there is one. */
function windOf(doc: EstimateDocument): number | null {
  if (doc.water.kind !== 'open') return null;
  const winds = doc.water.current.flatMap((part) => (part.kind === 'wind' ? [part.windSpeedMps] : []));
  return winds.length > 0 ? Math.max(...winds) : null;
}
