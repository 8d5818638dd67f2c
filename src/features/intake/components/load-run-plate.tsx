import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import { Button } from '#src/components/ui/button.tsx';
import { Chip, type Tone } from '#src/components/ui/chip.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { ProgressRun } from '#src/components/ui/run.tsx';
import { countOf, formatCount } from '#src/lib/format.ts';
import { uploadsQuery } from '../api/intake-queries.ts';
import { dismissRun, stopRun, useLoadRun, type LoadStep, type StepState } from '../load-run.ts';

const STATE_WORDS: Record<StepState, string> = { waiting: 'waits', loading: 'loading', done: 'loaded', failed: 'failed', left: 'not loaded' };
const STATE_TONES: Record<StepState, Tone> = { waiting: 'plain', loading: 'note', done: 'good', failed: 'bad', left: 'plain' };

/** Several files being loaded, one after the other, and what came of each. */
export function LoadRunPlate({ depositId }: { depositId: number }) {
  const run = useLoadRun(depositId);
  if (!run) return null;
  const done = run.steps.filter(({ state }) => state === 'done').length;
  return (
    <Plate
      title="Loading"
      qualifier={<span aria-live="polite">{formatCount(done)} of {countOf(run.steps.length, 'file')} loaded</span>}
      tools={
        run.isRunning ? (
          <Button size="tiny" isBusy={run.isStopping} onClick={() => stopRun(depositId)}>Stop</Button>
        ) : (
          <Button size="tiny" onClick={() => dismissRun(depositId)}>Put away</Button>
        )
      }
    >
      <ol className="m-0 grid list-none p-0">
        {run.steps.map((step) => (
          <StepLine key={step.uploadId} step={step} depositId={depositId} />
        ))}
      </ol>
    </Plate>
  );
}

function StepLine({ step, depositId }: { step: LoadStep; depositId: number }) {
  const { data: uploads } = useQuery({ ...uploadsQuery(depositId), enabled: false });
  const { fileName, effect, state, job, message, uploadId } = step;
  const check = uploads?.find(({ id }) => id === uploadId)?.check;
  return (
    <li className="grid gap-1 border-b border-rule py-1 last:border-0">
      <div className="flex items-center gap-3">
        <Link to={`/deposits/${depositId}/intake/${uploadId}`} className="min-w-0 flex-1 truncate font-mono text-caption">{fileName}</Link>
        <span className="text-caption text-ink-3">
          {state === 'done' && check ? `${formatCount(check.rowsToLoad)} loaded, ${formatCount(check.rowsAside)} set aside` : effect}
        </span>
        <Chip tone={STATE_TONES[state]}>{STATE_WORDS[state]}</Chip>
      </div>
      {state === 'loading' && <ProgressRun value={job?.state === 'running' ? job.progress : null} label={`Loading ${fileName}`} />}
      {message && <p className="text-small text-bad">{message}</p>}
    </li>
  );
}
