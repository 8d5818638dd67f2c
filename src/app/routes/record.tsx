import { useQuery } from '@tanstack/react-query';
import { PageHead } from '#src/components/layout/page-head.tsx';
import { Chip } from '#src/components/ui/chip.tsx';
import { auditQuery } from '#src/features/record/api/record-queries.ts';
import { AuditPlate } from '#src/features/record/components/audit-plate.tsx';
import { countOf, formatCount, formatHash } from '#src/lib/format.ts';
import { useDepositId } from '#src/lib/use-deposit.ts';

export function RecordPage() {
  const depositId = useDepositId();
  const chain = useQuery(auditQuery(depositId, '', 1)).data?.chain;
  const finding =
    chain &&
    (chain.holds ? (
      <>
        Each entry seals the one before it. {countOf(chain.entries, 'entry', 'entries')} {chain.entries === 1 ? 'holds' : 'hold'}; the last is{' '}
        <span className="font-mono text-[0.9em]">{formatHash(chain.head)}</span>.
      </>
    ) : (
      `The chain breaks at entry ${formatCount(chain.firstBadEntry ?? 0)}: it or one before it has been altered outside Selvage. Tell the administrator and compare with a backup.`
    ));
  return (
    <>
      <PageHead
        title="Record"
        finding={finding}
        chips={
          chain && (
            <Chip tone={chain.holds ? 'good' : 'bad'}>
              {chain.holds ? 'chain holds' : 'chain broken'}
            </Chip>
          )
        }
      />
      <AuditPlate depositId={depositId} />
    </>
  );
}
