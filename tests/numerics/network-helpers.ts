import { Meter } from '../../server/solver/meter';
import { combinedClock, lossParts } from '../../server/solver/losses/loss-parts';
import { prepareNetwork } from '../../server/solver/network/network-solver';
import { resolveReleases, weightsOf } from '../../server/solver/release-profile';
import type { PreparedField, RunInput } from '../../server/solver/types';
import type { Bank } from '../../shared/schemas/basics';
import type { EstimateDocument } from '../../shared/schemas/estimate';

export const channel = (reachId: string, chainageKm: number, bank: Bank = 'mid') => ({ reachId, chainageKm, bank });

/** The network solver's field for a document, past the door: positions of such documents need not lie on their river. */
export function networkField(doc: EstimateDocument, { isPreview = false, refine = 1 } = {}): PreparedField {
  const releases = resolveReleases(doc);
  const parts = lossParts(doc);
  const input: RunInput = { doc, releases, weights: weightsOf(releases), loss: combinedClock(parts), lossParts: parts, isPreview, tolerance: doc.tolerance, meter: new Meter() };
  return prepareNetwork(input, refine);
}

/** Concentration per kilogram of the first release at a receptor against time. */
export function responseOf(doc: EstimateDocument, field: PreparedField, receptorIndex = 0, withLoss = false): (tS: number) => number {
  const response = field.receptor(receptorIndex, doc.receptors[receptorIndex]!).responses[0]!;
  return (tS) => response.at(tS, withLoss);
}

/** Dose, mean and variance of a curve up to `endS`, by the midpoint rule: smooth curves need no more. */
export function momentsOf(f: (tS: number) => number, endS: number, steps = 20_000): { dose: number; mean: number; variance: number } {
  const h = endS / steps;
  let [dose, first, second] = [0, 0, 0];
  for (let i = 0; i < steps; i++) {
    const t = (i + 0.5) * h;
    const value = f(t) * h;
    dose += value;
    first += t * value;
    second += t * t * value;
  }
  const mean = first / dose;
  return { dose, mean, variance: second / dose - mean * mean };
}

export function peakOf(f: (tS: number) => number, fromS: number, toS: number, steps = 4_000): { peak: number; atS: number } {
  let [peak, atS] = [0, fromS];
  for (let i = 0; i <= steps; i++) {
    const t = fromS + ((toS - fromS) * i) / steps;
    const value = f(t);
    if (value > peak) [peak, atS] = [value, t];
  }
  return { peak, atS };
}
