import type { ButtonHTMLAttributes, ReactElement, Ref } from 'react';
import { Link, type LinkProps } from 'react-router-dom';
import { classNames } from '../lib/class-names';
import { Icon, type IconName } from './icon';

export type ButtonKind = 'plain' | 'primary' | 'quiet' | 'danger';

const shape =
  'inline-flex min-h-10 items-center justify-center gap-2 rounded-sm px-4 text-body font-semibold no-underline select-none pointer-coarse:min-h-11 max-sm:min-h-11 aria-disabled:opacity-55 disabled:opacity-55 forced-colors:border forced-colors:border-[ButtonBorder]';
const kinds: Record<ButtonKind, string> = {
  primary: 'bg-kingfisher text-paper enabled:hover:bg-ink [a]:hover:bg-ink',
  plain: 'border border-edge bg-sheet text-ink enabled:hover:border-kingfisher enabled:hover:text-kingfisher [a]:hover:border-kingfisher [a]:hover:text-kingfisher',
  quiet: 'px-2 text-kingfisher enabled:hover:bg-kingfisher-wash [a]:hover:bg-kingfisher-wash',
  danger: 'border border-bad bg-sheet text-bad enabled:hover:bg-bad enabled:hover:text-paper',
};

export const buttonClass = (kind: ButtonKind, className?: string): string => classNames(shape, kinds[kind], className);

export type ButtonProps = ButtonHTMLAttributes<HTMLButtonElement> & {
  kind?: ButtonKind;
  /** One of our marks by name, or a mark of the caller's own. */
  icon?: IconName | ReactElement;
  /** Says that the act is under way: the button keeps its place, refuses a second press and tells screen readers. */
  isBusy?: boolean;
  ref?: Ref<HTMLButtonElement>;
};

/** A verb with its object: "Save scenario". Without children give an aria-label. */
export function Button({ kind = 'plain', icon, isBusy = false, type = 'button', className, children, disabled, ...rest }: ButtonProps) {
  return (
    <button {...rest} type={type} disabled={disabled || isBusy} aria-busy={isBusy || undefined} className={buttonClass(kind, classNames(!children && 'min-w-10 px-0! pointer-coarse:min-w-11 max-sm:min-w-11', className))}>
      <ButtonMark icon={icon} />
      {children}
    </button>
  );
}

export function ButtonLink({ kind = 'plain', icon, className, children, ...rest }: LinkProps & { kind?: ButtonKind; icon?: IconName | ReactElement }) {
  return (
    <Link {...rest} className={buttonClass(kind, className)}>
      <ButtonMark icon={icon} />
      {children}
    </Link>
  );
}

const ButtonMark = ({ icon }: { icon: IconName | ReactElement | undefined }) => (typeof icon === 'string' ? <Icon name={icon} /> : (icon ?? null));
