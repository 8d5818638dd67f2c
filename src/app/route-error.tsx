import { useEffect } from 'react';
import { isRouteErrorResponse, useRouteError } from 'react-router-dom';
import { Button, LinkButton } from '#src/components/ui/button.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { Absent } from '#src/lib/absent.ts';
import { hasStatus } from '#src/lib/api-problem.ts';

const isAbsent = (error: unknown): boolean =>
  hasStatus(error, 404) ||
  (isRouteErrorResponse(error) && error.status === 404) ||
  error instanceof Absent;

/** After a new release the page may ask for a file that is no more. */
const isOldPage = (error: unknown): boolean =>
  error instanceof TypeError && /dynamically imported module|module script/i.test(error.message);

/** What is shown where a whole page could not be. */
export function RouteError() {
  return (
    <main id="main" tabIndex={-1} className="px-5 py-6">
      <PageError />
    </main>
  );
}

/** The same inside a shell, whose bar and rail stay. */
export function PageError() {
  return <Failure error={useRouteError()} />;
}

/** An address that has no page. */
export function NothingHere() {
  return <Failure error={new Absent()} />;
}

function Failure({ error }: { error: unknown }) {
  const isMissing = isAbsent(error);
  useEffect(() => {
    document.title = isMissing ? 'Not here · Selvage' : 'Something failed · Selvage';
  }, [isMissing]);
  return (
    <div className="mx-auto grid w-full max-w-[36rem] gap-3 py-6">
      <h1 className="font-read text-title">
        {isMissing ? 'Nothing at this address' : 'This page could not be shown'}
      </h1>
      {isMissing ? (
        <p className="font-read text-finding text-ink-2">
          Expected a page or a deposit you belong to; found neither. It may have been removed, or
          the address is mistyped.
        </p>
      ) : isOldPage(error) ? (
        <p className="font-read text-finding text-ink-2">
          A newer version of Selvage has been put in place. Load the page again to use it.
        </p>
      ) : (
        <Problem error={error} />
      )}
      <div className="flex flex-wrap gap-2">
        {!isMissing && (
          <Button kind="main" onClick={() => window.location.reload()}>
            Load again
          </Button>
        )}
        <LinkButton to="/deposits">All deposits</LinkButton>
      </div>
    </div>
  );
}
