import { useMemo } from 'react';
import { Outlet, useNavigate } from 'react-router-dom';
import { useQuery } from '@tanstack/react-query';
import { CommandPalette } from '#src/components/ui/command-palette.tsx';
import { ShortcutSheet } from '#src/components/ui/shortcut-sheet.tsx';
import { paletteOpen, shortcutSheetOpen, useCommands, type Command } from '#src/lib/commands.ts';
import { depositsQuery } from '#src/lib/deposit-queries.ts';
import { useShortcutKeys } from '#src/lib/shortcuts.ts';
import { notify, notifyProblem } from '#src/lib/toasts.ts';
import { Theme, THEME_WORDS, useTheme } from '#src/lib/theme.ts';
import { redoLast, undoLast } from '#src/lib/undo.ts';
import { useMe } from '#src/lib/session.ts';

const said = (work: Promise<{ label: string } | null>, before: string, none: string): void =>
  void work.then((edit) => notify(edit ? `${before}: ${edit.label}` : none)).catch(notifyProblem);

const EDITING: readonly Command[] = [
  {
    id: 'palette',
    label: 'Find or do',
    group: 'General',
    keys: 'mod+k',
    isHidden: true,
    run: () => paletteOpen.set(!paletteOpen.get()),
  },
  {
    id: 'keys',
    label: 'Show all keys',
    group: 'General',
    keys: '?',
    words: ['shortcuts', 'keyboard'],
    run: () => shortcutSheetOpen.set(true),
  },
  {
    id: 'undo',
    label: 'Undo the last edit',
    group: 'General',
    keys: 'mod+z',
    run: () => said(undoLast(), 'Undone', 'Nothing to undo'),
  },
  {
    id: 'redo',
    label: 'Redo what was undone',
    group: 'General',
    keys: 'mod+shift+z',
    run: () => said(redoLast(), 'Done again', 'Nothing to redo'),
  },
];

/** What every page behind the sign-in has: the palette, the keys, and the places one may go. */
export function SignedIn() {
  useShortcutKeys();
  useCommands(EDITING);
  usePlaceCommands();
  useThemeCommands();
  return (
    <>
      <Outlet />
      <CommandPalette />
      <ShortcutSheet />
    </>
  );
}

function usePlaceCommands(): void {
  const navigate = useNavigate();
  const isAdministrator = useMe()?.isAdministrator ?? false;
  const { data: deposits } = useQuery(depositsQuery());
  useCommands(
    useMemo(() => {
      const go = (id: string, label: string, to: string, words: string[] = []): Command => ({
        id,
        label,
        group: 'Go to',
        words,
        run: () => void navigate(to),
      });
      return [
        { ...go('deposits', 'All deposits', '/deposits'), keys: 'g a' },
        ...(deposits ?? []).map(({ id, name }) =>
          go(`deposit-${id}`, name, `/deposits/${id}`, ['deposit']),
        ),
        go('new-deposit', 'New deposit', '/deposits/new', ['create']),
        go('account', 'Your account', '/account', ['password', 'sessions', 'name']),
        ...(isAdministrator ? [go('admin', 'Administration', '/admin', ['users'])] : []),
      ];
    }, [deposits, isAdministrator, navigate]),
  );
}

function useThemeCommands(): void {
  const [, setTheme] = useTheme();
  useCommands(
    useMemo(
      () =>
        Theme.options.map((theme) => ({
          id: `theme-${theme}`,
          label: `Theme: ${THEME_WORDS[theme].toLowerCase()}`,
          group: 'Look',
          run: () => setTheme(theme),
        })),
      [setTheme],
    ),
  );
}
