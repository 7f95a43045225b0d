import type { Marking } from '../../shared/schemas/incidents';

const words: Record<Marking, { word: string; says: string; look: string }> = {
  REAL: { word: 'REAL', says: 'a real event', look: 'marking-real' },
  EXERCISE: { word: 'EXERCISE', says: 'not a real event', look: 'marking-exercise' },
  PLANNING: { word: 'PLANNING', says: 'nothing has happened', look: 'marking-planning' },
};

/** Across every page of an incident. Told apart by the word and by the pattern. */
export function MarkingBand({ marking }: { marking: Marking }) {
  const { word, says, look } = words[marking];
  return (
    <div role="note" aria-label={`Marking: ${word}, ${says}`} className={`marking ${look} flex min-h-8 items-stretch justify-center px-4 text-body`}>
      <span className="flex flex-wrap items-center gap-x-3 px-4 py-0.5">
        <strong className="font-semibold tracking-[0.12em]">{word}</strong>
        <span>{says}</span>
      </span>
    </div>
  );
}

/** The same marking inside a line of a list. */
export function MarkingWord({ marking }: { marking: Marking }) {
  return (
    <span className={`marking ${words[marking].look} inline-flex border-x px-1.5 align-[0.1em] text-note leading-5`}>
      <span className="px-1 font-semibold tracking-[0.08em]">{words[marking].word}</span>
    </span>
  );
}
