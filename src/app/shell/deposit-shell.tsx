import { useQuery } from '@tanstack/react-query';
import { FileDown, Inbox, Layers, LayoutList } from 'lucide-react';
import { Suspense, useMemo } from 'react';
import { Outlet, useNavigate } from 'react-router-dom';
import type { StageKey } from '#contract/deposits.ts';
import { BottomBar, type Place } from '#src/components/layout/bottom-bar.tsx';
import { CardPlace, SlotProvider, TrayPlace } from '#src/components/layout/slots.tsx';
import { StageRail } from '#src/components/layout/stage-rail.tsx';
import { Loading } from '#src/components/ui/loading.tsx';
import { JobTray } from '#src/features/jobs/components/job-tray.tsx';
import { useCommands } from '#src/lib/commands.ts';
import { useDepositEvents } from '#src/lib/deposit-events.ts';
import { stagesQuery } from '#src/lib/deposit-queries.ts';
import { STAGE_NAMES, stagePath } from '#src/lib/stages.ts';
import { useDepositId } from '#src/lib/use-deposit.ts';
import { DepositSwitcher } from './deposit-switcher.tsx';
import { OfflineLine } from './offline-line.tsx';
import { SnapshotFoot } from './snapshot-foot.tsx';
import { SkipLink, TopBar } from './top-bar.tsx';
import { useFocusOnMove } from './use-focus-on-move.ts';

/** The frame of a deposit's pages: bar, rail, main, card, tray. */
export function DepositShell() {
  const depositId = useDepositId();
  const { data: stages = [] } = useQuery(stagesQuery(depositId));
  const main = useFocusOnMove();
  useDepositEvents(depositId);
  useStageCommands(depositId, stages.map(({ key }) => key).join(' '));
  return (
    <SlotProvider>
      <div className="flex h-dvh flex-col">
        <SkipLink />
        <TopBar place={<DepositSwitcher />} tools={<JobTray depositId={depositId} />} />
        <OfflineLine />
        <div className="flex min-h-0 flex-1">
          <StageRail
            depositId={depositId}
            stages={stages}
            foot={<SnapshotFoot depositId={depositId} />}
          />
          <div className="flex min-w-0 flex-1 flex-col">
            <div className="flex min-h-0 flex-1 max-lg:flex-col">
              <main
                ref={main}
                id="main"
                tabIndex={-1}
                className="min-h-0 min-w-0 flex-1 overflow-auto px-5 pt-3.5 pb-5 max-md:px-4 max-md:pb-[5.5rem]"
              >
                <Suspense fallback={<Loading />}>
                  <Outlet />
                </Suspense>
              </main>
              <CardPlace className="shrink-0 max-lg:w-full max-md:pb-16" />
            </div>
            <TrayPlace className="shrink-0 max-md:hidden" />
          </div>
        </div>
        <BottomBar places={placesOf(depositId)} />
      </div>
    </SlotProvider>
  );
}

const placesOf = (depositId: number): Place[] => [
  { to: stagePath(depositId, 'deposit'), label: 'Overview', icon: LayoutList, isExact: true },
  { to: stagePath(depositId, 'intake'), label: 'Intake', icon: Inbox },
  { to: stagePath(depositId, 'domains'), label: 'Domains', icon: Layers },
  { to: stagePath(depositId, 'releases'), label: 'Releases', icon: FileDown },
];

/** `g` then a digit goes to a stage by its number in the rail. */
function useStageCommands(depositId: number, keysInOrder: string): void {
  const navigate = useNavigate();
  useCommands(
    useMemo(() => {
      const isStage = (key: string): key is StageKey => Object.hasOwn(STAGE_NAMES, key);
      const stages = keysInOrder
        .split(' ')
        .filter(isStage)
        .map((key, index) => ({
          id: `stage-${key}`,
          label: `${index + 1} ${STAGE_NAMES[key]}`,
          group: 'Stages',
          ...(index < 9 ? { keys: `g ${index + 1}` } : index === 9 ? { keys: 'g 0' } : {}),
          run: () => void navigate(stagePath(depositId, key)),
        }));
      return [
        ...stages,
        {
          id: 'holes',
          label: 'Holes',
          group: 'Stages',
          words: ['collar', 'survey', 'plan', 'core'],
          run: () => void navigate(`/deposits/${depositId}/holes`),
        },
        {
          id: 'members',
          label: 'People and tokens',
          group: 'Stages',
          words: ['members', 'invite', 'api'],
          run: () => void navigate(`/deposits/${depositId}/members`),
        },
        {
          id: 'settings',
          label: 'Settings of the deposit',
          group: 'Stages',
          words: ['grid', 'units'],
          run: () => void navigate(`/deposits/${depositId}/settings`),
        },
      ];
    }, [depositId, keysInOrder, navigate]),
  );
}
