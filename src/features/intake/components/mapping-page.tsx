import { Check, ListChecks } from 'lucide-react';
import { useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { checkFile, discardUpload, loadFile, saveMapping, type Revision, type Upload } from '#contract/files.ts';
import { PageHead } from '#src/components/layout/page-head.tsx';
import { Button, LinkButton } from '#src/components/ui/button.tsx';
import { Chip } from '#src/components/ui/chip.tsx';
import { Steps } from '#src/components/ui/steps.tsx';
import { countOf, formatCount } from '#src/lib/format.ts';
import { stagePath } from '#src/lib/stages.ts';
import { useRefusal } from '#src/lib/use-deposit.ts';
import { KIND_NAMES } from '../kinds.ts';
import { revisionInForce } from '../load-plan.ts';
import { useFileWork, type FileWork } from '../use-file-work.ts';
import { useMappingDraft, type MappingDraft } from '../use-mapping-draft.ts';
import { ColumnsPlate } from './columns-plate.tsx';
import { DiscardDialog } from './discard-dialog.tsx';
import { FileRunPlate } from './file-run-plate.tsx';
import { LoadChoice, type LoadMode } from './load-choice.tsx';
import { PreviewPlate } from './preview-plate.tsx';
import { delimiterName } from './reading-settings.tsx';
import { RowsPlate } from './rows-plate.tsx';

interface Props {
  depositId: number;
  upload: Upload;
  revisions: readonly Revision[];
}

/** One file on its way in: what its columns are, how its rows read, what stands aside, and loading it. */
export function MappingPage({ depositId, upload, revisions }: Props) {
  const draft = useMappingDraft(depositId, upload);
  const work = useFileWork(depositId, upload, draft);
  const [mode, setMode] = useState<LoadMode>('replace');
  const refusal = useRefusal(saveMapping);
  const { kind } = draft.mapping;
  const current = revisionInForce(revisions, kind);
  const isLoaded = upload.state === 'loaded';
  const check = draft.isDirty ? null : upload.check;
  const fixedBecause = isLoaded ? 'This file is loaded. Bring it in again to read it another way.' : refusal;
  return (
    <div className="lg:flex lg:h-full lg:min-h-[40rem] lg:flex-col">
      <PageHead
        title={isLoaded ? `${capital(KIND_NAMES[kind])} from ${upload.fileName}` : `Bring in ${KIND_NAMES[kind]}`}
        finding={<Finding upload={upload} draft={draft} revisions={revisions} />}
        chips={isLoaded && <Chip tone="good">loaded</Chip>}
        actions={<Actions depositId={depositId} upload={upload} draft={draft} work={work} mode={current ? mode : 'replace'} />}
      />
      <FileSteps upload={upload} draft={draft} revisions={revisions} />
      {!isLoaded && check && current && <LoadChoice upload={upload} current={current} mode={mode} onPick={setMode} />}
      <div className="mb-3 grid gap-3 lg:min-h-0 lg:flex-1 lg:grid-cols-[minmax(0,1.22fr)_minmax(0,1fr)] lg:grid-rows-[minmax(0,1fr)]">
        <ColumnsPlate upload={upload} draft={draft} fixedBecause={fixedBecause} className="min-h-0" />
        <div className="grid min-h-0 min-w-0 gap-3 lg:grid-rows-[minmax(0,1.25fr)_minmax(0,1fr)]">
          <PreviewPlate depositId={depositId} upload={upload} draft={draft} collarRevision={revisionInForce(revisions, 'collar')?.id ?? null} />
          <RowsPlate depositId={depositId} uploadId={upload.id} check={check} busy={work.busy} error={work.error} />
        </div>
      </div>
      <FileRunPlate check={check} rowCount={upload.rowCount} />
    </div>
  );
}

const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);

