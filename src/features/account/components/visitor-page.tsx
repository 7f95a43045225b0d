import type { ReactNode } from 'react';
import { RiverSheet } from './river-sheet';

/** A page before sign-in: what to do on the left, a sheet of river on the right where there is room. */
export function VisitorPage({ title, above, children }: { title: string; above?: ReactNode; children: ReactNode }) {
  return (
    <div className="grid min-h-[calc(100dvh-5.5rem)] lg:grid-cols-[minmax(0,1fr)_minmax(0,44%)]">
      <title>{`${title} · Downreach`}</title>
      <div className="px-4 sm:px-6 lg:px-8">
        <div className="staff min-h-full pb-16 pl-6 sm:pl-9">
          <div className="max-w-xl pt-10 sm:pt-16">
            {above && <p className="mb-1 text-ink2">{above}</p>}
            <h1 className="border-b border-ink pb-4 text-title font-semibold text-balance">{title}</h1>
            {children}
          </div>
        </div>
      </div>
      <div className="hidden border-l border-rule bg-sheet lg:block print:hidden">
        <div className="sticky top-0 h-[min(100dvh,64rem)]">
          <RiverSheet />
        </div>
      </div>
    </div>
  );
}
