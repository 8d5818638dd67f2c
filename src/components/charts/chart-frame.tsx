import { useId, useImperativeHandle, useRef } from 'react';
import type { ReactNode } from 'react';
import type { Box, ChartBasics, ChartHandle } from './chart-types.ts';
import { DataTable } from './data-table.tsx';
import { pngBlob, svgDocument } from './export-chart.ts';
import { useBox } from './use-box.ts';
import type { MeasuredBox } from './use-box.ts';

interface Props extends ChartBasics {
  /** Height used when none is given. */
  usualHeight?: number;
  /** A box the chart measures itself because it needs the size outside the drawing. */
  measured?: MeasuredBox;
  /** A group instead of an image, for a drawing that holds buttons. */
  interactive?: boolean;
  /** Laid under the SVG, in the same box: the canvases. */
  under?: (box: Box) => ReactNode;
  /** SVG markup of what `under` shows, for the export. */
  exportUnder?: () => string;
  /** Laid over the SVG, in the same box: tooltips. */
  over?: (box: Box) => ReactNode;
  /** Below the drawing: legend, rule form. */
  foot?: ReactNode;
  children: (box: Box) => ReactNode;
}

/** The box every chart stands in: measured, named, described, with its data and its export. */
export function ChartFrame(props: Props) {
  const { title, description, table, usualHeight = 260, interactive = false, under, over, foot } = props;
  const height = props.height ?? usualHeight;
  const svgRef = useRef<SVGSVGElement>(null);
  const describedBy = useId();
  const ownBox = useBox({ width: 480, height: height === 'fill' ? usualHeight : height });
  const [boxRef, box] = props.measured ?? ownBox;
  const { chartRef, exportUnder } = props;
  useImperativeHandle(chartRef, (): ChartHandle => {
    const parts = (caption?: string) => ({ title, description, under: exportUnder?.(), ...(caption === undefined ? {} : { caption }) });
    const live = () => {
      if (svgRef.current === null) throw new Error(`The picture "${title}" is not on the page.`);
      return svgRef.current;
    };
    return {
      svg: () => svgRef.current,
      toSvg: (caption) => svgDocument(live(), parts(caption)),
      toPng: (caption, scale) => pngBlob(live(), parts(caption), scale),
    };
  }, [title, description, exportUnder]);
  return (
    <div className={height === 'fill' ? 'relative flex h-full min-h-0 flex-col' : 'relative flex flex-col'}>
      <div ref={boxRef} className="relative min-w-0 flex-1" style={height === 'fill' ? { minHeight: 0 } : { height, flex: 'none' }}>
        {under?.(box)}
        <svg
          ref={svgRef}
          role={interactive ? 'group' : 'img'}
          aria-label={title}
          aria-describedby={describedBy}
          width={box.width}
          height={box.height}
          className="absolute inset-0 block"
        >
          {props.children(box)}
        </svg>
        {over?.(box)}
      </div>
      <p id={describedBy} className="sr-only">
        {description}
      </p>
      {foot}
      {table !== undefined && <DataTable table={table} />}
    </div>
  );
}
