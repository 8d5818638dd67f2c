import { useId } from 'react';
import { formatShare } from '#src/lib/format.ts';
import { rockFill, RockPatternDefs, type RockPattern } from '../charts/rock-patterns.tsx';
import { useBox } from '../charts/use-box.ts';

interface Part {
  /** Null: not logged. */
  code: string | null;
  share: number;
}

interface Props {
  label: string;
  parts: readonly Part[];
  patterns: ReadonlyMap<string, RockPattern | null>;
}

const HEIGHT = 12;

/** Shares of logged rock as a thin run of patterned core; what is not logged stays bare. */
export function RockRun({ label, parts, patterns }: Props) {
  const prefix = useId();
  const [measure, box] = useBox({ width: 160, height: HEIGHT });
  const shown = parts.flatMap(({ code }) => (code === null ? [] : [patterns.get(code) ?? null])).filter((pattern) => pattern !== null);
  const words = parts.map(({ code, share }) => `${code ?? 'not logged'} ${formatShare(share)}`).join(', ');
  const startOf = (index: number) => parts.slice(0, index).reduce((sum, { share }) => sum + share, 0);
  return (
    <div ref={measure} className="min-w-24" title={words}>
      <svg role="img" aria-label={`${label}: ${words}`} width={box.width} height={HEIGHT} className="block">
        <RockPatternDefs prefix={prefix} patterns={[...new Set(shown)]} />
        <rect x={0.3} y={0.3} width={box.width - 0.6} height={HEIGHT - 0.6} fill="var(--trough)" stroke="var(--trough-deep)" strokeWidth={0.6} />
        {parts.map(({ code, share }, index) => {
          const width = Math.max(0, share * box.width - 0.6);
          return code === null || width < 0.5 ? null : (
            <rect key={code} x={0.3 + startOf(index) * box.width} y={0.3} width={width} height={HEIGHT - 0.6} fill={rockFill(patterns.get(code) ?? null, prefix)} stroke="var(--rock-mark)" strokeWidth={0.6} />
          );
        })}
      </svg>
    </div>
  );
}
