import { Link } from 'react-router-dom';
import { LinkButton } from '#src/components/ui/button.tsx';
import { PageHead } from '#src/components/layout/page-head.tsx';
import { Brand } from '#src/components/layout/mark.tsx';
import { Mailbox } from '#src/features/auth/components/mailbox.tsx';

/** Reached before sign-in too: an invitation is read here first. */
export function MailboxPage() {
  return (
    <>
      <header className="ruler-edge relative flex h-[46px] items-center border-b border-rule-firm bg-sheet px-3.5">
        <Link to="/deposits" aria-label="Selvage, all deposits" className="no-underline">
          <Brand />
        </Link>
      </header>
      <main id="main" tabIndex={-1} className="mx-auto max-w-[54rem] px-5 pt-5 pb-10 max-md:px-4">
        <PageHead
          title="Mailbox of the demonstration"
          finding="Nothing leaves this instance: every message it would send is kept here."
          actions={<LinkButton to="/deposits">Back to the deposits</LinkButton>}
        />
        <Mailbox />
      </main>
    </>
  );
}
