import { MoveHorizontal } from 'lucide-react';
import { Popover } from 'radix-ui';
import { useId, useState } from 'react';
import type { FormEvent } from 'react';
import { Button } from '#src/components/ui/button.tsx';
import { formatFigures, MISSING } from '#src/lib/format.ts';
import { readWindow } from '../charts/depth-window.ts';
import type { DepthWindow } from '../charts/depth-window.ts';

interface Props {
  window: DepthWindow;
  fit: DepthWindow;
  onWindow: (window: DepthWindow | null) => void;
}

const depthText = (depthM: number) => formatFigures(Math.round(depthM * 10) / 10, 3);

/** The depth window, in words; opens a small form to type another. */
export function WindowButton({ window, fit, onWindow }: Props) {
  const [isOpen, setOpen] = useState(false);
  return (
    <Popover.Root open={isOpen} onOpenChange={setOpen}>
      <Popover.Trigger asChild>
        <Button size="tiny" icon={MoveHorizontal} className="!bg-transparent">
          <span className="sr-only">Depth window </span>
          {depthText(window[0])} {MISSING} {depthText(window[1])}{'\u00a0'}m
        </Button>
      </Popover.Trigger>
      <Popover.Portal>
        <Popover.Content side="top" align="end" sideOffset={4} collisionPadding={8} className="opens z-40 w-60 rounded-3 border border-rule bg-sheet p-3 shadow-float">
          <WindowForm
            window={window}
            fit={fit}
            onWindow={(next) => {
              onWindow(next);
              setOpen(false);
            }}
          />
        </Popover.Content>
      </Popover.Portal>
    </Popover.Root>
  );
}

function WindowForm({ window, fit, onWindow }: Props) {
  const [from, setFrom] = useState(String(Math.round(window[0] * 10) / 10));
  const [to, setTo] = useState(String(Math.round(window[1] * 10) / 10));
  const [problem, setProblem] = useState<string | null>(null);
  const problemId = useId();
  const submit = (event: FormEvent) => {
    event.preventDefault();
    const read = readWindow(from, to, fit);
    if ('problem' in read) setProblem(read.problem);
    else onWindow(read.window);
  };
  const field = (label: string, value: string, set: (text: string) => void) => (
    <label className="grid gap-0.5 text-caption text-ink-2">
      {label}
      <input
        inputMode="decimal"
        value={value}
        onChange={(event) => set(event.target.value)}
        aria-invalid={problem !== null}
        aria-describedby={problem === null ? undefined : problemId}
        className="h-8 w-full min-w-0 rounded-2 border border-rule-firm bg-sheet px-2 text-right text-body text-ink"
      />
    </label>
  );
  return (
    <form onSubmit={submit} noValidate className="grid gap-2">
      <div className="grid grid-cols-2 gap-2">
        {field('From, m', from, setFrom)}
        {field('To, m', to, setTo)}
      </div>
      {problem !== null && (
        <p id={problemId} role="alert" className="text-caption text-bad">
          {problem}
        </p>
      )}
      <div className="flex gap-2">
        <Button type="submit" size="tiny">
          Show
        </Button>
        <Button size="tiny" kind="bare" onClick={() => onWindow(null)}>
          Fit the holes
        </Button>
      </div>
    </form>
  );
}
