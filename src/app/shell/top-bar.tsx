import { Search, SunMoon } from 'lucide-react';
import type { ReactNode } from 'react';
import { Link, useNavigate } from 'react-router-dom';
import { Brand } from '#src/components/layout/mark.tsx';
import { Icon } from '#src/components/ui/icon.tsx';
import { IconButton } from '#src/components/ui/icon-button.tsx';
import { Menu } from '#src/components/ui/menu.tsx';
import { paletteOpen, shortcutSheetOpen } from '#src/lib/commands.ts';
import { useMe, useSignOut } from '#src/lib/session.ts';
import { keysInWords } from '#src/lib/shortcuts.ts';
import { Theme, THEME_WORDS, useTheme } from '#src/lib/theme.ts';
import { notifyProblem } from '#src/lib/toasts.ts';

interface Props {
  /** After the name: the deposit in hand. */
  place?: ReactNode;
  /** Before the theme: jobs. */
  tools?: ReactNode;
}

export function SkipLink() {
  return (
    <a
      href="#main"
      className="absolute top-1 left-1 z-50 -translate-y-16 rounded-2 bg-sheet px-3 py-2 text-copper focus:translate-y-0"
    >
      Skip to the evidence
    </a>
  );
}

/** The bar at the top; a ruler runs along its lower edge. */
export function TopBar({ place, tools }: Props) {
  return (
    <header className="ruler-edge relative z-20 flex h-[46px] shrink-0 items-center gap-2.5 border-b border-rule-firm bg-sheet px-3.5">
      <Link to="/deposits" aria-label="Selvage, all deposits" className="rounded-1 no-underline">
        <Brand isShort={Boolean(place)} />
      </Link>
      {place && <span aria-hidden className="mx-1 h-5 w-px bg-rule" />}
      <div className="min-w-0">{place}</div>
      <span className="flex-1" />
      <button
        type="button"
        onClick={() => paletteOpen.set(true)}
        className="inline-flex h-7 w-52 items-center gap-1.5 rounded-2 border border-rule-firm bg-transparent px-2 text-small text-ink-3 hover:bg-trough max-lg:hidden"
      >
        <Icon icon={Search} />
        Find or do…
        <kbd className="ml-auto">{keysInWords('mod+k')}</kbd>
      </button>
      <IconButton
        icon={Search}
        label="Find or do"
        size="bar"
        className="lg:hidden"
        onClick={() => paletteOpen.set(true)}
      />
      {tools}
      <ThemeMenu />
      <YouMenu />
    </header>
  );
}

function ThemeMenu() {
  const [theme, setTheme] = useTheme();
  const items = Theme.options.map((option) => ({
    label: THEME_WORDS[option],
    isChosen: option === theme,
    run: () => setTheme(option),
  }));
  return (
    <Menu
      trigger={
        <IconButton
          icon={SunMoon}
          label={`Theme: ${THEME_WORDS[theme].toLowerCase()}`}
          size="bar"
          className="max-md:hidden"
        />
      }
      groups={[{ items }]}
    />
  );
}

const initials = (name: string): string =>
  name
    .split(/[\s.]+/)
    .filter(Boolean)
    .map((part) => part[0]?.toUpperCase() ?? '')
    .filter((_, index, all) => index === 0 || index === all.length - 1)
    .join('');

function YouMenu() {
  const me = useMe();
  const navigate = useNavigate();
  const [theme, setTheme] = useTheme();
  const signOut = useSignOut(() => window.location.assign('/sign-in'));
  if (!me) return null;
  const go = (to: string) => () => void navigate(to);
  const next: Theme = theme === 'dark' ? 'light' : 'dark';
  return (
    <Menu
      head={
        <>
          <p className="font-semibold">{me.name}</p>
          <p className="text-caption text-ink-3">{me.email}</p>
        </>
      }
      groups={[
        {
          items: [
            { label: 'Your account', run: go('/account') },
            ...(me.isAdministrator ? [{ label: 'Administration', run: go('/admin') }] : []),
            ...(me.isDemoInstance
              ? [{ label: 'Mailbox of the demonstration', run: go('/mailbox') }]
              : []),
            { label: 'Keys', run: () => shortcutSheetOpen.set(true) },
            { label: `Theme: ${THEME_WORDS[next].toLowerCase()}`, run: () => setTheme(next) },
          ],
        },
        {
          items: [
            { label: 'Sign out', run: () => signOut.mutate(undefined, { onError: notifyProblem }) },
          ],
        },
      ]}
      trigger={
        <button
          type="button"
          className="grid size-7 shrink-0 place-items-center rounded-full border-0 bg-trough-deep text-caption font-semibold text-ink max-md:size-8"
        >
          <span aria-hidden>{initials(me.name)}</span>
          <span className="sr-only">Your account: {me.name}</span>
        </button>
      }
    />
  );
}
