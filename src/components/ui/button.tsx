import type { LucideIcon } from 'lucide-react';
import type { ButtonHTMLAttributes, Ref } from 'react';
import { Link, type LinkProps } from 'react-router-dom';
import { cx } from '#src/lib/cx.ts';
import { Icon } from './icon.tsx';
import { Tooltip } from './tooltip.tsx';

export type ButtonKind = 'main' | 'plain' | 'bare';
export type ButtonSize = 'tiny' | 'normal' | 'sign' | 'entry';

interface Look {
  /** `main` once per panel at most. */
  kind?: ButtonKind;
  size?: ButtonSize;
  icon?: LucideIcon;
  /** Fills the width of its box. */
  isWide?: boolean;
  className?: string;
}

const KINDS: Record<ButtonKind, string> = {
  main: 'border-copper-fill bg-copper-fill text-on-copper hover:border-copper-hover hover:bg-copper-hover',
  plain: 'border-rule-firm bg-sheet text-ink hover:bg-trough',
  bare: 'border-transparent bg-transparent text-copper hover:bg-trough',
};

const SIZES: Record<ButtonSize, string> = {
  tiny: 'h-6 gap-1 px-2 text-small max-md:h-8',
  normal: 'h-[30px] gap-1.5 px-3 text-body max-md:h-11',
  sign: 'h-9 gap-1.5 px-3 text-body max-md:h-11',
  entry: 'h-[42px] gap-2 px-4 text-head max-md:h-11',
};

const looks = (
  { kind = 'plain', size = 'normal', isWide, className }: Look,
  isUnavailable = false,
): string =>
  cx(
    'inline-flex shrink-0 items-center justify-center rounded-2 border font-ui leading-none font-medium whitespace-nowrap no-underline transition-colors',
    SIZES[size],
    isUnavailable
      ? 'cursor-not-allowed border-dashed border-rule-firm bg-transparent text-ink-3'
      : KINDS[kind],
    isWide && 'w-full',
    className,
  );

interface Props
  extends Look, Omit<ButtonHTMLAttributes<HTMLButtonElement>, 'disabled' | 'className'> {
  ref?: Ref<HTMLButtonElement>;
  /** Why it cannot be used now; the button stays focusable and says so. */
  unavailable?: string | false | null | undefined;
  /** The work it started is under way: it keeps its width and takes no second press. */
  isBusy?: boolean;
}

export function Button({
  kind,
  size,
  icon,
  isWide,
  className,
  unavailable,
  isBusy,
  children,
  onClick,
  type,
  ...rest
}: Props) {
  const isOff = Boolean(unavailable) || isBusy;
  const button = (
    <button
      {...rest}
      type={isOff ? 'button' : (type ?? 'button')}
      className={looks({ kind, size, isWide, className }, Boolean(unavailable))}
      aria-disabled={isOff || undefined}
      aria-busy={isBusy || undefined}
      onClick={isOff ? (event) => event.preventDefault() : onClick}
    >
      {icon && <Icon icon={icon} size={size === 'tiny' ? 13 : 15} />}
      {children}
      {isBusy && <span className="sr-only">, under way</span>}
    </button>
  );
  return unavailable ? <Tooltip text={unavailable}>{button}</Tooltip> : button;
}

interface LinkButtonProps extends Look, Omit<LinkProps, 'className'> {}

/** A link that looks like a button: it goes somewhere and changes nothing. */
export function LinkButton({
  kind,
  size,
  icon,
  isWide,
  className,
  children,
  ...rest
}: LinkButtonProps) {
  return (
    <Link {...rest} className={looks({ kind, size, isWide, className })}>
      {icon && <Icon icon={icon} size={size === 'tiny' ? 13 : 15} />}
      {children}
    </Link>
  );
}

interface DownloadButtonProps extends Look {
  href: string;
  children: React.ReactNode;
}

/** A file the server writes; the session goes along. */
export function DownloadButton({ href, children, icon, size, ...look }: DownloadButtonProps) {
  return (
    <a href={href} download className={looks({ size, ...look })}>
      {icon && <Icon icon={icon} size={size === 'tiny' ? 13 : 15} />}
      {children}
    </a>
  );
}
