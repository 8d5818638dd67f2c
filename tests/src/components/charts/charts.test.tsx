import { render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createRef } from 'react';
import { describe, expect, it, vi } from 'vitest';
import type { ChartHandle } from '#src/components/charts/chart-types.ts';
import { DensityRidges } from '#src/components/charts/density-ridges.tsx';
import { standaloneSvg } from '#src/components/charts/export-chart.ts';
import { divergingStep, FingerprintHeat, rowOrder, stepSign, tellingElements } from '#src/components/charts/fingerprint-heat.tsx';
import { Histogram } from '#src/components/charts/histogram.tsx';
import { HoleStrip } from '#src/components/charts/hole-strip.tsx';
import { LineChart } from '#src/components/charts/line-chart.tsx';
import { LoadingsBars } from '#src/components/charts/loadings-bars.tsx';
import { PlanView } from '#src/components/charts/plan-view.tsx';
import { ProbabilityPlot } from '#src/components/charts/probability-plot.tsx';
import { Scree } from '#src/components/charts/scree.tsx';
import { SectionView } from '#src/components/charts/section-view.tsx';
import { ShareRun } from '#src/components/charts/share-run.tsx';
import { Stereonet } from '#src/components/charts/stereonet.tsx';

const words = { title: 'Copper', description: 'What copper does.' };
const groups = [{ label: 'Dyke', slot: 2 }, { label: 'Stringer', slot: 4 }];

describe('fingerprints', () => {
  it('step evenly about the centre and sign the outer steps', () => {
    expect([-9, -1, -0.6, 0, 0.6, 1, 9].map((value) => divergingStep(value, 1))).toEqual([1, 1, 3, 5, 7, 9, 9]);
    expect([1, 2, 3, 5, 7, 8, 9].map(stepSign)).toEqual(['−', '−', '', '', '', '+', '+']);
  });
  it('order groups by an element from its head, and back', async () => {
    const values = [[0.1, 2], [0.9, -2]];
    expect(rowOrder(groups, values, 0)).toEqual([1, 0]);
    render(<FingerprintHeat {...words} groups={groups} elements={['Cu', 'Zn']} values={values} />);
    const names = () => screen.getAllByText(/^(Dyke|Stringer)$/).map((name) => name.textContent);
    expect(names()).toEqual(['Dyke', 'Stringer']);
    await userEvent.click(screen.getByRole('button', { name: 'Order groups by Cu, richest first' }));
    expect(names()).toEqual(['Stringer', 'Dyke']);
    screen.getByRole('button', { name: 'Groups as given, not by Cu' }).focus();
    await userEvent.keyboard('{Enter}');
    expect(names()).toEqual(['Dyke', 'Stringer']);
  });
  it('keep the elements that part the groups most where not all fit, in the order given', () => {
    const values = [[0.1, 2, -0.5], [0.2, Number.NaN, 0.9]];
    expect(tellingElements(['Cu', 'Zn', 'As'], values, 2)).toEqual([1, 2]);
    expect(tellingElements(['Cu', 'Zn', 'As'], values, 3)).toEqual([0, 1, 2]);
  });
  it('hand the chosen group on', async () => {
    const onGroup = vi.fn();
    render(<FingerprintHeat {...words} groups={groups} elements={['Cu']} values={[[1], [2]]} onGroup={onGroup} />);
    await userEvent.click(screen.getByRole('button', { name: 'Take group Stringer' }));
    expect(onGroup).toHaveBeenCalledWith(1);
  });
});

it('stacked lines with long names carry them above their panels', () => {
  const points = [{ x: 2, y: 10 }, { x: 3, y: 30 }];
  const panels = [{ series: [{ label: 'silhouette', points }] }, { series: [{ label: 'a criterion with a name longer than its narrow panel is wide, which nobody could write on the line itself without crossing it', points }] }];
  render(<LineChart {...words} panels={panels} xLabel="groups" />);
  const names = [screen.getByText('silhouette'), screen.getByText(/^a criterion/)];
  expect(new Set(names.map((name) => name.getAttribute('x'))).size).toBe(1);
  expect(names.every((name) => name.getAttribute('text-anchor') === null)).toBe(true);
});

describe('distributions', () => {
  const values = [0.1, 0.2, 0.3, 0.9, 1.1, 1.4];
  const components = [{ label: 'A', share: 0.5, mean: -1.6, sd: 0.4 }, { label: 'B', share: 0.5, mean: 0.1, sd: 0.3 }];
  it('write the names of populations clear of the line of even odds', () => {
    const { container } = render(<ProbabilityPlot {...words} values={values} valueLabel="Cu, % (log scale)" components={components} componentWords={['A 50 %', 'B 50 %']} evenOdds={{ value: 0.5, label: 'even odds at 0.5 %' }} />);
    const level = Number(screen.getByText('even odds at 0.5 %').getAttribute('y')) + 5;
    const names = [...container.querySelectorAll('text')].filter(({ textContent }) => textContent === 'A' || textContent === 'B');
    expect(names.length).toBeGreaterThan(0);
    for (const name of names) expect(Math.abs(Number(name.getAttribute('y')) - level)).toBeGreaterThanOrEqual(11);
  });
  it('name their populations, the even odds and what is censored', () => {
    render(<ProbabilityPlot {...words} values={values} valueLabel="Cu, % (log scale)" components={components} componentWords={['A 50 %', 'B 50 %']} evenOdds={{ value: 0.5, label: 'even odds at 0.5 %' }} censored={{ share: 0.1, label: '10 % below 0.05' }} />);
    for (const text of ['A 50 %', 'B 50 %', 'together', 'even odds at 0.5 %', '10 % below 0.05', 'Cu, % (log scale)']) expect(screen.getByText(text)).toBeInTheDocument();
  });
  it('say when there is nothing to plot', () => {
    render(<ProbabilityPlot {...words} values={[0, -1]} valueLabel="Cu, %" />);
    expect(screen.getByText('No value above zero to plot.')).toBeInTheDocument();
    render(<Histogram {...words} values={[]} valueLabel="Cu, %" />);
    expect(screen.getByText('No value to draw.')).toBeInTheDocument();
    render(<DensityRidges {...words} ridges={[{ label: 'one', values: [1] }]} valueLabel="Cu, %" domain={[0, 2]} />);
    expect(screen.getByText('too few values for a curve')).toBeInTheDocument();
  });
  it('mark values inside the histogram only', () => {
    render(<Histogram {...words} values={values} valueLabel="Cu, %" marks={[{ value: 1.2, label: 'cap 1.2', isChosen: true }, { value: 99, label: 'cap 99' }]} />);
    expect(screen.getByText('cap 1.2')).toBeInTheDocument();
    expect(screen.queryByText('cap 99')).not.toBeInTheDocument();
  });
});

