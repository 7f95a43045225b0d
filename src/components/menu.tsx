import { Menu as HeadlessMenu, MenuButton, MenuHeading, MenuItem, MenuItems, MenuSection } from '@headlessui/react';
import { Fragment, type ReactNode } from 'react';
import { Link } from 'react-router-dom';
import { buttonClass, type ButtonKind } from './button';
import { Icon, type IconName } from './icon';

export type MenuEntry = {
  label: ReactNode;
  to?: string;
  onSelect?: () => void;
  icon?: IconName | undefined;
  isDisabled?: boolean;
  /** Marks the one that holds now. */
  isChosen?: boolean;
  kind?: 'plain' | 'danger';
};
export type MenuPart = { heading?: string; entries: readonly MenuEntry[] };

type MenuProps = {
  /** What the button says. */
  label: ReactNode;
  /** For a button without words. */
  ariaLabel?: string;
  icon?: IconName | undefined;
  kind?: ButtonKind;
  hasArrow?: boolean;
  anchor?: 'bottom start' | 'bottom end' | 'top start' | 'top end';
  buttonClassName?: string;
  /** Entries in one list, or in parts under headings. */
  entries?: readonly MenuEntry[];
  parts?: readonly MenuPart[];
};

const entryClass = 'flex min-h-10 w-full items-center gap-3 px-4 text-left text-body text-ink no-underline data-focus:bg-kingfisher-wash data-disabled:opacity-55 pointer-coarse:min-h-11 max-sm:min-h-11 forced-colors:data-focus:outline-2';

export function Menu({ label, ariaLabel, icon, kind = 'plain', hasArrow = true, anchor = 'bottom start', buttonClassName, entries, parts }: MenuProps) {
  const all = parts ?? [{ entries: entries ?? [] }];
  return (
    <HeadlessMenu>
      <MenuButton className={buttonClass(kind, buttonClassName)} aria-label={ariaLabel}>
        {icon && <Icon name={icon} />}
        {label}
        {hasArrow && <Icon name="down" className="size-4" />}
      </MenuButton>
      <MenuItems anchor={anchor} modal={false} className="z-50 min-w-52 rounded-sm border border-edge bg-sheet py-1 shadow-float outline-none [--anchor-gap:4px] [--anchor-padding:8px]">
        {all.map((part, i) => (
          <MenuSection key={part.heading ?? i} className={i > 0 ? 'mt-1 border-t border-rule pt-1' : ''}>
            {part.heading && <MenuHeading className="px-4 pt-2 pb-1 text-note text-ink2">{part.heading}</MenuHeading>}
            {part.entries.map((entry, j) => (
              <MenuItem key={j} disabled={entry.isDisabled ?? false} as={Fragment}>
                {entry.to !== undefined ? (
                  <Link to={entry.to} className={entryClass} aria-current={entry.isChosen ? 'page' : undefined}>
                    <EntryWords entry={entry} />
                  </Link>
                ) : (
                  <button type="button" onClick={entry.onSelect} className={entryClass} aria-current={entry.isChosen || undefined}>
                    <EntryWords entry={entry} />
                  </button>
                )}
              </MenuItem>
            ))}
          </MenuSection>
        ))}
      </MenuItems>
    </HeadlessMenu>
  );
}

function EntryWords({ entry }: { entry: MenuEntry }) {
  return (
    <>
      {entry.icon && <Icon name={entry.icon} className="size-4.5" />}
      <span className={entry.kind === 'danger' ? 'text-bad' : entry.isChosen ? 'font-semibold' : ''}>{entry.label}</span>
      {entry.isChosen && <Icon name="check" className="ml-auto size-4" />}
    </>
  );
}
