import { formatTime } from '#src/lib/format-dates.ts';
import { useOfflineSince } from '#src/lib/online.ts';

/** Says since when there is no network; what is typed stays. */
export function OfflineLine() {
  const since = useOfflineSince();
  if (!since) return null;
  return (
    <p
      role="status"
      className="hatch border-b border-warn bg-warn-wash px-5 py-1 text-small text-warn [--hatch:transparent]"
    >
      No network since {formatTime(since)}. What is on the page stays; reading goes on by itself
      when it is back.
    </p>
  );
}
