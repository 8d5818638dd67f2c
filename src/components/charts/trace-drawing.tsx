import { slotColours } from './category-marks.tsx';
import { captionText, halo, LABEL_PX, TICK_PX, tickText } from './chart-styles.ts';
import { isPicked } from './chart-types.ts';
import type { PickedRows } from './chart-types.ts';
import { pickedMiddles } from './hole-geometry.ts';
import type { AxisReading, HoleTrace, PaintKey } from './hole-geometry.ts';
import { placeLabels } from './label-placement.ts';
import { textWidth } from './text-width.ts';
import { coordinateLabel, linearTicks } from './ticks.ts';
import type { TickRoom } from './ticks.ts';
import { scaleBarM, shortNames } from './trace-scene.ts';
import type { Flat, Scene, TracePlaces } from './trace-scene.ts';

/** What a plan or section shows beside its holes, in metres of the scene. */
export interface TraceExtras {
  xAxis: AxisReading;
  yAxis: AxisReading;
  /** Faults (dash and dot) and the ground (solid). */
  lines: readonly { label: string; points: readonly Flat[]; kind: 'fault' | 'ground' }[];
  /** Site checks and the like: a triangle. */
  flags: readonly { label: string; at: Flat }[];
  strokePx: number;
  /** Vertical over horizontal scale. */
  exaggeration: number;
}

interface Props {
  scene: Scene;
  holes: readonly HoleTrace[];
  extras: TraceExtras;
  places: TracePlaces;
  clip: string;
  lit: string | null;
  selected?: PickedRows | undefined;
  hovered?: number | null | undefined;
  selectedHoles?: ReadonlySet<string> | undefined;
  placeOf: (hole: HoleTrace, depthM: number) => Flat | null;
}

/** Stroke of a painted stretch: edge below, fill above, a broken line of the sheet for hollow slots. */
function strokesOf(key: PaintKey): { edge: string; fill: string; hollow: boolean } {
  const [kind, number] = key.split('-');
  if (kind === 'slot') return slotColours(Number(number));
  if (kind === 'stop') return { edge: 'var(--ink-3)', fill: `var(--s${number})`, hollow: false };
  return { edge: 'var(--rule-firm)', fill: 'var(--sheet)', hollow: false };
}

export function TraceDrawing(props: Props) {
  const { scene, holes, extras, places, clip, selected, hovered, selectedHoles, lit, placeOf } = props;
  const { area, zoom } = places;
  const moved = `translate(${area.left + zoom.x} ${area.top + zoom.y}) scale(${zoom.k}) translate(${-area.left} ${-area.top})`;
  const pathOf = (lines: readonly (readonly Flat[])[]) =>
    lines.map((line) => `M${line.map(([x, y]) => `${places.base.x(x).toFixed(2)} ${places.base.y(y).toFixed(2)}`).join('L')}`).join('');
  const marked = selected === undefined && (hovered === undefined || hovered === null) ? [] : holes;
  const ring = (hole: HoleTrace, depthM: number) => {
    const at = placeOf(hole, depthM);
    return at === null ? null : ([places.x(at[0]), places.y(at[1])] as const);
  };
  return (
    <g>
      <clipPath id={clip}>
        <rect x={area.left} y={area.top} width={area.width} height={area.height} />
      </clipPath>
      <Grid {...props} />
      <g clipPath={`url(#${clip})`}>
        <g transform={moved} fill="none" strokeLinejoin="round">
          <path d={pathOf(scene.traces)} stroke="var(--ink-3)" strokeWidth={1} vectorEffect="non-scaling-stroke" />
          {scene.runs.map(({ key, lines }) => {
            const { edge, fill, hollow } = strokesOf(key);
            const d = pathOf(lines);
            return (
              <g key={key}>
                <path d={d} stroke={edge} strokeWidth={extras.strokePx} vectorEffect="non-scaling-stroke" />
                <path d={d} stroke={fill} strokeWidth={extras.strokePx - 1.4} vectorEffect="non-scaling-stroke" />
                {hollow && <path d={d} stroke="var(--sheet)" strokeWidth={extras.strokePx - 1.4} strokeDasharray="2.5 2.5" vectorEffect="non-scaling-stroke" />}
              </g>
            );
          })}
          {extras.lines.map(({ label, points, kind }) => (
            <path key={label} d={pathOf([points])} stroke={kind === 'fault' ? 'var(--ink-2)' : 'var(--ink-3)'} strokeWidth={1.3} strokeDasharray={kind === 'fault' ? '8 3 1.5 3' : undefined} vectorEffect="non-scaling-stroke" />
          ))}
        </g>
        {scene.heads.map(({ name, at: [x, y] }) => (
          <circle key={name} cx={places.x(x)} cy={places.y(y)} r={2.6} fill="var(--ink)" />
        ))}
        {extras.flags.map(({ label, at: [x, y] }) => (
          <path key={label} d={`M${places.x(x)} ${places.y(y) - 5.5}l5 9h-10z`} fill="var(--warn-wash)" stroke="var(--warn)" strokeWidth={1.3} />
        ))}
        {marked.flatMap((hole) =>
          pickedMiddles(hole.intervals, (row) => isPicked(selected, row)).map((depth) => {
            const at = ring(hole, depth);
            return at && <circle key={`${hole.name} ${depth}`} cx={at[0]} cy={at[1]} r={5.5} fill="none" stroke="var(--copper)" strokeWidth={1.6} />;
          }),
        )}
        {marked.flatMap((hole) =>
          pickedMiddles(hole.intervals, (row) => row === hovered).map((depth) => {
            const at = ring(hole, depth);
            return at && <circle key={`${hole.name} lit`} data-screen-only="" cx={at[0]} cy={at[1]} r={7} fill="none" stroke="var(--ink)" strokeWidth={1.6} />;
          }),
        )}
      </g>
      <Heads scene={scene} places={places} extras={extras} lit={lit} selectedHoles={selectedHoles} />
      <ScaleBar places={places} exaggeration={extras.exaggeration} />
    </g>
  );
}

