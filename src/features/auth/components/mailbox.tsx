import { useQuery } from '@tanstack/react-query';
import { readMailbox } from '#contract/health.ts';
import { Empty } from '#src/components/ui/empty.tsx';
import { Loading } from '#src/components/ui/loading.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { call } from '#src/lib/api-client.ts';
import { formatInstant } from '#src/lib/format-dates.ts';

/** A message's text with its links live; only addresses of this very instance. */
function LinkedText({ text }: { text: string }) {
  return text.split(/(https?:\/\/[^\s<>"]+)/).map((part, index) => {
    if (index % 2 === 0) return part;
    const isOurs = part.startsWith(`${window.location.origin}/`);
    return isOurs ? (
      <a key={index} href={part}>
        {part}
      </a>
    ) : (
      <span key={index}>{part}</span>
    );
  });
}

/** What the built-in mail server of a demonstration caught, newest first. */
export function Mailbox() {
  const {
    data: messages,
    error,
    refetch,
  } = useQuery({
    queryKey: ['mailbox'],
    queryFn: ({ signal }) => call(readMailbox, {}, signal),
    refetchInterval: 5000,
    staleTime: 0,
  });
  if (error)
    return <Problem error={error} action={{ label: 'Try again', run: () => void refetch() }} />;
  if (!messages) return <Loading label="Reading the mailbox" />;
  if (messages.length === 0)
    return (
      <Empty>
        Invitations, password links and handovers sent by this demonstration arrive here. None has
        been sent yet.
      </Empty>
    );
  return (
    <ol className="m-0 grid list-none gap-3 p-0">
      {messages.map(({ id, at, to, subject, text }) => (
        <li
          key={id}
          className="rounded-b-2 border border-t-2 border-rule border-t-ink-3 bg-sheet px-3 py-2"
        >
          <h2 className="text-body font-semibold">{subject}</h2>
          <p className="text-caption text-ink-3">
            to {to}, {formatInstant(at)}
          </p>
          <p className="mt-2 max-w-[44rem] text-body wrap-anywhere whitespace-pre-wrap">
            <LinkedText text={text} />
          </p>
        </li>
      ))}
    </ol>
  );
}
