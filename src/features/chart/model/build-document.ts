import type { FieldError } from '../../../../shared/problem';
import { estimateDocumentSchema, type EstimateDocument } from '../../../../shared/schemas/estimate';
import type { Draft, DraftRelease } from './draft';
import { automaticFrameCount, automaticHorizonS } from './horizon';

export type Built = { document: EstimateDocument; errors: FieldError[] } | { document: null; errors: FieldError[] };

/** What the schema would only call a wrong type: parts not chosen yet. */
function missingParts(draft: Draft): FieldError[] {
  const missing: FieldError[] = [];
  if (draft.releases.length === 0) missing.push({ path: 'releases', message: 'Place a release: click the water, type a position, or pick a registered source' });
  else if (!draft.water) missing.push({ path: 'water', message: 'Choose the water the release is in' });
  if (!draft.substance) missing.push({ path: 'substance', message: 'Choose the substance' });
  return missing;
}

/** Spilled volume where the amount was given as one; it caps what can be in the water. */
function spilledVolumeM3(release: DraftRelease): number | null {
  if (release.spilledVolumeM3 !== null) return release.spilledVolumeM3;
  const { amount } = release;
  return amount.how === 'volume-strength' || amount.how === 'volume-density' || amount.how === 'volume-count' ? amount.volumeM3.likely : null;
}

/** Receptors left out shift the positions of the others: back to those of the draft. */
function draftPath(path: readonly PropertyKey[], kept: readonly number[]): string {
  const at = path[0] === 'receptors' && typeof path[1] === 'number' ? ['receptors', kept[path[1]] ?? path[1], ...path.slice(2)] : path;
  return at.map(String).join('.');
}

/** The estimate document of a draft, or what keeps it from being one, with paths that are the draft's own. */
export function buildDocument(draft: Draft): Built {
  const missing = missingParts(draft);
  if (missing.length > 0) return { document: null, errors: missing };
  const { leftOut, currentName: _named, ...rest } = draft;
  const kept = draft.receptors.flatMap((receptor, i) => (leftOut.includes(receptor.id) ? [] : [i]));
  const horizonS = draft.horizonS ?? automaticHorizonS(draft);
  const parsed = estimateDocumentSchema.safeParse({
    ...rest,
    horizonS,
    frameCount: draft.frameCount ?? automaticFrameCount(horizonS),
    releases: draft.releases.map((release) => ({ ...release, spilledVolumeM3: spilledVolumeM3(release) })),
    receptors: kept.map((i) => draft.receptors[i]),
  });
  if (!parsed.success) return { document: null, errors: parsed.error.issues.map((issue) => ({ path: draftPath(issue.path, kept), message: issue.message })) };
  return { document: parsed.data, errors: [] };
}

/** Messages standing at a field or inside it. */
export const errorsAt = (errors: readonly FieldError[], path: string): string | undefined =>
  errors.filter((error) => error.path === path || error.path.startsWith(`${path}.`)).map((error) => error.message)[0];
