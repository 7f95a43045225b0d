import type { ReactNode } from 'react';
import { classNames } from '../lib/class-names';
import { Icon } from './icon';

export type NoticeTone = 'note' | 'attention' | 'bad' | 'good';
const tones: Record<NoticeTone, { ink: string; edge: string; icon: 'note' | 'attention' | 'check' }> = {
  note: { ink: 'text-ink2', edge: 'border-edge', icon: 'note' },
  attention: { ink: 'text-attention', edge: 'border-attention', icon: 'attention' },
  bad: { ink: 'text-bad', edge: 'border-bad', icon: 'attention' },
  good: { ink: 'text-good', edge: 'border-good', icon: 'check' },
};

/** What, where and what to do, with a firm rule at its side. A bad one is read out at once. */
export function Notice({ tone = 'note', title, actions, className, children }: { tone?: NoticeTone; title: string; actions?: ReactNode; className?: string; children?: ReactNode }) {
  const { ink, edge, icon } = tones[tone];
  return (
    <div role={tone === 'bad' ? 'alert' : 'status'} className={classNames('flex flex-wrap items-start gap-x-3 gap-y-2 border-l-4 bg-sheet py-3 pr-4 pl-3', edge, className)}>
      <Icon name={icon} className={`mt-px size-5 ${ink}`} />
      <div className="min-w-0 flex-1 basis-60">
        <p className={`font-semibold ${ink}`}>{title}</p>
        {children && <div className="mt-0.5 max-w-[75ch] break-words">{children}</div>}
      </div>
      {actions && <div className="flex flex-wrap gap-2">{actions}</div>}
    </div>
  );
}
