import { classNames } from '../lib/class-names';

const sizes = { body: '', lead: 'text-lead', figure: 'text-figure', title: 'text-title' } as const;

/** A figure with its unit, never apart. */
export function Quantity({ value, unit, size = 'body' }: { value: string | number; unit: string; size?: keyof typeof sizes }) {
  return (
    <span className={classNames('whitespace-nowrap', sizes[size])}>
      {size === 'body' ? value : <span className="font-semibold">{value}</span>}
      <span className={classNames('text-ink2', size === 'figure' && 'text-body', size === 'title' && 'text-lead')}>&nbsp;{unit}</span>
    </span>
  );
}
