import { act, screen } from '@testing-library/react';
import { describe, expect, it, vi } from 'vitest';
import { Button } from '#src/components/ui/button.tsx';
import { Checkbox, RadioGroup } from '#src/components/ui/choices.tsx';
import { Chip } from '#src/components/ui/chip.tsx';
import { ConfirmDialog } from '#src/components/ui/dialog.tsx';
import { Field } from '#src/components/ui/field.tsx';
import { FileDrop } from '#src/components/ui/file-drop.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { Run } from '#src/components/ui/run.tsx';
import { Segmented } from '#src/components/ui/segmented.tsx';
import { Select } from '#src/components/ui/select.tsx';
import { Steps } from '#src/components/ui/steps.tsx';
import { VerdictMark } from '#src/components/ui/verdict-mark.tsx';
import { ApiProblem } from '#src/lib/api-problem.ts';
import { notifyEdit } from '#src/lib/toasts.ts';
import { axeViolations } from '#tests/support/axe.ts';
import { renderPage } from '#tests/support/render-page.tsx';

describe('Button', () => {
  it('does nothing while unavailable, but takes focus and says why', async () => {
    const onClick = vi.fn();
    const { user } = renderPage(
      <Button unavailable="Waits for a suite" onClick={onClick}>
        Run
      </Button>,
    );
    await user.tab();
    expect(screen.getByRole('button', { name: 'Run' })).toHaveFocus();
    expect(await screen.findByRole('tooltip')).toHaveTextContent('Waits for a suite');
    await user.keyboard('{Enter}');
    expect(onClick).not.toHaveBeenCalled();
  });

  it('takes no second press while busy', async () => {
    const onClick = vi.fn();
    const { user } = renderPage(
      <Button isBusy onClick={onClick}>
        Load
      </Button>,
    );
    await user.click(screen.getByRole('button', { name: /Load/ }));
    expect(onClick).not.toHaveBeenCalled();
  });
});

describe('Field', () => {
  it('ties hint and error to the control', () => {
    renderPage(<Field label="Name" hint="As written in the log" error="expected a name" />);
    const input = screen.getByLabelText('Name');
    expect(input).toBeInvalid();
    expect(input).toHaveAccessibleDescription('As written in the log Expected a name');
  });
});

it('Segmented keeps exactly one taken', async () => {
  const onPick = vi.fn();
  const { user } = renderPage(
    <Segmented
      label="Tool"
      segments={[
        { value: 'lasso', label: 'Lasso' },
        { value: 'box', label: 'Box' },
      ]}
      value="lasso"
      onPick={onPick}
    />,
  );
  await user.click(screen.getByRole('radio', { name: 'Lasso' }));
  expect(onPick).not.toHaveBeenCalled();
  await user.click(screen.getByRole('radio', { name: 'Box' }));
  expect(onPick).toHaveBeenCalledExactlyOnceWith('box');
});

it('Select gives the typed value', async () => {
  const onPick = vi.fn();
  const { user } = renderPage(
    <Select
      label="Unit"
      options={[
        { value: '%', label: '%' },
        { value: 'ppm', label: 'ppm' },
      ]}
      value="%"
      onPick={onPick}
    />,
  );
  await user.selectOptions(screen.getByLabelText('Unit'), 'ppm');
  expect(onPick).toHaveBeenCalledExactlyOnceWith('ppm');
});

