import { useId } from 'react';
import { poleOf } from '#kernels/geometry/planes.ts';
import { greatCircle } from '#kernels/orientation/projection.ts';
import { ChartFrame } from './chart-frame.tsx';
import { captionText, halo, LABEL_PX, strongLabel, tickText } from './chart-styles.ts';
import type { Box, ChartBasics } from './chart-types.ts';
import { coneCurves, kambContours, netPoint } from './stereonet-marks.ts';
import type { NetLine, Sureness } from './stereonet-marks.ts';
import { StereonetKey } from './stereonet-key.tsx';

export interface StereonetProps extends ChartBasics {
  /** Poles of planes, or lines. */
  lines: readonly NetLine[];
  /** Mean plane, degrees; its great circle is copper. */
  meanPlane?: { dip: number; dipDirection: number } | null;
  /** Half angle of the 95 % cone about the mean pole, degrees. */
  cone95?: number | null;
  /** Kamb contours at 2, 4, 6 … standard deviations. */
  contours?: boolean;
  hovered?: number | null;
  onHover?: (index: number | null) => void;
}

const KEY_PX = 136;
const KEY_ROW_PX = 18;

/** Equal-area net, lower half, with its key at the side where there is room, else below. */
export function Stereonet(props: StereonetProps) {
  return (
    <ChartFrame {...props} usualHeight={250}>
      {(box) => <Drawing box={box} props={props} />}
    </ChartFrame>
  );
}

/** Net and key: side by side in a wide box, one over the other in a narrow one. */
export function netLayout(box: Box): { radius: number; cx: number; cy: number; keyX: number; keyY: number } {
  const roomAside = Math.min(box.width - KEY_PX - 12, box.height);
  const roomAbove = Math.min(box.width, box.height - 5 * KEY_ROW_PX - 6);
  const aside = roomAside >= roomAbove;
  const radius = Math.max(30, Math.max(roomAside, roomAbove) / 2 - 20);
  const cx = aside ? radius + 14 : box.width / 2;
  const cy = aside ? box.height / 2 + 4 : radius + 20;
  return { radius, cx, cy, keyX: aside ? cx + radius + 24 : Math.max(8, (box.width - KEY_PX) / 2), keyY: aside ? cy - 36 : cy + radius + 16 };
}

function Drawing({ box, props }: { box: Box; props: StereonetProps }) {
  const { lines, meanPlane, cone95, contours = false, hovered, onHover } = props;
  const clip = useId();
  const { radius, cx, cy, keyX, keyY } = netLayout(box);
  const place = ({ trend, plunge }: { trend: number; plunge: number }) => {
    const [x, y] = netPoint(trend, plunge);
    return [cx + x * radius, cy - y * radius] as const;
  };
  const of = (sureness: Sureness) => lines.filter((line) => line.sureness === sureness).map(place);
  const circle = meanPlane ? greatCircle(meanPlane, 'equal-area') : null;
  const lit = hovered === undefined || hovered === null ? undefined : lines[hovered];
  const mean = meanPlane ? poleOf(meanPlane) : null;
  return (
    <g>
      <clipPath id={clip}>
        <circle cx={cx} cy={cy} r={radius} />
      </clipPath>
      <Net cx={cx} cy={cy} radius={radius} />
      {contours && (
        <g clipPath={`url(#${clip})`}>
          {kambContours(lines).map(({ level, d }) => (
            <path key={level} d={d} transform={`translate(${cx} ${cy}) scale(${radius})`} fill="var(--ink-3)" fillOpacity={0.12} fillRule="evenodd" stroke="var(--ink-3)" strokeWidth={0.8} vectorEffect="non-scaling-stroke" />
          ))}
        </g>
      )}
      <path d={of('unsure').map(([x, y]) => `M${x - 2.4} ${y - 2.4}l4.8 4.8M${x + 2.4} ${y - 2.4}l-4.8 4.8`).join('')} stroke="var(--ink-3)" strokeWidth={1.1} fill="none" />
      {of('moderate').map(([x, y], index) => (
        <circle key={index} cx={x} cy={y} r={2.1} fill="var(--sheet)" stroke="var(--ink-2)" strokeWidth={1} />
      ))}
      {of('sure').map(([x, y], index) => (
        <circle key={index} cx={x} cy={y} r={2.3} fill="var(--ink)" stroke="var(--sheet)" strokeWidth={0.5} />
      ))}
      {circle !== null && <path d={polyline(circle, cx, cy, radius)} fill="none" stroke="var(--copper)" strokeWidth={1.8} />}
      {mean !== null && <MeanPole at={place(mean)} />}
      {mean !== null &&
        cone95 !== undefined &&
        cone95 !== null &&
        coneCurves(mean, cone95).map((curve, index) => (
          <path key={index} d={`M${curve.map(([x, y]) => `${cx + x * radius} ${cy - y * radius}`).join('L')}`} fill="none" stroke="var(--copper)" strokeWidth={1.2} strokeDasharray="3 2" />
        ))}
      {lit !== undefined && <circle cx={place(lit)[0]} cy={place(lit)[1]} r={6} fill="none" stroke="var(--ink)" strokeWidth={1.6} />}
      <StereonetKey x={keyX} y={keyY} width={KEY_PX} lines={lines} meanPlane={meanPlane ?? null} cone95={cone95 ?? null} />
      {onHover !== undefined && (
        <circle
          data-screen-only=""
          cx={cx}
          cy={cy}
          r={radius}
          fill="transparent"
          onPointerLeave={() => onHover(null)}
          onPointerMove={(event) => {
            const rect = event.currentTarget.getBoundingClientRect();
            const at = [event.clientX - rect.left + cx - radius, event.clientY - rect.top + cy - radius] as const;
            onHover(nearest(lines.map(place), at));
          }}
        />
      )}
      {lines.length === 0 && (
        <text x={cx} y={cy} textAnchor="middle" style={{ ...captionText, ...halo }}>
          No readings.
        </text>
      )}
    </g>
  );
}

