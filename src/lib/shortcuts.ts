import { useEffect } from 'react';
import { currentCommands } from './commands.ts';

const isMac = typeof navigator !== 'undefined' && /mac/i.test(navigator.userAgent);

/** How keys are written on screen: "Ctrl K", "⌘ K", "g then d". */
export const keysInWords = (keys: string): string =>
  keys
    .split(' ')
    .map((stroke) =>
      stroke
        .split('+')
        .map(
          (part) =>
            KEY_WORDS[part] ??
            (part.length === 1 && keys.includes('mod') ? part.toUpperCase() : part),
        )
        .join(' '),
    )
    .join(' then ');

const KEY_WORDS: Record<string, string> = {
  mod: isMac ? '⌘' : 'Ctrl',
  shift: 'Shift',
  escape: 'Esc',
  enter: 'Enter',
  up: '↑',
  down: '↓',
  left: '←',
  right: '→',
};

/** One key press as a text: "mod+shift+z", "g", "?". */
export function strokeOf(
  event: Pick<KeyboardEvent, 'key' | 'ctrlKey' | 'metaKey' | 'shiftKey' | 'altKey'>,
): string {
  const key = event.key.toLowerCase();
  const parts: string[] = [];
  if (event.ctrlKey || event.metaKey) parts.push('mod');
  if (event.altKey) parts.push('alt');
  // Of a sign such as ? Shift is part already.
  if (event.shiftKey && /^[a-z]$|^.{2,}$/.test(key)) parts.push('shift');
  parts.push(key);
  return parts.join('+');
}

function isTyping(target: EventTarget | null): boolean {
  if (!(target instanceof HTMLElement)) return false;
  return target.isContentEditable || ['INPUT', 'TEXTAREA', 'SELECT'].includes(target.tagName);
}

const SEQUENCE_MS = 1200;

/** Runs the keys of all offered commands. Plain letters do nothing while a person types or a dialog is open. */
export function useShortcutKeys(): void {
  useEffect(() => {
    let before = '';
    let beforeAt = 0;
    const onKey = (event: KeyboardEvent) => {
      if (event.defaultPrevented || event.isComposing) return;
      const stroke = strokeOf(event);
      const isPlain = !stroke.startsWith('mod+');
      const isUndo = stroke === 'mod+z' || stroke === 'mod+shift+z';
      if ((isPlain || isUndo) && isTyping(event.target)) return;
      if (isPlain && document.querySelector('[role="dialog"], [role="menu"]')) return;
      const pair = event.timeStamp - beforeAt < SEQUENCE_MS ? `${before} ${stroke}` : '';
      const command = currentCommands().findLast(
        ({ keys }) => keys === stroke || (pair !== '' && keys === pair),
      );
      before = stroke;
      beforeAt = event.timeStamp;
      if (!command) return;
      event.preventDefault();
      command.run();
    };
    window.addEventListener('keydown', onKey);
    return () => window.removeEventListener('keydown', onKey);
  }, []);
}
