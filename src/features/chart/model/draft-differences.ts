import type { Draft } from './draft';

const parts: { words: string; of: (draft: Draft) => unknown }[] = [
  { words: 'the start', of: (draft) => draft.startAt },
  { words: 'the substance', of: (draft) => draft.substance },
  { words: 'the releases', of: (draft) => draft.releases },
  { words: 'the water', of: (draft) => draft.water?.registerId },
  { words: 'flow, current or coefficients', of: (draft) => draft.water },
  { words: 'the receptors and action values', of: (draft) => [draft.receptors, [...draft.leftOut].sort()] },
  { words: 'the length of the estimate', of: (draft) => draft.horizonS },
];

/** In which parts two drafts differ, in words. */
export const draftDifferences = (a: Draft, b: Draft): string[] => parts.filter(({ of }) => JSON.stringify(of(a)) !== JSON.stringify(of(b))).map(({ words }) => words);
