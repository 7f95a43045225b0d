import type { ReactNode } from 'react';

/** Says what will be here and offers the first step. */
export function EmptyState({ title, children, action }: { title: string; children?: ReactNode; action?: ReactNode }) {
  return (
    <div className="flex max-w-[60ch] flex-col items-start gap-3 py-8">
      <div>
        <p className="text-lead font-semibold">{title}</p>
        {children && <div className="mt-1 text-ink2">{children}</div>}
      </div>
      {action}
    </div>
  );
}
