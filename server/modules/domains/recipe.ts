import { createHash } from 'node:crypto';
import type { Domain } from '#contract/domains.ts';

/** What the codes of a deposit stand on: the grouping and, per domain, code and groups. Names and colours do not change codes. */
export function recipeSha256(domains: readonly Pick<Domain, 'code' | 'groupingId' | 'groupLabels'>[]): string {
  const lines = domains.map(({ code, groupingId, groupLabels }) => `${code}=${groupingId}:${groupLabels.join('+')}`).sort();
  return createHash('sha256').update(lines.join('\n')).digest('hex');
}