function nearest(places: readonly (readonly [number, number])[], [x, y]: readonly [number, number]): number | null {
  let best = 12;
  let found: number | null = null;
  for (const [index, [px, py]] of places.entries()) {
    const apart = Math.hypot(px - x, py - y);
    if (apart < best) [best, found] = [apart, index];
  }
  return found;
}

function polyline(points: Float64Array, cx: number, cy: number, radius: number): string {
  const parts: string[] = [];
  for (let i = 0; i + 1 < points.length; i += 2) parts.push(`${(cx + (points[i] ?? 0) * radius).toFixed(1)} ${(cy - (points[i + 1] ?? 0) * radius).toFixed(1)}`);
  return `M${parts.join('L')}`;
}

function MeanPole({ at: [x, y] }: { at: readonly [number, number] }) {
  return <path d={`M${x - 4.5} ${y}h9M${x} ${y - 4.5}v9`} stroke="var(--copper)" strokeWidth={1.8} style={{ ...halo, strokeWidth: 1.8, stroke: 'var(--copper)' }} />;
}

/** Rim, circles of 30 and 60 degrees of plunge, ticks each 30 degrees, N and E. */
function Net({ cx, cy, radius }: { cx: number; cy: number; radius: number }) {
  const inner = [30, 60].map((plunge) => radius * Math.SQRT2 * Math.sin(((90 - plunge) * Math.PI) / 360));
  return (
    <g>
      <line x1={cx - radius} x2={cx + radius} y1={cy} y2={cy} stroke="var(--rule)" strokeWidth={0.75} />
      <line x1={cx} x2={cx} y1={cy - radius} y2={cy + radius} stroke="var(--rule)" strokeWidth={0.75} />
      {inner.map((r) => (
        <circle key={r} cx={cx} cy={cy} r={r} fill="none" stroke="var(--rule)" strokeWidth={0.75} />
      ))}
      <circle cx={cx} cy={cy} r={radius} fill="none" stroke="var(--ink-2)" strokeWidth={1.2} />
      {Array.from({ length: 12 }, (_value, i) => {
        const angle = (i * Math.PI) / 6;
        const long = i % 3 === 0 ? 5 : 3;
        return (
          <line
            key={i}
            x1={cx + radius * Math.sin(angle)}
            y1={cy - radius * Math.cos(angle)}
            x2={cx + (radius + long) * Math.sin(angle)}
            y2={cy - (radius + long) * Math.cos(angle)}
            stroke="var(--ink-2)"
          />
        );
      })}
      <text x={cx} y={cy - radius - 8} textAnchor="middle" style={strongLabel}>
        N
      </text>
      <text x={cx + radius + 8} y={cy} dy="0.35em" style={{ ...tickText, fontSize: LABEL_PX }}>
        E
      </text>
    </g>
  );
}
