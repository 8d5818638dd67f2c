import { TABLE_KINDS, type Revision, type Upload } from '#contract/files.ts';
import type { Snapshot } from '#contract/snapshots.ts';
import { countOf, formatCount } from '#src/lib/format.ts';
import { KIND_NAMES } from './kinds.ts';
import { attentionOf, isWaiting, revisionInForce } from './load-plan.ts';

const listed = (words: readonly string[]): string =>
  words.length < 2 ? words.join('') : `${words.slice(0, -1).join(', ')} and ${words.at(-1) ?? ''}`;

function filesSentence(uploads: readonly Upload[]): string {
  const waiting = uploads.filter(isWaiting);
  const wanting = waiting.filter((upload) => attentionOf(upload) !== null).length;
  if (waiting.length === 0) return 'No file waits.';
  const wait = `${countOf(waiting.length, 'file')} ${waiting.length === 1 ? 'waits' : 'wait'} to be loaded`;
  return wanting === 0 ? `${wait}.` : `${wait}; ${waiting.length === 1 ? 'it' : formatCount(wanting)} ${wanting === 1 ? 'needs' : 'need'} a look first.`;
}

/** How intake stands, in two sentences: what is in force, what lacks, what waits. */
export function intakeFinding(uploads: readonly Upload[], revisions: readonly Revision[], answer: { snapshot: Snapshot | null; assembling: boolean } | undefined): string {
  const lacking = TABLE_KINDS.filter((kind) => !revisionInForce(revisions, kind));
  const aside = revisions.filter(({ isCurrent }) => isCurrent).reduce((sum, { rowsAside }) => sum + rowsAside, 0);
  const files = filesSentence(uploads);
  if (lacking.length === TABLE_KINDS.length) {
    if (uploads.some(isWaiting)) return `${files} Nothing is in force yet.`;
    return 'Nothing is loaded yet. Collars, surveys and assays come first; logs, structures and faults make them readable.';
  }
  if (answer?.assembling) return `The tables just loaded are being put together. ${files}`;
  const rest = lacking.length === 0 ? 'Every kind of table is in force' : `In force: ${formatCount(TABLE_KINDS.length - lacking.length)} of ${formatCount(TABLE_KINDS.length)} kinds of table; without ${listed(lacking.map((kind) => KIND_NAMES[kind]))}`;
  const kept = aside === 0 ? 'no row was set aside' : `${countOf(aside, 'row')} of their files ${aside === 1 ? 'was' : 'were'} set aside and can be read`;
  return `${rest}; ${kept}. ${files}`;
}
