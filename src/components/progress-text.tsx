/** Says in words and figures how far a piece of work is; nothing spins. */
export function ProgressText({ stage, done, of }: { stage: string; done: number; of: number }) {
  const isCounted = of > 0;
  return (
    <span className="inline-flex flex-wrap items-center gap-x-3 gap-y-1">
      <span>
        {stage}
        {isCounted && (
          <span className="text-ink2">
            {' '}
            {Math.min(done, of)} of {of}
          </span>
        )}
      </span>
      {isCounted && <progress className="gauge-progress" aria-label={stage} value={Math.min(done, of)} max={of} />}
    </span>
  );
}

/** In place of content that is on its way. */
export function Loading({ what }: { what: string }) {
  return (
    <p role="status" className="py-6 text-ink2">
      Reading {what}…
    </p>
  );
}
