import { useId, type KeyboardEvent, type ReactNode } from 'react';
import { classNames } from '../lib/class-names';
import { Button } from './button';

type DrawerProps = { isOpen: boolean; onClose: () => void; title: string; actions?: ReactNode; className?: string; children: ReactNode };

/** A part of the page that opens in place and leaves the rest usable. Esc closes it. */
export function Drawer({ isOpen, onClose, title, actions, className, children }: DrawerProps) {
  const id = useId();
  if (!isOpen) return null;
  const press = (event: KeyboardEvent) => {
    if (event.key === 'Escape' && !event.defaultPrevented) onClose();
  };
  return (
    <section aria-labelledby={id} onKeyDown={press} className={classNames('flex min-h-0 flex-col border-t border-ink bg-paper', className)}>
      <header className="flex items-center justify-between gap-4 border-b border-rule pr-2 pl-4">
        <h2 id={id} className="truncate py-2 font-semibold">
          {title}
        </h2>
        <div className="flex items-center gap-1">
          {actions}
          <Button kind="quiet" icon="close" aria-label={`Close ${title}`} onClick={onClose} />
        </div>
      </header>
      <div className="min-h-0 flex-1 overflow-auto p-4">{children}</div>
    </section>
  );
}