describe('Plate', () => {
  it('shows the problem with its one button', async () => {
    const onRetry = vi.fn();
    const error = new ApiProblem({
      type: '',
      title: 'No column Cu',
      status: 400,
      code: 'x',
      detail: 'Expected Cu, found Cu_ppm',
      requestId: 'r-7',
    });
    const { user } = renderPage(
      <Plate title="Scores" error={error} onRetry={onRetry}>
        picture
      </Plate>,
    );
    expect(screen.getByRole('alert')).toHaveTextContent('Expected Cu, found Cu_ppm');
    expect(screen.queryByText('picture')).toBeNull();
    await user.click(screen.getByRole('button', { name: 'Try again' }));
    expect(onRetry).toHaveBeenCalledOnce();
  });

  it('UX-02 shows nothing for 0.3 s, then a run, then the phase and a way out', () => {
    vi.useFakeTimers();
    const onCancel = vi.fn();
    renderPage(
      <Plate title="Scores" busy={{ progress: 0.42, phase: 'restart 3 of 8', onCancel }}>
        picture
      </Plate>,
    );
    act(() => void vi.advanceTimersByTime(250));
    expect(screen.queryByRole('progressbar')).toBeNull();
    act(() => void vi.advanceTimersByTime(100));
    expect(screen.getByRole('progressbar')).toHaveAttribute('aria-valuenow', '42');
    expect(screen.queryByText(/restart 3 of 8/)).toBeNull();
    act(() => void vi.advanceTimersByTime(800));
    expect(screen.getByText(/restart 3 of 8/)).toBeInTheDocument();
    screen.getByRole('button', { name: 'Cancel' }).click();
    expect(onCancel).toHaveBeenCalledOnce();
    vi.useRealTimers();
  });

  it('UX-09 opens help with its caution and source', async () => {
    const { user } = renderPage(
      <Plate
        title="Sweep"
        help={{
          text: 'Criteria side by side.',
          caution: 'None of them knows geology.',
          source: 'Rousseeuw (1987)',
        }}
      />,
    );
    await user.click(screen.getByRole('button', { name: 'Help: Sweep' }));
    expect(screen.getByRole('dialog')).toHaveTextContent(
      'Criteria side by side.Caution. None of them knows geology.Rousseeuw (1987)',
    );
  });
});

it('FileDrop takes several files and names the ones it refuses', async () => {
  const onFiles = vi.fn();
  const { user } = renderPage(
    <FileDrop label="Drop CSV files here" endings={['.csv']} onFiles={onFiles} />,
  );
  const files = ['a.csv', 'b.CSV', 'c.pdf', 'd.xlsx'].map((name) => new File(['x'], name));
  await user.upload(screen.getByLabelText('Drop CSV files here'), files);
  expect(onFiles).toHaveBeenCalledExactlyOnceWith(files.slice(0, 2));
  expect(screen.getByRole('alert')).toHaveTextContent('Expected .csv; found c.pdf, d.xlsx. Save the sheet as CSV and bring that in.');
});

it('ConfirmDialog does it only on the verb', async () => {
  const onConfirm = vi.fn();
  const onClose = vi.fn();
  const { user } = renderPage(
    <ConfirmDialog
      isOpen
      onClose={onClose}
      title="Remove A. Brandt?"
      description="Access ends."
      confirmLabel="Remove A. Brandt"
      onConfirm={onConfirm}
    />,
  );
  await user.click(screen.getByRole('button', { name: 'Keep' }));
  expect([onClose.mock.calls.length, onConfirm.mock.calls.length]).toEqual([1, 0]);
  await user.click(screen.getByRole('button', { name: 'Remove A. Brandt' }));
  expect(onConfirm).toHaveBeenCalledOnce();
});

it('UX-03 a notice of an edit offers Undo', async () => {
  const undo = vi.fn();
  const { user } = renderPage(<p>page</p>);
  act(() => notifyEdit({ label: '4 intervals moved to 2110', undo }));
  expect(await screen.findByText('4 intervals moved to 2110')).toBeInTheDocument();
  await user.click(screen.getByRole('button', { name: 'Undo' }));
  expect(undo).toHaveBeenCalledOnce();
});

it('the set of controls has no accessibility violation', async () => {
  const { container } = renderPage(
    <main>
      <h1>Controls</h1>
      <Steps
        label="Steps"
        steps={[
          { key: 'a', label: 'File' },
          { key: 'b', label: 'Columns' },
        ]}
        current="b"
        onPick={() => undefined}
      />
      <Plate
        title="Sheet"
        qualifier="n = 3"
        caption="n = 3"
        help={{ text: 'x' }}
        exports={[{ label: 'CSV', run: () => undefined }]}
      >
        <Chip tone="warn">unit from range</Chip>
        <VerdictMark verdict="mixed" />
        <Run
          label="File"
          parts={[
            { share: 0.5, label: 'loads' },
            { share: 0.1, label: 'aside', look: 'hatch' },
          ]}
        />
        <Checkbox label="Sign" hint="with a reason" />
        <RadioGroup
          label="Right"
          choices={[{ value: 'a', label: 'Read', hint: 'all' }]}
          value="a"
          onPick={() => undefined}
        />
        <FileDrop label="Drop" endings={['.csv']} onFiles={() => undefined} />
        <Button kind="main" unavailable="not yet">
          Load
        </Button>
      </Plate>
    </main>,
  );
  expect(await axeViolations(container)).toEqual([]);
});
