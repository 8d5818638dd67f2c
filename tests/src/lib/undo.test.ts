import { beforeEach, describe, expect, it } from 'vitest';
import { forgetEdits, noteEdit, redoLast, undoEdit, undoLast } from '#src/lib/undo.ts';

let log: string[] = [];
const edit = (label: string) => ({
  label,
  undo: () => void log.push(`undo ${label}`),
  redo: () => void log.push(`redo ${label}`),
});

beforeEach(() => {
  forgetEdits();
  log = [];
});

describe('UX-03 undo and redo', () => {
  it('goes back and forth in order', async () => {
    noteEdit(edit('a'));
    noteEdit(edit('b'));
    await undoLast();
    await undoLast();
    await redoLast();
    expect(log).toEqual(['undo b', 'undo a', 'redo a']);
    expect(await redoLast()).toMatchObject({ label: 'b' });
    expect(await redoLast()).toBeNull();
  });

  it('forgets what was undone once something else is done', async () => {
    noteEdit(edit('a'));
    await undoLast();
    noteEdit(edit('b'));
    expect(await redoLast()).toBeNull();
    await undoLast();
    expect(log).toEqual(['undo a', 'undo b']);
  });

  it('takes one named edit back, once', async () => {
    const first = edit('a');
    noteEdit(first);
    noteEdit(edit('b'));
    await undoEdit(first);
    await undoEdit(first);
    expect(log).toEqual(['undo a']);
    expect(await undoLast()).toMatchObject({ label: 'b' });
    expect(await undoLast()).toBeNull();
  });
});
