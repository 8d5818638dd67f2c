/** A stretch of depth on show, metres. */
export type DepthWindow = readonly [fromM: number, toM: number];

const LEAST_M = 2;
const LABEL_PITCH_PX = 100;
const STEPS_M = [0.5, 1, 2, 5, 10, 20, 50, 100, 200, 500, 1000];

/** The window that shows every hole whole, its end on a round number. */
export function fitWindow(holes: readonly { lengthM: number; originM?: number }[]): DepthWindow {
  if (holes.length === 0) return [0, 100];
  const low = Math.min(...holes.map(({ originM = 0 }) => 0 - originM));
  const high = Math.max(...holes.map(({ lengthM, originM = 0 }) => lengthM - originM));
  const round = high - low > 60 ? 10 : 1;
  return [Math.floor(low / round) * round, Math.ceil((high + (high - low) * 0.012) / round) * round];
}

/** Keeps a window within the fit and at least two metres long. */
export function clampWindow([from, to]: DepthWindow, [low, high]: DepthWindow): DepthWindow {
  const span = Math.min(high - low, Math.max(LEAST_M, to - from));
  const start = Math.min(high - span, Math.max(low, from));
  return [start, start + span];
}

/** Zooms about a depth that keeps its place: a factor above 1 comes nearer. */
export function zoomWindow([from, to]: DepthWindow, factor: number, aboutM: number, fit: DepthWindow): DepthWindow {
  const span = Math.max(LEAST_M, (to - from) / factor);
  const share = (aboutM - from) / (to - from);
  return clampWindow([aboutM - share * span, aboutM + (1 - share) * span], fit);
}

export function panWindow([from, to]: DepthWindow, byM: number, fit: DepthWindow): DepthWindow {
  return clampWindow([from + byM, to + byM], fit);
}

/** The window moved just enough to show a stretch with a little room about it. */
export function showInWindow(window: DepthWindow, fromM: number, toM: number, fit: DepthWindow): DepthWindow {
  const margin = (window[1] - window[0]) * 0.04;
  if (fromM - margin < window[0]) return panWindow(window, fromM - margin - window[0], fit);
  if (toM + margin > window[1]) return panWindow(window, toM + margin - window[1], fit);
  return window;
}

export function isSameWindow(a: DepthWindow, b: DepthWindow): boolean {
  return Math.abs(a[0] - b[0]) < 1e-6 && Math.abs(a[1] - b[1]) < 1e-6;
}

export interface RulerMark {
  depthM: number;
  /** Written on long ticks only. */
  label: string | null;
}

/** Metres between labels: 50 where there is room for no more, finer when zoomed in. */
export function labelStep([from, to]: DepthWindow, lengthPx: number): number {
  const perM = lengthPx / (to - from);
  return STEPS_M.find((step) => step * perM >= LABEL_PITCH_PX) ?? 2000;
}

/** Ticks and labels of a depth ruler: five ticks to a label. */
export function rulerMarks(window: DepthWindow, lengthPx: number): RulerMark[] {
  const step = labelStep(window, lengthPx);
  const marks: RulerMark[] = [];
  const first = Math.ceil((window[0] / step) * 5 - 1e-9) + 0; // no minus zero
  const last = Math.floor((window[1] / step) * 5 + 1e-9);
  for (let i = first; i <= last; i++) {
    const depthM = (i * step) / 5;
    const text = (Math.round(depthM * 10) / 10).toString().replace('-', '\u2212');
    marks.push({ depthM, label: i % 5 === 0 ? `${text}\u00a0m` : null });
  }
  return marks;
}

/** Reads two typed depths; says what is wrong where they make no window. */
export function readWindow(fromText: string, toText: string, fit: DepthWindow): { window: DepthWindow } | { problem: string } {
  const [from, to] = [fromText, toText].map((text) => Number(text.trim().replace(',', '.') || NaN));
  if (from === undefined || to === undefined || Number.isNaN(from) || Number.isNaN(to)) {
    return { problem: `Expected two depths in metres, found "${fromText}" and "${toText}".` };
  }
  if (to - from < LEAST_M) return { problem: `Expected at least ${LEAST_M} m of core, found ${from} to ${to} m.` };
  if (to <= fit[0] || from >= fit[1]) return { problem: `The core in the tray runs from ${fit[0]} to ${fit[1]} m.` };
  return { window: clampWindow([from, to], fit) };
}
