import type { ActionAnswer } from '../../../shared/schemas/estimate-result';
import type { RunInput } from '../types';
import type { Curve, Pulse } from './curve';
import type { SiteResponse } from './sampling';

/** Two passages are told apart where the concentration stays below the action value in between for at least this, s: nobody reopens an intake for less. */
export const PULSE_GAP_S = 60;

/** Stretches above a level with gaps shorter than `PULSE_GAP_S` closed. */
export function joined(stretches: readonly Pulse[]): Pulse[] {
  const out: Pulse[] = [];
  for (const stretch of stretches) {
    const before = out[out.length - 1];
    if (before && stretch.startS - before.endS < PULSE_GAP_S) out[out.length - 1] = { startS: before.startS, endS: stretch.endS };
    else out.push(stretch);
  }
  return out;
}

/** Pulses with their own peak and the release that adds most to it: tells a tide that brings a cloud back from a second release. */
export function pulsesOf(input: RunInput, response: SiteResponse, curve: Curve, stretches: readonly Pulse[], averagingS: number): ActionAnswer['pulses'] {
  return joined(stretches).map((pulse) => {
    const { peak, peakS } = peakWithin(curve, pulse);
    // A mean belongs to the time over which it was taken: its middle.
    const units = response.units(peakS - averagingS / 2);
    let most = 0;
    for (let r = 1; r < units.length; r++) if (units[r]! * input.weights.likely[r]! > units[most]! * input.weights.likely[most]!) most = r;
    return { ...pulse, peak, peakS, releaseId: input.releases[most]!.release.id };
  });
}

/** Humps are among the samples, so the largest sample is the peak; a pulse between two samples has its middle. */
function peakWithin({ timesS, values, f }: Curve, { startS, endS }: Pulse): { peak: number; peakS: number } {
  let best = { peak: f((startS + endS) / 2), peakS: (startS + endS) / 2 };
  for (let i = 0; i < timesS.length; i++) if (timesS[i]! >= startS && timesS[i]! <= endS && values[i]! > best.peak) best = { peak: values[i]!, peakS: timesS[i]! };
  return best;
}