/** Coordinates at the foot and the left, with a pale grid. */
function Grid({ places, extras }: Props) {
  const { area } = places;
  const [bottom, right] = [area.top + area.height, area.left + area.width];
  const xTicks = readings(extras.xAxis, places.x, area.left, right, { lengthPx: area.width });
  const yTicks = readings(extras.yAxis, places.y, bottom, area.top, { lengthPx: area.height, vertical: true });
  return (
    <g>
      {xTicks.map(({ value, label }) => {
        const half = textWidth(label, TICK_PX) / 2;
        const middle = Math.min(right + 8 - half, Math.max(area.left - 40 + half, places.x(value)));
        return (
          <g key={value}>
            <line x1={places.x(value)} x2={places.x(value)} y1={area.top} y2={bottom} stroke="var(--rule)" strokeWidth={0.75} opacity={0.75} />
            <text x={middle} y={bottom + 15} textAnchor="middle" style={tickText}>
              {label}
            </text>
          </g>
        );
      })}
      {yTicks.map(({ value, label }) => (
        <g key={value}>
          <line x1={area.left} x2={right} y1={places.y(value)} y2={places.y(value)} stroke="var(--rule)" strokeWidth={0.75} opacity={0.75} />
          <text x={area.left - 5} y={places.y(value)} dy="0.35em" textAnchor="end" style={tickText}>
            {label}
          </text>
        </g>
      ))}
    </g>
  );
}

/** Round coordinates along one axis, each with its place in metres of the scene. */
function readings({ word, start, sign }: AxisReading, at: (metres: number) => number, from: number, to: number, room: TickRoom) {
  const unit = at(1) - at(0);
  const ends = [from, to].map((px) => start + (sign * (px - at(0))) / unit).sort((a, b) => a - b);
  const label = (coordinate: number) => `${coordinateLabel(coordinate)}${word}`;
  return linearTicks([ends[0] ?? 0, ends[1] ?? 1], { ...room, most: 6, label }).map((tick) => ({ label: tick.label, value: (tick.value - start) * sign }));
}

type HeadsProps = Pick<Props, 'scene' | 'places' | 'extras' | 'lit' | 'selectedHoles'>;

/** More holes than this in view: only the chosen are named, the rest by pointer. */
const MOST_NAMES = 24;

/** Hole names above their collars, as many as keep clear of each other. */
function Heads({ scene, places, extras, lit, selectedHoles }: HeadsProps) {
  const { area } = places;
  const room = { x: area.left - 20, y: 0, width: area.width + 28, height: area.top + area.height };
  const inView = ([x, y]: Flat) => {
    const [px, py] = [places.x(x), places.y(y)];
    return px >= area.left && px <= area.left + area.width && py >= area.top - 4 && py <= area.top + area.height;
  };
  const isStrong = (name: string) => name === lit || selectedHoles?.has(name) === true;
  const inside = scene.heads.filter(({ at }) => inView(at));
  const names = inside.length > MOST_NAMES ? inside.filter(({ name }) => isStrong(name)) : inside;
  const short = shortNames(inside.map(({ name }) => name));
  const word = (name: string) => short.get(name) ?? name;
  const flags = extras.flags.filter(({ at }) => inView(at));
  const placed = placeLabels(
    names.map(({ name, at: [x, y] }) => ({
      id: name,
      x: places.x(x),
      y: places.y(y),
      width: textWidth(word(name), TICK_PX, isStrong(name) ? 'bold' : 'plain') + 3,
      height: 13,
      weight: isStrong(name) ? 2 : 1,
      turns: isStrong(name) ? 4 : 1,
    })),
    room,
    [
      ...names.map(({ at: [x, y] }) => ({ x: places.x(x) - 2, y: places.y(y) - 2, width: 4, height: 4 })),
      ...flags.map(({ at: [x, y] }) => ({ x: places.x(x) - 6, y: places.y(y) - 6, width: 12, height: 12 })),
    ],
  );
  return (
    <g>
      {names
        .filter(({ name }) => isStrong(name))
        .map(({ name, at: [x, y] }) => (
          <circle key={name} cx={places.x(x)} cy={places.y(y)} r={5} fill="none" stroke="var(--copper)" strokeWidth={1.6} />
        ))}
      {placed.map(({ id, x, y }) => (
        <text key={id} x={x} y={y} dy="0.35em" textAnchor="middle" style={{ ...tickText, ...halo, fill: 'var(--ink-2)', ...(isStrong(id) ? { fontWeight: 600, fill: 'var(--ink)' } : {}) }}>
          {word(id)}
        </text>
      ))}
    </g>
  );
}

function ScaleBar({ places, exaggeration }: { places: TracePlaces; exaggeration: number }) {
  const perM = places.base.scale * places.zoom.k;
  const metres = scaleBarM(perM);
  const right = places.area.left + places.area.width - 2;
  const y = places.area.top + places.area.height - 7;
  const left = right - metres * perM;
  return (
    <g>
      <path d={`M${left} ${y - 4}v4H${right}v-4`} fill="none" stroke="var(--ink-2)" strokeWidth={1.3} />
      <text x={right} y={y - 6} textAnchor="end" style={{ ...captionText, ...halo, fontSize: LABEL_PX - 1, fill: 'var(--ink-2)' }}>
        {metres >= 1 ? metres : metres.toPrecision(1)} m{exaggeration === 1 ? '' : `, V = ${exaggeration} H`}
      </text>
    </g>
  );
}
