import { expect } from 'vitest';
import { districtIncidents } from '../../server/db/seed/district/scenarios';
import type { EstimateDocument, EstimateReceptor } from '../../shared/schemas/estimate';
import type { EstimateResult, ReceptorAnswer } from '../../shared/schemas/estimate-result';
import { solve } from './documents';

export const HOUR = 3_600;
const documents = new Map(districtIncidents.flatMap(({ scenarios }) => scenarios).map(({ key, document }) => [key, document] as const));

export function libraryCase(key: string): EstimateDocument {
  const found = documents.get(key);
  if (!found) throw new Error(`The library has no case ${key}`);
  return found;
}

const solved = new Map<string, EstimateResult>();
/** The result of a stored case, solved once. */
export function resultOf(key: string): EstimateResult {
  const known = solved.get(key);
  if (known) return known;
  const { result } = solve(libraryCase(key));
  solved.set(key, result);
  return result;
}

export const answerIn = (result: EstimateResult, receptorId: string): ReceptorAnswer => result.receptors.find((answer) => answer.receptorId === receptorId)!;
export const answerOf = (key: string, receptorId: string): ReceptorAnswer => answerIn(resultOf(key), receptorId);

/** The same case with other receptors, releases or water. */
export const varied = (doc: EstimateDocument, over: Partial<EstimateDocument>): EstimateResult => solve({ ...doc, ...over }).result;

export const asPatch = (doc: EstimateDocument): EstimateDocument => ({ ...doc, releases: doc.releases.map((release) => ({ ...release, timing: { kind: 'instantaneous' as const, atS: 0 } })) });

export const movedReceptor = (doc: EstimateDocument, id: string, over: Partial<EstimateReceptor>): EstimateReceptor => ({ ...doc.receptors.find((receptor) => receptor.id === id)!, ...over });

/**
 * Hand figures: 1-D spread with Fischer's dispersion in rivers, Okubo patches in lake and sea. They are rough: a sound
 * estimate lies within a factor of 2 in concentration and 25 % in time.
 */
export function expectPeak(got: number | null, low: number, high = low): void {
  expect(got!).toBeGreaterThan(low / 2);
  expect(got!).toBeLessThan(high * 2);
}
export function expectTime(gotS: number | null | undefined, lowH: number, highH = lowH): void {
  expect(gotS! / HOUR).toBeGreaterThan(lowH * 0.75);
  expect(gotS! / HOUR).toBeLessThan(highH * 1.25);
}
