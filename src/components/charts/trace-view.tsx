import { useId, useMemo, useState } from 'react';
import type { KeyboardEvent, ReactNode } from 'react';
import { ChartFrame } from './chart-frame.tsx';
import { ChartTooltip } from './chart-tooltip.tsx';
import { selectMode } from './chart-types.ts';
import type { ChartBasics, PickedRows, RowTooltip, SelectMode } from './chart-types.ts';
import type { HoleTrace } from './hole-geometry.ts';
import { TraceDrawing } from './trace-drawing.tsx';
import type { TraceExtras } from './trace-drawing.tsx';
import { extentOf, fitExtent, nearestMiddle } from './trace-scene.ts';
import type { Flat, Scene, TracePlaces } from './trace-scene.ts';
import { useBox } from './use-box.ts';
import { useZoom } from './use-zoom.ts';
import type { Zoom } from './use-zoom.ts';

/** Props a plan and a section share. */
export interface TraceBasics extends ChartBasics {
  holes: readonly HoleTrace[];
  selected?: PickedRows;
  hovered?: number | null;
  onHover?: (row: number | null) => void;
  tooltip?: RowTooltip;
  selectedHoles?: ReadonlySet<string>;
  /** A click on a hole, or Enter on the one stepped to. */
  onHole?: (name: string, mode: SelectMode) => void;
  /** Below the drawing: the key of colours. */
  foot?: ReactNode;
}

interface Props extends TraceBasics {
  scene: Scene;
  extras: TraceExtras;
  usualHeight: number;
  /** Place of a row, for the ring about a hovered or chosen interval. */
  placeOf: (hole: HoleTrace, depthM: number) => Flat | null;
}

const REACH_PX = 12;
const PAD = { left: 44, right: 10, top: 20, bottom: 24 };

/** Place under the pointer, in metres of the scene. */
function metresAt(places: TracePlaces, px: number, py: number): Flat {
  const unit = (low: number, high: number, at: number) => (at - low) / (high - low);
  return [unit(places.x(0), places.x(1), px), unit(places.y(0), places.y(1), py)];
}

/** Holes on a plan or a section: pan, zoom, hover an interval, take a hole. */
export function TraceView(props: Props) {
  const { scene, extras, usualHeight } = props;
  const [lit, setLit] = useState<string | null>(null);
  const clip = useId();
  const measured = useBox({ width: 420, height: typeof props.height === 'number' ? props.height : usualHeight });
  const box = measured[1];
  const [width, height] = [Math.max(20, box.width - PAD.left - PAD.right), Math.max(20, box.height - PAD.top - PAD.bottom)];
  const zoom = useZoom({ width, height, panning: true, most: 200 });
  const { k, x: shiftX, y: shiftY } = zoom.transform;
  const places = useMemo((): TracePlaces => {
    const area = { left: PAD.left, top: PAD.top, width, height };
    const all = extentOf([scene.extent.low, scene.extent.high, ...extras.lines.flatMap(({ points }) => points)]);
    const base = fitExtent(all, area, extras.exaggeration);
    return {
      area,
      base,
      zoom: { k, x: shiftX, y: shiftY },
      x: (metres) => PAD.left + shiftX + k * (base.x(metres) - PAD.left),
      y: (metres) => PAD.top + shiftY + k * (base.y(metres) - PAD.top),
    };
  }, [scene, extras, width, height, k, shiftX, shiftY]);
  return (
    <ChartFrame
      {...props}
      measured={measured}
      over={() => <Pointer props={props} places={places} zoom={zoom} lit={lit} onLit={setLit} box={box} />}
      foot={props.foot}
    >
      {() => <TraceDrawing {...props} places={places} clip={clip} lit={lit} />}
    </ChartFrame>
  );
}

interface PointerProps {
  props: Props;
  places: TracePlaces;
  zoom: Zoom;
  lit: string | null;
  onLit: (name: string | null) => void;
  box: { width: number; height: number };
}

function Pointer({ props, places, zoom, lit, onLit, box }: PointerProps) {
  const { scene, hovered, tooltip, onHole } = props;
  const [at, setAt] = useState<{ x: number; y: number } | null>(null);
  const { attach } = zoom;
  const { left, top, width, height } = places.area;
  const under = (event: { clientX: number; clientY: number; currentTarget: Element }) => {
    const rect = event.currentTarget.getBoundingClientRect();
    const [px, py] = [event.clientX - rect.left + left, event.clientY - rect.top + top];
    const [x, y] = metresAt(places, px, py);
    return { px, py, found: nearestMiddle(scene, x, y, REACH_PX / (places.base.scale * places.zoom.k)) };
  };
  const step = (by: number) => {
    const names = scene.heads.map(({ name }) => name);
    const now = lit === null ? (by > 0 ? -1 : 0) : names.indexOf(lit);
    onLit(names[(now + by + names.length) % names.length] ?? null);
  };
  const onKey = (event: KeyboardEvent) => {
    if (event.key === 'PageDown' || event.key === 'PageUp') {
      event.preventDefault();
      step(event.key === 'PageDown' ? 1 : -1);
    } else if (event.key === 'Enter' && lit !== null) onHole?.(lit, selectMode(event));
    else zoom.onKey(event);
  };
  return (
    <>
      <div
        ref={attach}
        role="application"
        tabIndex={0}
        aria-label={`${props.title}, drawing. Plus and minus zoom, arrows move, 0 fits, Page down steps to the next hole, Enter takes it.`}
        className="absolute"
        style={{ left, top, width, height, cursor: 'grab', touchAction: 'none' }}
        onKeyDown={onKey}
        onPointerMove={(event) => {
          const { px, py, found } = under(event);
          setAt(found === null ? null : { x: px, y: py });
          props.onHover?.(found?.row ?? null);
        }}
        onPointerLeave={() => {
          setAt(null);
          props.onHover?.(null);
        }}
        onClick={(event) => {
          const { found } = under(event);
          if (found !== null) onHole?.(found.hole, selectMode(event));
        }}
      />
      <span role="status" className="sr-only">
        {lit === null ? '' : `Hole ${lit}`}
      </span>
      {at !== null && hovered !== undefined && hovered !== null && tooltip !== undefined && (
        <ChartTooltip {...at} box={box}>
          {tooltip(hovered)}
        </ChartTooltip>
      )}
    </>
  );
}
