import type { Amount, CurrentPart, EstimateReceptor, EstimateSubstance, Mixing, OpenWater, Release, ReleaseTiming, RiverWater } from '../../../../shared/schemas/estimate';
import { ESTIMATE_FORMAT } from '../../../../shared/schemas/estimate';

/**
 * A draft is the estimate document while it is being typed: the same names at the same places, with null where
 * a number is still missing, so that an error's path in the document is its path in the draft.
 */
export type Unfinished<T> = T extends number ? number | null : T extends string | boolean | null | undefined ? T : T extends (infer U)[] ? Unfinished<U>[] : { [K in keyof T]: Unfinished<T[K]> };

export type DraftAmount = Unfinished<Amount>;
export type DraftTiming = Unfinished<ReleaseTiming>;
export type DraftMixing = Unfinished<Mixing>;
export type DraftCurrentPart = Unfinished<CurrentPart>;
export type DraftRange = { low: number | null; likely: number | null; high: number | null };

export type DraftRelease = Omit<Release, 'timing' | 'amount' | 'initialRadiusM'> & { timing: DraftTiming; amount: DraftAmount; initialRadiusM: number | null };
export type DraftRiver = Omit<RiverWater, 'flow'> & { flow: Omit<RiverWater['flow'], 'discharges'> & { discharges: { reachId: string; dischargeM3s: number | null }[] } };
export type DraftOpenWater = Omit<OpenWater, 'depthM' | 'mixingDepthM' | 'current' | 'mixing'> & {
  depthM: number | null;
  mixingDepthM: number | null;
  current: DraftCurrentPart[];
  mixing: DraftMixing;
};
export type DraftWater = DraftRiver | DraftOpenWater;

export type Draft = {
  format: typeof ESTIMATE_FORMAT;
  title: string;
  startAt: string;
  /** Null: chosen by `automaticHorizonS`. */
  horizonS: number | null;
  /** Null: chosen by `automaticFrameCount`. */
  frameCount: number | null;
  substance: EstimateSubstance | null;
  water: DraftWater | null;
  releases: DraftRelease[];
  /** All receptors on the water; `leftOut` holds the ids of those not to be estimated. */
  receptors: EstimateReceptor[];
  leftOut: string[];
  /** Named state of the current, kept to show which one was chosen. */
  currentName: string;
};

export const emptyDraft = (startAt: string): Draft => ({
  format: ESTIMATE_FORMAT,
  title: '',
  startAt,
  horizonS: null,
  frameCount: null,
  substance: null,
  water: null,
  releases: [],
  receptors: [],
  leftOut: [],
  currentName: '',
});

/** A stored draft as it is, with what an older or shorter one lacks filled in. */
export function readDraft(stored: Record<string, unknown>, startAt: string): Draft {
  const draft: Draft = { ...emptyDraft(startAt), ...(stored as Partial<Draft>), format: ESTIMATE_FORMAT };
  return {
    ...draft,
    releases: draft.releases.map((release) => ({ ...release, channel: release.channel ?? null, initialRadiusM: release.initialRadiusM ?? 0, spilledVolumeM3: release.spilledVolumeM3 ?? null, evidence: release.evidence ?? '' })),
  };
}

/** First free id of the form r1, r2, ... */
export function nextReleaseId(releases: readonly { id: string }[]): string {
  const taken = new Set(releases.map((release) => release.id));
  let n = 1;
  while (taken.has(`r${n}`)) n += 1;
  return `r${n}`;
}
