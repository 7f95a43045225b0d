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
  leadWidth?: 'mark' | 'narrow' | 'time' | 'wide';
  trail?: ReactNode;
  isSelected?: boolean;
  children: ReactNode;
};

/** A mark or a narrow lead stays beside its entry on a phone; wider ones stand above it there. */
const leadShapes = { mark: 'w-9 py-3', narrow: 'w-16 border-r border-rule py-3', time: stacked('sm:w-36'), wide: stacked('sm:w-52') } as const;
function stacked(width: string): string {
  return `w-full pt-3 sm:border-r sm:border-rule sm:py-3 ${width}`;
}

export function RuledRow({ to, onOpen, openLabel, lead, leadWidth = 'time', trail, isSelected = false, children }: RuledRowProps) {
  const isStacked = lead !== undefined && (leadWidth === 'time' || leadWidth === 'wide');
  const opens = to !== undefined || onOpen !== undefined;
  // The link or button covers the row; what can be pressed inside the trail stays above it.
  const cover = 'absolute inset-0 outline-offset-[-2px]';
  return (
    <li className={classNames('relative flex min-h-11 flex-wrap border-b border-rule sm:flex-nowrap', opens && 'hover:bg-sheet', isSelected && 'bg-kingfisher-wash')} aria-current={isSelected || undefined}>
      {to !== undefined && <Link to={to} className={cover} aria-label={openLabel} />}
      {onOpen && <button type="button" onClick={onOpen} className={cover} aria-label={openLabel} />}
      {lead !== undefined && <div className={classNames('shrink-0 pr-4 text-ink2', leadShapes[leadWidth])}>{lead}</div>}
      <div className={classNames('min-w-0 flex-1 py-3', isStacked && 'max-sm:basis-full max-sm:pt-1', lead !== undefined && (isStacked ? 'sm:pl-5' : leadWidth === 'narrow' && 'pl-4 sm:pl-5'), trail !== undefined && 'max-sm:basis-full max-sm:pb-1')}>{children}</div>
      {trail !== undefined && <div className="flex shrink-0 items-center gap-3 py-2 max-sm:w-full max-sm:pt-0 max-sm:pb-3 sm:pl-4 [&_a]:relative [&_button]:relative">{trail}</div>}
    </li>
  );
}
