import { Outlet } from 'react-router-dom';
import { OfflineLine } from './offline-line.tsx';
import { SkipLink, TopBar } from './top-bar.tsx';
import { useFocusOnMove } from './use-focus-on-move.ts';

/** Pages that belong to no deposit. */
export function PlainShell() {
  const main = useFocusOnMove();
  return (
    <div className="flex min-h-dvh flex-col">
      <SkipLink />
      <TopBar />
      <OfflineLine />
      <main
        ref={main}
        id="main"
        tabIndex={-1}
        className="mx-auto w-full max-w-[72rem] flex-1 px-5 pt-5 pb-10 max-md:px-4"
      >
        <Outlet />
      </main>
    </div>
  );
}
