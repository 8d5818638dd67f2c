import type { LucideIcon } from 'lucide-react';
import { DropdownMenu } from 'radix-ui';
import type { ReactNode } from 'react';
import { cx } from '#src/lib/cx.ts';
import { Icon } from './icon.tsx';

export interface MenuItem {
  label: ReactNode;
  /** Second line, in caption type. */
  hint?: ReactNode;
  run: () => void;
  icon?: LucideIcon;
  /** Marks the one in force. */
  isChosen?: boolean;
  /** What cannot be undone stands apart in red. */
  isGrave?: boolean;
  /** Why it cannot be done now. */
  unavailable?: string;
}

export interface MenuGroup {
  heading?: string;
  items: readonly MenuItem[];
}

interface Props {
  trigger: ReactNode;
  groups: readonly MenuGroup[];
  align?: 'start' | 'center' | 'end';
  /** Above the items: who is signed in. */
  head?: ReactNode;
}

export function Menu({ trigger, groups, align = 'end', head }: Props) {
  return (
    <DropdownMenu.Root modal={false}>
      <DropdownMenu.Trigger asChild>{trigger}</DropdownMenu.Trigger>
      <DropdownMenu.Portal>
        <DropdownMenu.Content
          align={align}
          sideOffset={5}
          collisionPadding={8}
          className="opens z-40 max-h-[var(--radix-dropdown-menu-content-available-height)] max-w-80 min-w-48 overflow-auto rounded-3 border border-rule bg-sheet p-1 shadow-float"
        >
          {head && <div className="border-b border-rule px-2.5 pt-1 pb-2 text-small">{head}</div>}
          {groups.map((group, index) => (
            <DropdownMenu.Group
              key={group.heading ?? index}
              className={cx(index > 0 && 'mt-1 border-t border-rule pt-1')}
            >
              {group.heading && (
                <DropdownMenu.Label className="px-2.5 py-1 text-caption font-semibold text-ink-3">
                  {group.heading}
                </DropdownMenu.Label>
              )}
              {group.items.map((item, at) => (
                <Item key={at} item={item} />
              ))}
            </DropdownMenu.Group>
          ))}
        </DropdownMenu.Content>
      </DropdownMenu.Portal>
    </DropdownMenu.Root>
  );
}

function Item({ item }: { item: MenuItem }) {
  const { label, hint, run, icon, isChosen, isGrave, unavailable } = item;
  return (
    <DropdownMenu.Item
      onSelect={unavailable ? (event) => event.preventDefault() : run}
      aria-disabled={unavailable !== undefined || undefined}
      aria-current={isChosen || undefined}
      className={cx(
        'flex min-h-7 items-center gap-2 rounded-2 px-2.5 py-1 text-body outline-none data-highlighted:bg-trough max-md:min-h-11',
        unavailable
          ? 'cursor-not-allowed text-ink-3'
          : isGrave
            ? 'cursor-pointer text-bad'
            : 'cursor-pointer text-ink',
        isChosen && 'font-semibold shadow-[inset_3px_0_0_var(--copper)]',
      )}
    >
      {icon && <Icon icon={icon} />}
      <span className="min-w-0 flex-1">
        <span className="block truncate">{label}</span>
        {(hint || unavailable) && (
          <span className="block text-caption font-normal text-ink-3">{unavailable ?? hint}</span>
        )}
      </span>
    </DropdownMenu.Item>
  );
}
