import { useEffect, useRef, type ReactNode } from 'react';
import type { Marking } from '../../shared/schemas/incidents';
import { MarkingBand } from './marking-band';

type PageProps = {
  title: string;
  /** Said in the browser tab when the heading alone would not tell the page. */
  tabTitle?: string;
  /** A line over the heading: where this page belongs. */
  above?: ReactNode;
  /** A line under the heading. */
  below?: ReactNode;
  actions?: ReactNode;
  marking?: Marking | undefined;
  children: ReactNode;
};

let hasShownAPage = false;

/** A ruled page with the staff down its left edge. Moves the reader to its heading after a change of place. */
export function Page({ title, tabTitle, above, below, actions, marking, children }: PageProps) {
  const heading = useRef<HTMLHeadingElement>(null);
  useEffect(() => {
    if (hasShownAPage && (document.activeElement === document.body || document.activeElement === null)) heading.current?.focus({ preventScroll: true });
    hasShownAPage = true;
  }, []);
  return (
    <>
      <title>{`${tabTitle ?? title} · Downreach`}</title>
      {marking && <MarkingBand marking={marking} />}
      <div className="mx-auto w-full max-w-[88rem] px-4 sm:px-6 lg:px-8">
        <div className="staff min-h-[calc(100dvh-6rem)] pb-24 pl-6 sm:pl-9 print:min-h-0 print:pb-0 print:pl-0">
          <header className="flex flex-wrap items-end justify-between gap-x-8 gap-y-4 border-b border-ink pt-8 pb-4">
            <div className="min-w-0">
              {above && <div className="mb-1 text-body text-ink2">{above}</div>}
              <h1 ref={heading} tabIndex={-1} className="text-title font-semibold text-balance break-words outline-none">
                {title}
              </h1>
              {below && <div className="mt-1 text-ink2">{below}</div>}
            </div>
            {actions && <div className="no-print flex flex-wrap items-center gap-2">{actions}</div>}
          </header>
          {children}
        </div>
      </div>
    </>
  );
}

/** A part of a page under its own ruled heading. */
export function Section({ title, actions, note, className = '', children }: { title: string; actions?: ReactNode; note?: ReactNode; className?: string; children: ReactNode }) {
  return (
    <section className={`pt-8 ${className}`} aria-label={title}>
      <div className="flex min-h-10 flex-wrap items-end justify-between gap-x-6 gap-y-2 border-b border-edge pb-2">
        <h2 className="text-lead font-semibold">
          {title}
          {note && <span className="ml-3 text-body font-normal text-ink2">{note}</span>}
        </h2>
        {actions && <div className="no-print flex flex-wrap items-center gap-2">{actions}</div>}
      </div>
      {children}
    </section>
  );
}
