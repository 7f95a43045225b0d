import { useState, type ReactNode } from 'react';
import { Icon } from '../../../components/icon';

type Props = { title: string; summary?: ReactNode; isOpenFirst?: boolean; hasError?: boolean; children: ReactNode };

/** A part of the ruled page that opens in place; closed, it says in one line what it holds. */
export function Section({ title, summary, isOpenFirst = false, hasError = false, children }: Props) {
  const [isOpen, setOpen] = useState(isOpenFirst);
  return (
    <section className="border-b border-rule">
      <h2>
        <button type="button" aria-expanded={isOpen} onClick={() => setOpen(!isOpen)} className="flex min-h-11 w-full items-center gap-2 px-4 py-2 text-left hover:bg-sheet">
          <Icon name={isOpen ? 'down' : 'right'} className="size-3.5 text-ink2 print:hidden" />
          <span className="shrink-0 font-semibold">{title}</span>
          <span className="min-w-0 flex-1 truncate text-right text-ink2">{summary}</span>
          {hasError && <Icon name="attention" className="size-4 text-bad" />}
          {hasError && <span className="sr-only">needs something</span>}
        </button>
      </h2>
      <div className={isOpen ? 'flex flex-col gap-4 px-4 pt-1 pb-5' : 'hidden'}>{isOpen && children}</div>
    </section>
  );
}
