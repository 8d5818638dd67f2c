import { fireEvent, render, screen } from '@testing-library/react';
import { useMemo } from 'react';
import { describe, expect, it, vi } from 'vitest';
import { useCommands } from '#src/lib/commands.ts';
import { keysInWords, strokeOf, useShortcutKeys } from '#src/lib/shortcuts.ts';

const press = { ctrlKey: false, metaKey: false, shiftKey: false, altKey: false };

describe('strokes', () => {
  it.each([
    [{ ...press, key: 'k', ctrlKey: true }, 'mod+k'],
    [{ ...press, key: 'K', metaKey: true }, 'mod+k'],
    [{ ...press, key: 'Z', ctrlKey: true, shiftKey: true }, 'mod+shift+z'],
    [{ ...press, key: '?', shiftKey: true }, '?'],
    [{ ...press, key: 'ArrowUp', shiftKey: true }, 'shift+arrowup'],
  ])('%j is %s', (event, stroke) => {
    expect(strokeOf(event)).toBe(stroke);
  });

  it('are written in words', () => {
    expect(keysInWords('mod+k')).toBe('Ctrl K');
    expect(keysInWords('g 4')).toBe('g then 4');
  });
});

describe('UX-05 keys', () => {
  const open = vi.fn();
  const find = vi.fn();
  function Page() {
    useShortcutKeys();
    useCommands(
      useMemo(
        () => [
          { id: 'a', label: 'Open', group: 'x', keys: 'g 4', run: open },
          { id: 'b', label: 'Find', group: 'x', keys: 'mod+k', run: find },
        ],
        [],
      ),
    );
    return <input aria-label="Name" />;
  }

  it('run their command, but letters not while typing', () => {
    render(<Page />);
    fireEvent.keyDown(document.body, { key: 'g' });
    fireEvent.keyDown(document.body, { key: '4' });
    expect(open).toHaveBeenCalledTimes(1);
    fireEvent.keyDown(screen.getByLabelText('Name'), { key: 'g' });
    fireEvent.keyDown(screen.getByLabelText('Name'), { key: '4' });
    expect(open).toHaveBeenCalledTimes(1);
    fireEvent.keyDown(screen.getByLabelText('Name'), { key: 'k', ctrlKey: true });
    expect(find).toHaveBeenCalledTimes(1);
  });
});
