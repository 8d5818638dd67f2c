import { useQuery } from '@tanstack/react-query';
import { FlaskConical, Plus } from 'lucide-react';
import { useState } from 'react';
import { createDomain, gatherEvidence, type Domain, type DomainList } from '#contract/domains.ts';
import type { Grouping } from '#contract/groupings.ts';
import { PageHead } from '#src/components/layout/page-head.tsx';
import { PageWait } from '#src/components/layout/page-wait.tsx';
import { Button, LinkButton } from '#src/components/ui/button.tsx';
import { Chip } from '#src/components/ui/chip.tsx';
import { Empty } from '#src/components/ui/empty.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { domainListQuery, groupingsQuery } from '#src/lib/analysis-queries.ts';
import { countOf, formatMetres } from '#src/lib/format.ts';
import { useJob } from '#src/lib/jobs.ts';
import { notify, notifyProblem } from '#src/lib/toasts.ts';
import { urlFlag, urlNumbers, useUrlState } from '#src/lib/url-state.ts';
import { useDepositId, useRefusal } from '#src/lib/use-deposit.ts';
import { useCreateDomain, useGatherEvidence } from '../api/domains-queries.ts';
import { CoverageRun } from './coverage-run.tsx';
import { DomainForm } from './domain-form.tsx';
import { DomainTable } from './domain-table.tsx';

const VIEW = { new: urlFlag(), groups: urlNumbers() };

function findingOf({ domains, unassigned, total }: DomainList): string {
  if (domains.length === 0) return 'No group is accepted as a domain yet: every interval is unassigned.';
  const coded = domains.reduce((sum, { metres }) => sum + metres, 0);
  const rest = unassigned.intervals === 0 ? 'Every interval has one code.' : `${countOf(unassigned.intervals, 'interval')} (${formatMetres(unassigned.metres)}) ${unassigned.intervals === 1 ? 'is' : 'are'} unassigned.`;
  return `${countOf(domains.length, 'candidate domain')} ${domains.length === 1 ? 'covers' : 'cover'} ${formatMetres(coded)} of ${formatMetres(total.metres)}. ${rest}`;
}

/** Candidate domains: what they cover, accepting groups, gathering evidence. */
export function DomainsStage() {
  const depositId = useDepositId();
  const list = useQuery(domainListQuery(depositId));
  const groupings = useQuery(groupingsQuery(depositId));
  const [view, setView] = useUrlState(VIEW);
  const [jobId, setJobId] = useState<number | null>(null);
  const { job, isRunning } = useJob(depositId, jobId);
  const gather = useGatherEvidence(depositId);
  const mayCreate = useRefusal(createDomain);
  const mayGather = useRefusal(gatherEvidence);
  const grouping = groupings.data?.find(({ isActive }) => isActive) ?? null;
  if (!list.data || !groupings.data) return <PageWait title="Domains" reads={[list, groupings]} />;

  const { domains } = list.data;
  const isAllTaken = grouping !== null && grouping.groups.every(({ label }) => domains.some(({ groupLabels }) => groupLabels.includes(label)));
  const waiting = domains.filter(({ hasEvidence, evidenceIsStale }) => !hasEvidence || evidenceIsStale);
  const isOpen = view.new && grouping !== null && !mayCreate;
  const cannotGather = mayGather ?? (domains.length === 0 ? 'Accept a domain first' : isRunning ? 'Evidence is being gathered' : list.data.isStale ? 'The groups are stale: run Groups again first' : undefined);
  const startGathering = (): void => gather.mutate(waiting.length > 0 ? waiting.map(({ id }) => id) : [], { onSuccess: (answer) => setJobId(answer.job.id), onError: notifyProblem });
  const actions = grouping && (
    <>
      <Button icon={FlaskConical} kind={waiting.length > 0 && domains.length > 0 ? 'main' : 'plain'} unavailable={cannotGather} isBusy={gather.isPending} onClick={startGathering}>
        {waiting.length > 0 && waiting.length < domains.length ? `Test ${countOf(waiting.length, 'domain')}` : 'Gather evidence'}
      </Button>
      <Button icon={Plus} kind={waiting.length > 0 && domains.length > 0 ? 'plain' : 'main'} unavailable={mayCreate ?? (isAllTaken && !view.new && 'Every group belongs to a domain; take one back or edit it to move a group')} onClick={() => setView({ new: true }, { push: true })}>Accept groups</Button>
    </>
  );
  return (
    <>
      <PageHead title="Domains" finding={grouping ? findingOf(list.data) : undefined} chips={list.data.isStale && <Chip tone="stale">stale: the groups lack newer tables</Chip>} actions={actions} />
      {job?.state === 'failed' && <p role="alert" className="mb-3 rounded-2 bg-bad-wash px-3 py-2 text-bad">{job.error?.message}</p>}
      {!grouping && <Plate title="Candidate domains" empty={<Empty action={<LinkButton to={`/deposits/${depositId}/groups`}>Go to Groups</LinkButton>}>A domain is accepted from one or several groups. Group the intervals first.</Empty>} />}
      {grouping && (
        <div className="grid gap-3">
          {isOpen && <NewDomain grouping={grouping} domains={domains} startLabels={view.groups} onDone={() => setView({ new: false, groups: [] })} />}
          <CoverageRun list={list.data} />
          <DomainTable list={list.data} grouping={grouping} busy={isRunning ? { progress: job?.progress ?? null, phase: job?.phase ?? 'waiting its turn' } : null} />
        </div>
      )}
    </>
  );
}

interface NewProps {
  grouping: Grouping;
  domains: Domain[];
  startLabels: readonly number[];
  onDone: () => void;
}

function NewDomain({ grouping, domains, startLabels, onDone }: NewProps) {
  const depositId = useDepositId();
  const create = useCreateDomain(depositId);
  return (
    <Plate title="Accept groups as a candidate domain" qualifier={`from “${grouping.name}”`}>
      <DomainForm
        key={startLabels.join()}
        grouping={grouping}
        domains={domains}
        domain={null}
        startLabels={startLabels}
        submitLabel="Accept as candidate domain"
        isPending={create.isPending}
        error={create.error}
        onSubmit={async (body) => {
          const made = await create.mutateAsync(body);
          notify(`${made.code} accepted: ${countOf(made.intervals, 'interval')}`);
          onDone();
        }}
        onCancel={onDone}
      />
    </Plate>
  );
}
