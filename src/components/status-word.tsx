import type { ReactNode } from 'react';

export type StatusTone = 'neutral' | 'attention' | 'bad' | 'good' | 'active';
const tones: Record<StatusTone, { ink: string; mark: ReactNode }> = {
  neutral: { ink: 'text-ink2', mark: <circle cx="5" cy="5" r="3.25" fill="none" stroke="currentColor" strokeWidth="1.5" /> },
  active: { ink: 'text-kingfisher', mark: <path d="M2 1l7 4-7 4z" fill="currentColor" /> },
  attention: { ink: 'text-attention', mark: <path d="M5 1l4.3 8H.7z" fill="currentColor" /> },
  bad: { ink: 'text-bad', mark: <path d="M1.2 1.2h7.6v7.6H1.2z" fill="currentColor" /> },
  good: { ink: 'text-good', mark: <circle cx="5" cy="5" r="4" fill="currentColor" /> },
};

/** A word with a mark; marks differ by shape, so the colour only helps. */
export function StatusWord({ tone = 'neutral', children }: { tone?: StatusTone; children: ReactNode }) {
  const { ink, mark } = tones[tone];
  return (
    <span className={`inline-flex items-baseline gap-1.5 font-semibold whitespace-nowrap ${ink}`}>
      <svg viewBox="0 0 10 10" className="size-2.5 shrink-0" aria-hidden="true">
        {mark}
      </svg>
      {children}
    </span>
  );
}
