import type { Screen, Subset } from '#contract/screens.ts';
import { CategoryMark } from '#src/components/charts/category-marks.tsx';
import { VerdictCell } from '#src/components/ui/verdict-mark.tsx';
import { formatCount } from '#src/lib/format.ts';
import { byKind, KIND_HEADINGS, rowOf } from '../model.ts';

interface Props {
  screen: Screen;
  picked: { subset: string; variable: string };
  onPick: (subset: string, variable: string) => void;
}

/** Subset × variable: the map of the page. Each cell is pressed to draw it. */
export function VerdictMatrix({ screen, picked, onPick }: Props) {
  return (
    <div className="scroll-edge max-h-[max(26rem,calc(100dvh-24rem))] overflow-auto">
      <table className="w-full border-separate border-spacing-x-[3px] border-spacing-y-0">
        <caption className="sr-only">Mixing verdict of each variable in each subset</caption>
        <thead className="sticky top-0 z-10 bg-sheet text-caption text-ink-2">
          <tr>
            <th scope="col" className="py-1 pl-1 text-left font-semibold">Subset</th>
            <th scope="col" className="px-2 py-1 text-right font-semibold">n</th>
            {screen.variables.map((variable) => (
              <th key={variable} scope="col" className="py-1 text-center font-semibold">{variable}</th>
            ))}
          </tr>
        </thead>
        {byKind(screen.subsets).map(({ kind, subsets }) => (
          <tbody key={kind}>
            {kind !== 'all' && (
              <tr>
                <th scope="rowgroup" colSpan={2 + screen.variables.length} className="border-b border-rule pt-3 pb-0.5 pl-1 text-left text-caption font-semibold text-ink-3">
                  {KIND_HEADINGS[kind]}
                </th>
              </tr>
            )}
            {subsets.map((subset) => (
              <MatrixRow key={subset.key} screen={screen} subset={subset} picked={picked} onPick={onPick} />
            ))}
          </tbody>
        ))}
      </table>
    </div>
  );
}

function MatrixRow({ screen, subset, picked, onPick }: Props & { subset: Subset }) {
  return (
    <tr>
      <th scope="row" className="border-b border-rule py-[3px] pl-1 text-left text-small font-medium">
        <span className="flex items-center gap-1.5">
          {subset.slot !== null && <CategoryMark slot={subset.slot} size={11} />}
          <span className="max-w-[12rem] truncate" title={subset.label}>{subset.label}</span>
        </span>
      </th>
      <td className="border-b border-rule px-2 text-right text-small text-ink-2 tabular-nums">{formatCount(subset.n)}</td>
      {rowOf(screen, subset).map((cell, i) => {
        const variable = screen.variables[i] ?? '';
        return (
          <td key={variable} className="border-b border-rule py-[3px] text-center">
            {cell && (
              <VerdictCell
                verdict={cell.verdict}
                label={`${variable} in ${subset.label}`}
                isPressed={picked.subset === subset.key && picked.variable === variable}
                onPress={() => onPick(subset.key, variable)}
              />
            )}
          </td>
        );
      })}
    </tr>
  );
}