describe('other pictures', () => {
  const points = [2, 3, 4].map((x) => ({ x, y: x / 10 }));
  it('name their lines, axes, parts and counts', () => {
    render(
      <>
        <LineChart {...words} panels={[{ series: [{ label: 'silhouette', points }, { label: 'stability', points: points.map(({ x, y }) => ({ x, y: y + 0.5 })) }] }]} xLabel="number of groups, k" wholeX chosen={3} />
        <Scree {...words} eigenvalues={[5, 2, 1]} thresholds={[{ label: 'broken stick', values: [3, 2, 1] }]} keep={1} />
        <LoadingsBars {...words} loadings={[{ element: 'Bi', value: -0.4 }, { element: 'Ag', value: 0.6 }]} />
        <ShareRun {...words} parts={[{ label: 'chlorite rock', share: 0.71, pattern: 'slant' }, { label: 'dust', share: 0.001 }]} />
        <Stereonet {...words} lines={[{ trend: 10, plunge: 20, sureness: 'sure' }, { trend: 20, plunge: 30, sureness: 'unsure' }]} meanPlane={{ dip: 34, dipDirection: 358 }} cone95={3} contours />
      </>,
    );
    for (const text of ['silhouette', 'stability', 'number of groups, k', 'broken stick', '1 kept', 'Bi', 'Ag', 'chlorite rock', /^<1.%$/, 'unsure', /^34.\/.358$/, 'N']) {
      expect(screen.getAllByText(text).length).toBeGreaterThan(0);
    }
  });

  it('draw a hole with its codes where a rock has no pattern', () => {
    render(<HoleStrip {...words} fromM={0} toM={50} rock={[{ fromM: 0, toM: 50, code: 'QX' }]} rockKey={[{ code: 'QX', pattern: null, label: 'odd rock' }]} />);
    expect(screen.getByText('QX')).toBeInTheDocument();
    expect(screen.getByText('rock: top to bottom')).toBeInTheDocument();
  });
});

describe('plan and section', () => {
  const holes = ['TFD-1', 'TFD-2', 'TFD-3'].map((name, i) => ({
    name,
    points: [{ depthM: 0, east: i * 50, north: 100, elevation: 600 }, { depthM: 200, east: i * 50, north: 200, elevation: 430 }],
    intervals: [{ row: i, fromM: 0, toM: 200, slot: 1 }],
  }));
  it('step through holes by keys and take one by Enter', async () => {
    const onHole = vi.fn();
    render(<PlanView {...words} holes={holes} onHole={onHole} />);
    screen.getByRole('application').focus();
    await userEvent.keyboard('{PageDown}{PageDown}');
    expect(screen.getByRole('status')).toHaveTextContent('Hole TFD-2');
    await userEvent.keyboard('{Enter}');
    expect(onHole).toHaveBeenCalledWith('TFD-2', 'replace');
  });
  it('show only the holes of the corridor, and the exaggeration', () => {
    render(<SectionView {...words} holes={holes} section={{ east: 0, north: 100, azimuthDeg: 0, halfWidthM: 60 }} exaggeration={2} />);
    expect(screen.getByText('TFD-1')).toBeInTheDocument();
    expect(screen.queryByText('TFD-3')).not.toBeInTheDocument();
    expect(screen.getByText(/V = 2 H/)).toBeInTheDocument();
  });
});

describe('an export', () => {
  it('stands alone: tokens resolved, title, sentence and caption inside, nothing of the pointer', () => {
    document.documentElement.style.setProperty('--ink-3', '#675d4f');
    document.documentElement.style.setProperty('--sheet', '#fdfaf3');
    const chart = createRef<ChartHandle>();
    render(<LineChart {...words} chartRef={chart} panels={[{ series: [{ label: 'a', points: [{ x: 1, y: 1 }, { x: 2, y: 2 }] }] }]} xLabel="k" onChoose={() => undefined} />);
    const live = chart.current?.svg();
    expect(live).toBeInstanceOf(SVGSVGElement);
    if (!live) return;
    const copy = standaloneSvg(live, { ...words, caption: 'n = 12, snapshot 13' });
    expect(copy.outerHTML).not.toContain('var(--');
    expect(copy.querySelector('title')?.textContent).toBe('Copper');
    expect(copy.querySelector('desc')?.textContent).toBe('What copper does.');
    expect(copy.textContent).toContain('n = 12, snapshot 13');
    expect(copy.querySelector('[data-screen-only]')).toBeNull();
    expect(Number(copy.getAttribute('height'))).toBeGreaterThan(Number(live.getAttribute('height')));
  });
});
