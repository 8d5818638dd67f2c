import { useId } from 'react';
import { XAxis, YAxis, ZeroLine } from './axes.tsx';
import { axisTitle } from './chart-styles.ts';
import { contourPath } from './scatter-density.ts';
import { toShare } from './scatter-points.ts';
import { rayFactor, Rays } from './scatter-rays.tsx';
import type { Ray } from './scatter-rays.tsx';
import type { ScatterState } from './use-scatter.ts';

interface Props {
  state: ScatterState;
  xLabel: string;
  yLabel: string;
  rays?: readonly Ray[] | undefined;
  /** Lasso or box under way. */
  outline: readonly (readonly [number, number])[];
}

/** Everything of a scatter that is not a point: axes, zero lines, contours, rays, lasso, hover ring. */
export function ScatterDrawing({ state, xLabel, yLabel, rays = [], outline }: Props) {
  const { view, points, xKind, yKind, contours, hovered } = state;
  const { area } = view;
  const clip = useId();
  const at = {
    x: (value: number) => view.x(toShare(value, xKind, points.xDomain)),
    y: (value: number) => view.y(toShare(value, yKind, points.yDomain)),
  };
  const hoverAt = hovered === null ? null : state.placeOf(hovered);
  return (
    <g>
      <clipPath id={clip}>
        <rect x={area.left} y={area.top} width={area.width} height={area.height} />
      </clipPath>
      <XAxis area={area} ticks={state.xTicks} at={at.x} grid={false} label={xLabel} />
      <YAxis area={area} ticks={state.yTicks} at={at.y} grid={false} label={yLabel} />
      {xKind === 'linear' && <ZeroLine area={area} at={at.x(0)} along="x" />}
      {yKind === 'linear' && <ZeroLine area={area} at={at.y(0)} along="y" />}
      <g clipPath={`url(#${clip})`}>
        {contours.map((contour) => (
          <path key={contour.value} d={contourPath(contour, view)} fill="none" stroke="var(--ink)" strokeWidth={0.9} opacity={0.7} />
        ))}
        {rays.length > 0 && (
          <Rays
            rays={rays}
            at={at}
            factor={rayFactor(rays, points)}
            room={{ x: area.left, y: area.top, width: area.width, height: area.height }}
          />
        )}
        {outline.length > 1 && (
          <polygon
            data-screen-only=""
            points={outline.map((point) => point.join(',')).join(' ')}
            fill="var(--copper)"
            fillOpacity={0.09}
            stroke="var(--copper)"
            strokeWidth={1.5}
            strokeDasharray="5 3"
          />
        )}
      </g>
      {hoverAt !== null && (
        <circle data-screen-only="" cx={hoverAt.x} cy={hoverAt.y} r={6} fill="none" stroke="var(--ink)" strokeWidth={1.6} />
      )}
      {points.rows.length === 0 && (
        <text x={area.left + area.width / 2} y={area.top + area.height / 2} textAnchor="middle" style={axisTitle}>
          No row has both values.
        </text>
      )}
    </g>
  );
}
