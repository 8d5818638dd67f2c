import { useQuery } from '@tanstack/react-query';
import { FlaskConical, Pencil, Undo2 } from 'lucide-react';
import { useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { deleteDomain, gatherEvidence, updateDomain, type Domain, type DomainBody, type DomainEvidence, type DomainList } from '#contract/domains.ts';
import type { Grouping } from '#contract/groupings.ts';
import { CategoryMark } from '#src/components/charts/category-marks.tsx';
import { PageHead } from '#src/components/layout/page-head.tsx';
import { PageWait } from '#src/components/layout/page-wait.tsx';
import { Button, LinkButton } from '#src/components/ui/button.tsx';
import { Chip } from '#src/components/ui/chip.tsx';
import { Empty } from '#src/components/ui/empty.tsx';
import { Skeleton } from '#src/components/ui/loading.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { Absent } from '#src/lib/absent.ts';
import { domainListQuery, groupingsQuery } from '#src/lib/analysis-queries.ts';
import { useJob } from '#src/lib/jobs.ts';
import { notifyEdit, notifyProblem } from '#src/lib/toasts.ts';
import { useDepositId, useRefusal } from '#src/lib/use-deposit.ts';
import { evidenceQuery, useGatherEvidence, useTakeBack, useUpdateDomain } from '../api/domains-queries.ts';
import { BeforeAfterPlate } from './before-after-plate.tsx';
import { DomainForm } from './domain-form.tsx';
import { OrientationPlate } from './orientation-plate.tsx';
import { SplitsPlate } from './splits-plate.tsx';
import { WhyPlate } from './why-plate.tsx';

/** One candidate domain with the evidence for it. */
export function DomainPage({ domainId }: { domainId: number }) {
  const depositId = useDepositId();
  const list = useQuery(domainListQuery(depositId));
  const groupings = useQuery(groupingsQuery(depositId));
  const evidence = useQuery(evidenceQuery(depositId, domainId));
  if (!list.data || !groupings.data) return <PageWait title="Domain" reads={[list, groupings]} />;
  const domain = list.data.domains.find(({ id }) => id === domainId);
  const grouping = groupings.data.find(({ id }) => id === domain?.groupingId);
  if (!domain || !grouping) {
    // Its evidence was read here: it has been there, and was taken back meanwhile.
    if (evidence.data !== undefined) return <TakenBack />;
    throw new Absent();
  }
  return <DomainView domain={domain} list={list.data} grouping={grouping} evidence={evidence.data ?? null} isRead={evidence.data !== undefined} unread={evidence.data === undefined ? evidence.error : null} onRead={() => void evidence.refetch()} />;
}

interface ViewProps {
  domain: Domain;
  list: DomainList;
  grouping: Grouping;
  evidence: DomainEvidence | null;
  isRead: boolean;
  /** Why the evidence could not be read. */
  unread: Error | null;
  onRead: () => void;
}

const bodyOf = ({ code, name, rationale, slot, groupLabels }: Domain): DomainBody => ({ code, name, rationale, slot, groupLabels });

function DomainView({ domain, list, grouping, evidence, isRead, unread, onRead }: ViewProps) {
  const depositId = useDepositId();
  const navigate = useNavigate();
  const [isEditing, setIsEditing] = useState(false);
  const [jobId, setJobId] = useState<number | null>(null);
  const { job, isRunning } = useJob(depositId, jobId);
  const gather = useGatherEvidence(depositId);
  const takeBack = useTakeBack(depositId, ({ code }, undo) => {
    notifyEdit({ label: `${code} taken back; its intervals are unassigned`, undo });
    void navigate(`/deposits/${depositId}/domains`);
  });
  const mayEdit = useRefusal(updateDomain);
  const mayDelete = useRefusal(deleteDomain);
  const mayGather = useRefusal(gatherEvidence);
  const run = (): void => gather.mutate([domain.id], { onSuccess: (answer) => setJobId(answer.job.id), onError: notifyProblem });
  const remove = (): void => takeBack.mutate(domain, { onError: notifyProblem });
  const busy = isRunning ? { progress: job?.progress ?? null, phase: job?.phase ?? 'waiting its turn' } : null;
  const needsTest = evidence === null || evidence.isStale;
  return (
    <>
      <PageHead
        title={`Domain ${domain.code}, ${domain.name}`}
        before={<CategoryMark slot={domain.slot} size={17} />}
        finding={evidence?.finding}
        chips={evidence?.isStale && <Chip tone="stale">stale: older than the domain or its tables</Chip>}
        actions={
          <>
            <Button kind="bare" icon={Undo2} unavailable={mayDelete} isBusy={takeBack.isPending} onClick={remove}>Take back</Button>
            <Button icon={Pencil} unavailable={mayEdit} onClick={() => setIsEditing(!isEditing)}>Edit</Button>
            <Button kind={needsTest ? 'main' : 'plain'} icon={FlaskConical} unavailable={mayGather ?? (isRunning ? 'Evidence is being gathered' : grouping.isStale ? 'The groups are stale: run Groups again first' : undefined)} isBusy={gather.isPending} onClick={run}>Gather evidence</Button>
          </>
        }
      />
      {job?.state === 'failed' && <p role="alert" className="mb-3 rounded-2 bg-bad-wash px-3 py-2 text-bad">{job.error?.message}</p>}
      <div className="grid gap-3">
        {isEditing && <EditPlate domain={domain} list={list} grouping={grouping} onDone={() => setIsEditing(false)} />}
        {!evidence && <WhyPlate domain={domain} evidence={null} />}
        {!evidence && isRead && <Plate title="Evidence" busy={busy} empty={<Empty action={<Button kind="main" unavailable={mayGather} onClick={run}>Gather evidence</Button>}>Nothing is tested yet: how it splits by rock, weathering and faults, how its structures lie, and whether its grades are one population.</Empty>} />}
        {unread ? <Problem error={unread} action={{ label: 'Try again', run: onRead }} /> : !isRead && <Skeleton lines={8} />}
        {evidence && <EvidencePlates evidence={evidence} domain={domain} />}
      </div>
    </>
  );
}

function TakenBack() {
  const depositId = useDepositId();
  return (
    <>
      <PageHead title="Domain" />
      <Plate title="Taken back" empty={<Empty action={<LinkButton to={`/deposits/${depositId}/domains`}>All domains</LinkButton>}>This domain has been taken back; its intervals are unassigned.</Empty>} />
    </>
  );
}

function EditPlate({ domain, list, grouping, onDone }: Pick<ViewProps, 'domain' | 'list' | 'grouping'> & { onDone: () => void }) {
  const depositId = useDepositId();
  const update = useUpdateDomain(depositId, domain);
  return (
    <Plate title={`Edit ${domain.code}`}>
      <DomainForm
        grouping={grouping} domains={list.domains} domain={domain} startLabels={domain.groupLabels} submitLabel="Save the domain" isPending={update.isPending} error={update.error} onCancel={onDone}
        onSubmit={async (body) => { if (JSON.stringify(body) !== JSON.stringify(bodyOf(domain))) await update.mutateAsync(body); onDone(); }}
      />
    </Plate>
  );
}

function EvidencePlates({ evidence, domain }: { evidence: DomainEvidence; domain: Domain }) {
  return (
    <>
      <SplitsPlate evidence={evidence} />
      <div className="grid gap-3 lg:grid-cols-2 lg:items-start xl:grid-cols-3">
        <div className="grid gap-3 xl:contents">
          <OrientationPlate evidence={evidence} />
          <WhyPlate domain={domain} evidence={evidence} />
        </div>
        <BeforeAfterPlate evidence={evidence} domain={domain} />
      </div>
    </>
  );
}
