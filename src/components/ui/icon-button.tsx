import type { LucideIcon } from 'lucide-react';
import type { ButtonHTMLAttributes, Ref } from 'react';
import { cx } from '#src/lib/cx.ts';
import { Icon } from './icon.tsx';

interface Props extends Omit<ButtonHTMLAttributes<HTMLButtonElement>, 'children' | 'aria-label'> {
  icon: LucideIcon;
  /** Says what it does: an icon alone has no word. */
  label: string;
  size?: 'tool' | 'bar';
  /** Number on the icon, for the bar. */
  count?: number;
  ref?: Ref<HTMLButtonElement>;
}

/** Only for the eight icons everyone knows: search, close, download, help, bell, theme, chevron, back. */
export function IconButton({ icon, label, size = 'tool', count = 0, className, ...rest }: Props) {
  return (
    <button
      type="button"
      {...rest}
      aria-label={label}
      title={label}
      className={cx(
        'relative inline-grid shrink-0 place-items-center rounded-2 border-0 bg-transparent text-ink-3 hover:bg-trough hover:text-ink data-[state=open]:bg-trough data-[state=open]:text-ink',
        size === 'tool' ? 'size-6' : 'size-[30px] text-ink-2 max-md:size-10',
        className,
      )}
    >
      <Icon icon={icon} size={size === 'tool' ? 15 : 17} />
      {count > 0 && (
        <span
          aria-hidden
          className="absolute top-0 -right-px min-w-3.5 rounded-full bg-copper-fill px-[3px] text-center text-[0.625rem] leading-[14px] font-semibold text-on-copper max-md:top-1 max-md:right-1"
        >
          {count}
        </span>
      )}
    </button>
  );
}
