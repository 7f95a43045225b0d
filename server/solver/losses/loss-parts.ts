import type { EstimateDocument } from '../../../shared/schemas/estimate';
import type { WorkingLine } from '../../../shared/schemas/estimate-result';
import type { FieldError } from '../../../shared/problem';
import { sig } from '../format';
import { lossClock, type LossClock } from '../loss';
import { lossWaterOf } from './loss-water';
import { processRate } from './process-rate';

/** One process that takes the substance, with its clock and its line of the working. */
export type LossPart = { readonly name: string; readonly clock: LossClock; readonly line: WorkingLine };

/** All processes of a document: the stated loss first, then those with figures of their own. */
export function lossParts(doc: EstimateDocument): LossPart[] {
  const { loss, losses = [] } = doc.substance;
  const parts: LossPart[] = loss.kind === 'none' ? [] : [statedPart('Loss', loss, doc.startAt)];
  if (losses.length === 0) return parts;
  const water = lossWaterOf(doc);
  for (const process of losses) {
    if (process.kind === 'day-night') {
      parts.push(statedPart(process.name, process, doc.startAt));
      continue;
    }
    const { name, ratePerS, formula, substituted, source } = processRate(process, water);
    parts.push({ name, clock: lossClock({ kind: 'first-order', ratePerS, source }, doc.startAt), line: { label: name, formula, substituted, value: ratePerS, unit: '1/s', source } });
  }
  return parts;
}

type Stated = Extract<EstimateDocument['substance']['loss'], { source: string }>;

function statedPart(name: string, loss: Stated, startAt: string): LossPart {
  const clock = lossClock(loss, startAt);
  const rate = loss.kind === 'first-order' ? `k = ${sig(loss.ratePerS)} 1/s` : `k = ${sig(loss.dayRatePerS)} 1/s by day, ${sig(loss.nightRatePerS)} 1/s by night`;
  return { name, clock, line: { label: name, formula: 'exp(−∫ k dt) for each parcel', substituted: rate, value: clock.constantRatePerS, unit: '1/s', source: loss.source } };
}

/** Rates add: one clock for all processes. */
export function combinedClock(parts: readonly LossPart[]): LossClock {
  const clocks = parts.map((part) => part.clock);
  if (clocks.length === 1) return clocks[0]!;
  const rates = clocks.map((clock) => clock.constantRatePerS);
  const isConstant = rates.every((rate) => rate !== null);
  return {
    kind: clocks.length === 0 ? 'none' : isConstant ? 'first-order' : 'day-night',
    exposure: (tS) => clocks.reduce((sum, clock) => sum + clock.exposure(tS), 0),
    constantRatePerS: isConstant ? rates.reduce<number>((sum, rate) => sum + rate!, 0) : null,
    switches: (fromS, toS) => [...new Set(clocks.flatMap((clock) => clock.switches(fromS, toS)))].sort((a, b) => a - b),
  };
}

/** What a process needs and the document does not say. */
export function lossErrors(doc: EstimateDocument): FieldError[] {
  const { losses = [] } = doc.substance;
  if (losses.length === 0) return [];
  const water = lossWaterOf(doc);
  const errors: FieldError[] = [];
  for (const process of losses) {
    if (process.kind === 'volatilisation' && water.windMps === null)
      errors.push({ path: 'conditions.windSpeedMps', message: 'Volatilisation needs the wind speed 10 m above the water, and none is given: state it, 0 for calm' });
    if (process.kind === 'volatilisation' && process.driver !== 'wind' && water.speedMps === 0)
      errors.push({ path: 'water.current', message: 'Volatilisation by a current needs one, and its speed is 0 m/s: give a current, or let the wind alone drive the loss' });
    if (process.kind === 'volatilisation' && process.ionisation && water.pH === null)
      errors.push({ path: 'conditions.pH', message: 'Only the un-ionised form leaves the water, and the pH is not given: state it' });
    if (process.kind === 'settling' && water.suspendedKgM3 === null)
      errors.push({ path: 'conditions.suspendedKgM3', message: 'Settling needs the suspended matter of the water, and none is given: state it in kg/m³' });
  }
  return errors;
}
