import type { FieldError } from '../../../../shared/problem';

/** What a field is called on the page, by the end of its path. */
const words: [RegExp, string][] = [
  [/massKg(\.likely)?$/, 'the mass spilled'],
  [/volumeM3(\.likely)?$/, 'the volume spilled'],
  [/strengthKgM3$/, 'the strength'],
  [/densityKgM3$/, 'the density'],
  [/count(\.likely)?$/, 'the number of organisms'],
  [/countPerM3$/, 'the number of organisms per volume'],
  [/activeFraction$/, 'the share that counts'],
  [/durationS$/, 'the duration'],
  [/timing\.rows/, 'the table of rates'],
  [/(atS|startS)$/, 'when the release begins'],
  [/startAt$/, 'when it began (T0)'],
  [/chainageKm$/, 'the chainage'],
  [/initialRadiusM$/, 'the radius at the start'],
  [/mixingDepthM$/, 'the mixing depth'],
  [/water\.depthM$/, 'the water depth'],
  [/(alongM2s|acrossM2s)$/, 'the mixing coefficient'],
  [/speedMps$/, 'the speed'],
  [/majorMps$/, 'the largest tidal speed'],
  [/(towardDeg|TowardDeg|FromDeg)$/, 'the direction'],
  [/actionValues\.\d+\.value$/, 'the action value'],
];

const nameOf = (path: string): string | null => words.find(([end]) => end.test(path))?.[1] ?? null;
const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);

/** True for what has simply not been given yet, as against what is wrong. */
export const isMissing = (error: FieldError): boolean => /^(Give|Choose|Place) /.test(error.message);

/** One sentence that can be read away from its field: names the field, and the remedy. */
export function sayError(error: FieldError): string {
  const name = nameOf(error.path);
  if (!name) return error.message;
  return /^Give a (number|date)/.test(error.message) ? `Give ${name}` : `${capital(name)}: ${error.message}`;
}
