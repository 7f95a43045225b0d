import type { ReactNode } from 'react';
import { Link } from 'react-router-dom';
import { classNames } from '../lib/class-names';

/** Entries of a log: what leads (a time, a plate) in its own column, left of a thin rule. */
export function RuledList({ label, isOrdered = false, className, children }: { label: string; isOrdered?: boolean; className?: string; children: ReactNode }) {
  const List = isOrdered ? 'ol' : 'ul';
  return (
    <List aria-label={label} className={classNames('list-none', className)}>
      {children}
    </List>
  );
}

type RuledRowProps = {
  /** A link over the whole row. */
  to?: string;
  onOpen?: () => void;
  /** Name of the row for those who hear it, when its text alone would not tell where it leads. */
  openLabel?: string;
  lead?: ReactNode;
  /** Width of the leading column. */
  leadWidth?: 'narrow' | 'time' | 'wide';
  trail?: ReactNode;
  isSelected?: boolean;
  children: ReactNode;
};

const leadWidths = { narrow: 'sm:w-14', time: 'sm:w-36', wide: 'sm:w-52' } as const;

export function RuledRow({ to, onOpen, openLabel, lead, leadWidth = 'time', trail, isSelected = false, children }: RuledRowProps) {
  const opens = to !== undefined || onOpen !== undefined;
  // The link or button covers the row; what can be pressed inside the trail stays above it.
  const cover = 'absolute inset-0 outline-offset-[-2px]';
  return (
    <li className={classNames('relative flex min-h-11 flex-wrap border-b border-rule sm:flex-nowrap', opens && 'hover:bg-sheet', isSelected && 'bg-kingfisher-wash')} aria-current={isSelected || undefined}>
      {to !== undefined && <Link to={to} className={cover} aria-label={openLabel} />}
      {onOpen && <button type="button" onClick={onOpen} className={cover} aria-label={openLabel} />}
      {lead !== undefined && <div className={classNames('w-full shrink-0 pt-3 pr-4 text-ink2 sm:border-r sm:border-rule sm:py-3', leadWidths[leadWidth])}>{lead}</div>}
      <div className={classNames('min-w-0 flex-1 py-3 max-sm:basis-full', lead !== undefined && 'sm:pl-5', lead !== undefined && 'max-sm:pt-1')}>{children}</div>
      {trail !== undefined && <div className="flex shrink-0 items-center gap-3 py-2 max-sm:w-full sm:pl-4 [&_a]:relative [&_button]:relative">{trail}</div>}
    </li>
  );
}
