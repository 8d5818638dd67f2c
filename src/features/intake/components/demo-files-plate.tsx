import { useQuery } from '@tanstack/react-query';
import { downloadDemoFile } from '#contract/files.ts';
import { Plate } from '#src/components/ui/plate.tsx';
import { endpointUrl } from '#src/lib/api-client.ts';
import { countOf, formatBytes } from '#src/lib/format.ts';
import { demoFilesQuery } from '../api/intake-queries.ts';

/** Invented tables to try intake with; only where the instance has them. */
export function DemoFilesPlate() {
  const { data: files = [] } = useQuery(demoFilesQuery());
  if (files.length === 0) return null;
  return (
    <Plate title="Demonstration tables" qualifier="invented data" caption="Take them down, then bring them in as if they were yours. Some rows are wrong on purpose.">
      <ul className="m-0 grid list-none p-0">
        {files.map(({ name, rows, sizeBytes }) => (
          <li key={name} className="flex flex-wrap items-baseline gap-x-2 border-b border-rule py-1 text-small last:border-0">
            <a href={endpointUrl(downloadDemoFile, { params: { name } })} download className="min-w-0 flex-1 font-mono text-caption break-all">{name}</a>
            <span className="text-caption text-ink-3">{countOf(rows, 'row')}, {formatBytes(sizeBytes)}</span>
          </li>
        ))}
      </ul>
    </Plate>
  );
}
