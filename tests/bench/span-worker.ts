import { logMomentsOfSpan, SPAN_ROWS, type LogMoments } from '#kernels/components/log-moments.ts';
import { scoreComponents } from '#kernels/components/scores.ts';
import type { Components } from '#kernels/components/components.ts';

/** A part of a table: every `threads`-th span of rows from number `thread` on. */
export interface SpanWork {
  columns: Float64Array[];
  thread: number;
  threads: number;
}

function spansOf({ columns, thread, threads }: SpanWork): number[] {
  const spans = Math.ceil((columns[0]?.length ?? 0) / SPAN_ROWS);
  return Array.from({ length: spans }, (_, span) => span).filter((span) => span % threads === thread);
}

/** Moments of the thread's spans, one after the other. */
export const moments = (work: SpanWork): { span: number; moments: LogMoments }[] =>
  spansOf(work).map((span) => ({ span, moments: logMomentsOfSpan(work.columns, span) }));

/** Scores of the thread's spans into shared arrays. */
export function scores({ components, out, ...work }: SpanWork & { components: Components; out: Float64Array[] }): void {
  const nRows = work.columns[0]?.length ?? 0;
  for (const span of spansOf(work)) {
    scoreComponents(work.columns, components, out.length, { out, from: span * SPAN_ROWS, to: Math.min((span + 1) * SPAN_ROWS, nRows) });
  }
}

