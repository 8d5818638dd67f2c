import { useEffect, useState } from 'react';
import { uploadFiles } from '#contract/files.ts';
import { Button } from '#src/components/ui/button.tsx';
import { Chip, type Tone } from '#src/components/ui/chip.tsx';
import { FileDrop } from '#src/components/ui/file-drop.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { ProgressRun } from '#src/components/ui/run.tsx';
import { formatBytes, formatCount } from '#src/lib/format.ts';
import { useRefusal } from '#src/lib/use-deposit.ts';
import { isUnderWay, type QueuedFile, type QueueState } from '../upload-queue.ts';
import { useUploadQueue } from '../use-upload-queue.ts';

const ENDINGS = ['.csv', '.tsv', '.txt'];

/** Where files are laid in, and how far each has come. */
export function BringPlate({ depositId }: { depositId: number }) {
  const refusal = useRefusal(uploadFiles);
  const { files, add, retry, cancel, clear } = useUploadQueue(depositId);
  // What has arrived is listed among the files waiting.
  const shown = files.filter(({ state }) => state !== 'kept');
  const hasEnded = shown.some((file) => !isUnderWay(file));
  return (
    <Plate title="Bring files in" qualifier="you look each file over before it loads" tools={hasEnded && <Button size="tiny" onClick={clear}>Clear the list</Button>}>
      <FileDrop
        label="Drop CSV files here"
        hint="Several at once, any of the kinds below. Separator, encoding, kind and columns are found out and shown to you."
        endings={ENDINGS}
        onFiles={add}
        {...(refusal ? { unavailable: refusal } : {})}
      />
      {shown.length > 0 && (
        <ul aria-label="Files on their way" className="m-0 mt-1 grid list-none p-0">
          {shown.map((file) => (
            <FileLine key={file.key} queued={file} onCancel={() => cancel(file.key)} onRetry={() => retry(file.key)} />
          ))}
        </ul>
      )}
    </Plate>
  );
}

const STATE_WORDS: Record<QueueState, string> = {
  waiting: 'waits its turn', sending: 'on its way', reading: 'being looked at', kept: 'brought in', refused: 'refused', failed: 'did not arrive', cancelled: 'cancelled',
};
const STATE_TONES: Record<QueueState, Tone> = {
  waiting: 'plain', sending: 'note', reading: 'note', kept: 'good', refused: 'bad', failed: 'bad', cancelled: 'plain',
};

interface LineProps {
  queued: QueuedFile;
  onCancel: () => void;
  onRetry: () => void;
}

function FileLine({ queued, onCancel, onRetry }: LineProps) {
  const { file, state, sentBytes, message } = queued;
  return (
    <li className="grid gap-1 border-b border-rule py-1.5 last:border-0">
      <div className="flex flex-wrap items-center gap-x-3 gap-y-1">
        <span className="min-w-0 flex-1 truncate font-mono text-caption" title={file.name}>{file.name}</span>
        <span className="text-caption text-ink-3">{state === 'sending' ? <SendFigures queued={queued} /> : formatBytes(file.size)}</span>
        <Chip tone={STATE_TONES[state]}>{STATE_WORDS[state]}</Chip>
        {isUnderWay(queued) && <Button size="tiny" onClick={onCancel} aria-label={`Cancel ${file.name}`}>Cancel</Button>}
        {(state === 'failed' || state === 'cancelled') && <Button size="tiny" onClick={onRetry} aria-label={`Send ${file.name} again`}>Send again</Button>}
      </div>
      {(state === 'sending' || state === 'reading') && (
        <ProgressRun value={state === 'reading' || file.size === 0 ? null : sentBytes / file.size} label={`${file.name}: ${STATE_WORDS[state]}`} />
      )}
      {message && <p role="alert" className="text-small text-bad">{message}</p>}
    </li>
  );
}

/** Bytes, speed and time left, kept up to date while nothing arrives. */
function SendFigures({ queued }: { queued: QueuedFile }) {
  const { file, sentBytes, startedAt } = queued;
  const [now, setNow] = useState(() => performance.now());
  useEffect(() => {
    const timer = setInterval(() => setNow(performance.now()), 500);
    return () => clearInterval(timer);
  }, []);
  const seconds = (now - startedAt) / 1000;
  const perSecond = seconds > 0.5 ? sentBytes / seconds : 0;
  const left = perSecond > 0 ? Math.ceil((file.size - sentBytes) / perSecond) : null;
  return (
    <>
      {formatBytes(sentBytes)} of {formatBytes(file.size)}
      {perSecond > 0 && `, ${formatBytes(perSecond)}/s`}
      {left !== null && `, ${left < 90 ? `${formatCount(left)} s` : `${formatCount(left / 60)} min`} left`}
    </>
  );
}