function Finding({ upload, draft, revisions }: { upload: Upload; draft: MappingDraft; revisions: readonly Revision[] }) {
  const { fileName, rowCount, encoding, state, check, revisionId } = upload;
  const file = <span className="font-mono text-[0.9em] break-all">{fileName}</span>;
  const revision = revisions.find(({ id }) => id === revisionId);
  if (state === 'loaded') {
    return (
      <>
        {check && `${countOf(check.rowsToLoad, 'row')} of ${formatCount(check.rows)} stand`}
        {revision && ` as revision ${revision.number}, ${revision.isCurrent ? 'in force' : 'not in force now'}`}
        {check && `; ${formatCount(check.rowsAside)} ${check.rowsAside === 1 ? 'is' : 'are'} set aside and kept.`}
      </>
    );
  }
  const how = `${countOf(rowCount, 'row')}, ${delimiterName(draft.mapping.delimiter)}, ${encoding.toUpperCase()}.`;
  if (check && !draft.isDirty) return <>{file}: {how} {formatCount(check.rowsToLoad)} will load; {formatCount(check.rowsAside)} {check.rowsAside === 1 ? 'is' : 'are'} set aside and kept.</>;
  if (draft.problems.length > 0) return <>{file}: {how} It cannot be read yet: {countOf(draft.problems.length, 'thing')} to say of its columns.</>;
  return <>{file}: {how} {upload.mappingRemembered ? 'Mapped as a file with the same columns was before.' : 'Its columns are guessed: look them over.'}</>;
}

function FileSteps({ upload, draft, revisions }: { upload: Upload; draft: MappingDraft; revisions: readonly Revision[] }) {
  const revision = revisions.find(({ id }) => id === upload.revisionId);
  const current = upload.state === 'loaded' ? 'loaded' : upload.check && !draft.isDirty ? 'rows' : 'columns';
  const steps = [
    { key: 'file', label: 'File' },
    { key: 'columns', label: 'Columns' },
    { key: 'rows', label: 'Rows' },
    { key: 'loaded', label: revision ? `Loaded as revision ${revision.number}` : 'Loaded' },
  ];
  return <Steps label="Steps of bringing a file in" steps={steps} current={current} className="mb-3" />;
}

interface ActionsProps {
  depositId: number;
  upload: Upload;
  draft: MappingDraft;
  work: FileWork;
  mode: LoadMode;
}

/** The next step as the main action: check every row, then load those that hold. */
function Actions({ depositId, upload, draft, work, mode }: ActionsProps) {
  const navigate = useNavigate();
  const [isLeaving, setLeaving] = useState(false);
  const refusals = { check: useRefusal(checkFile), load: useRefusal(loadFile), discard: useRefusal(discardUpload) };
  const intake = stagePath(depositId, 'intake');
  if (upload.state === 'loaded') return <LinkButton to={intake} kind="main">Back to Intake</LinkButton>;
  const check = draft.isDirty ? null : upload.check;
  const [problem] = draft.problems;
  const unreadable = problem && `Cannot be read yet: ${problem.message}`;
  return (
    <>
      <LinkButton to={intake} kind="bare">Another file</LinkButton>
      <Button unavailable={refusals.discard} onClick={() => setLeaving(true)}>Discard</Button>
      {check && !work.isLoading && <Button isBusy={work.isChecking} unavailable={refusals.check} onClick={work.check}>Check again</Button>}
      {check ? (
        <Button kind="main" size="sign" icon={Check} isBusy={work.isLoading} unavailable={refusals.load ?? (check.rowsToLoad === 0 && 'No row holds')} onClick={() => work.load(mode)}>
          {mode === 'add' ? 'Add' : 'Load'} {countOf(check.rowsToLoad, 'row')}
        </Button>
      ) : (
        <Button kind="main" size="sign" icon={ListChecks} isBusy={work.isChecking} unavailable={refusals.check ?? unreadable} onClick={work.check}>
          Check {upload.rowCount === 1 ? 'its one row' : `all ${countOf(upload.rowCount, 'row')}`}
        </Button>
      )}
      <DiscardDialog depositId={depositId} upload={isLeaving ? upload : null} onClose={() => setLeaving(false)} onDiscarded={() => void navigate(intake)} />
    </>
  );
}
