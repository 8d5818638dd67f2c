import { markPaint, markPath } from './category-marks.tsx';
import { axisTitle, LABEL_PX } from './chart-styles.ts';
import type { Category } from './chart-types.ts';
import { fitText } from './text-width.ts';

interface Props {
  category: Category | undefined;
  height: number;
  maxPx: number;
  isChosen: boolean;
  onClick: (() => void) | undefined;
}

/** A group's mark and name at the head of its row; a button where the row can be chosen. */
export function CategoryHead({ category, height, maxPx, isChosen, onClick }: Props) {
  if (category === undefined) return null;
  const button =
    onClick === undefined
      ? {}
      : {
          role: 'button',
          tabIndex: 0,
          'aria-pressed': isChosen,
          'aria-label': `Take group ${category.label}`,
          onClick,
          onKeyDown: (event: { key: string }) => {
            if (event.key === 'Enter') onClick();
          },
        };
  return (
    <g {...button} style={{ cursor: onClick === undefined ? 'default' : 'pointer' }}>
      <rect x={0} y={0} width={maxPx + 20} height={height} fill="transparent" />
      {isChosen && <rect x={0} y={1} width={2.5} height={height - 2} fill="var(--copper)" />}
      <path d={markPath(category.slot, 4.4)} transform={`translate(9 ${height / 2})`} {...markPaint(category.slot)} />
      <text x={19} y={height / 2} dy="0.34em" style={{ ...axisTitle, ...(isChosen ? { fontWeight: 600 } : {}) }}>
        {fitText(category.label, maxPx, LABEL_PX)}
      </text>
    </g>
  );
}
