import { useEffect, useRef } from 'react';
import UPlot from 'uplot';
import 'uplot/dist/uPlot.min.css';
import type { OutlookLine } from '../../shared-model/contract/frame.ts';
import { targetsOnBody } from '../../shared-model/mission/selectors.ts';
import type { ConsoleState } from '../store/console-store.ts';
import { consoleStore, useConsole } from '../store/console-store.ts';
import { previewStore, usePreview } from './remedy-preview.ts';

/** For every body length back to the base: the tension that inverts, with margin, and the tension that buckles. */
export const OutlookChart = () => {
  const host = useRef<HTMLDivElement>(null);
  useEffect(() => {
    const element = host.current;
    return element === null ? undefined : mountChart(element);
  }, []);
  const summary = useConsole(summaryOf);
  const previewing = usePreview().line !== null;
  return (
    <figure className="outlook" aria-label="Outlook for the way back">
      <p className="outlook-key" aria-hidden="true">
        <span className="key-line" /> needed, with margin <span className="key-line key-dashed" /> buckles at{' '}
        <span className="key-refused" /> refused ● measured
        {previewing ? <span className="key-preview"> ▬ with the remedy</span> : null}
      </p>
      <div ref={host} className="outlook-plot" />
      <figcaption className="visually-hidden">{summary}</figcaption>
    </figure>
  );
};

const summaryOf = ({ outlook, frame }: ConsoleState): string => {
  const last = (outlook?.length.length ?? 0) - 1;
  if (outlook === null || last < 0) return 'No body is out.';
  return `At ${outlook.length[last]!.toFixed(1)} m inverting takes ${outlook.invert[last]!.toFixed(0)} N and ${outlook.buckle[last]!.toFixed(0)} N would buckle the body; verdict ${frame?.wayBack.kind ?? 'unknown'}.`;
};

const mountChart = (element: HTMLElement): (() => void) => {
  let chart: UPlot | null = null;
  let drawn: ConsoleState['outlook'] = null;
  const build = (): void => {
    chart?.destroy();
    chart = new UPlot(optionsFor(element), dataOf(consoleStore.getState()), element);
  };
  build();
  const resize = new ResizeObserver(() => chart?.setSize(sizeOf(element)));
  resize.observe(element);
  // Axes are drawn in theme colours, so a change of theme draws them anew.
  const themes = new MutationObserver(build);
  themes.observe(document.documentElement, { attributes: true, attributeFilter: ['data-theme'] });
  const unsubscribe = consoleStore.subscribe((state) => {
    if (state.outlook === drawn) return;
    drawn = state.outlook;
    chart?.setData(dataOf(state));
  });
  const unsubscribePreview = previewStore.subscribe(() => chart?.setData(dataOf(consoleStore.getState())));
  return () => {
    unsubscribe();
    unsubscribePreview();
    resize.disconnect();
    themes.disconnect();
    chart?.destroy();
  };
};

/** The smallest force a logarithmic axis shows [N]. */
const FLOOR = 0.1;

const dataOf = ({ outlook }: ConsoleState): UPlot.AlignedData => {
  if (outlook === null || outlook.length.length === 0)
    return [[0, 1], ...Array.from({ length: 4 }, () => [null, null])] as UPlot.AlignedData;
  return [[...outlook.length], ...linesOf(outlook), ...previewLines(outlook)];
};

const linesOf = (outlook: OutlookLine): number[][] => [
  outlook.invert.map((force) => Math.max(FLOOR, force * outlook.margin)),
  outlook.buckle.map((force) => Math.max(FLOOR, force)),
];

/** The chosen remedy's lines at the lengths of the present ones; empty without one. */
const previewLines = (outlook: OutlookLine): (number | null)[][] => {
  const { line } = previewStore.getState();
  if (line === null) return [outlook.length.map(() => null), outlook.length.map(() => null)];
  return linesOf(line).map((forces) => outlook.length.map((length) => valueAt(line.length, forces, length)));
};

/** Linear between the points of a line; null beyond them. */
const valueAt = (lengths: readonly number[], forces: readonly number[], at: number): number | null => {
  const next = lengths.findIndex((length) => length >= at);
  if (next < 0) return null;
  if (next === 0) return forces[0] ?? null;
  const [a, b] = [lengths[next - 1]!, lengths[next]!];
  const share = b > a ? (at - a) / (b - a) : 0;
  return forces[next - 1]! + share * (forces[next]! - forces[next - 1]!);
};

const sizeOf = (element: HTMLElement) => ({
  width: Math.max(160, element.clientWidth),
  height: Math.max(60, element.clientHeight),
});

const optionsFor = (element: HTMLElement): UPlot.Options => {
  const style = getComputedStyle(document.documentElement);
  const colour = (name: string) => style.getPropertyValue(name).trim();
  const axis = {
    stroke: colour('--ink-soft'),
    grid: { stroke: colour('--line'), width: 1 },
    ticks: { stroke: colour('--line'), width: 1 },
    font: '12px sans-serif',
  };
  return {
    ...sizeOf(element),
    legend: { show: false },
    cursor: { show: false },
    padding: [18, 12, 0, 0],
    scales: {
      x: { time: false, range: (_, low, high) => [0, Math.max(1, high, low)] },
      y: { distr: 3, range: (_, low, high) => [stepBelow(low ?? 1), stepAbove(high ?? 100)] },
    },
    axes: [
      { ...axis, size: 30, values: (_, ticks) => ticks.map((tick) => `${tick} m`) },
      {
        ...axis,
        size: 52,
        filter: keepSteps,
        grid: { ...axis.grid, filter: keepSteps },
        ticks: { show: false },
        values: (_, ticks) => ticks.map((tick) => (tick === null ? '' : `${tick} N`)),
      },
    ],
    series: [
      {},
      { stroke: colour('--ink'), width: 2, points: { show: false } },
      { stroke: colour('--ink'), width: 2, dash: [7, 4], points: { show: false } },
      { stroke: colour('--held'), width: 2, points: { show: false } },
      { stroke: colour('--held'), width: 2, dash: [7, 4], points: { show: false } },
    ],
    hooks: { drawAxes: [shadeRefused], draw: [drawMarks, drawTension] },
  };
};

const STEPS = [1, 2, 5, 10];
const decadeOf = (force: number): number => 10 ** Math.floor(Math.log10(force));
const stepAbove = (force: number): number =>
  decadeOf(force) * STEPS.find((step) => step * decadeOf(force) > force)!;
const stepBelow = (force: number): number =>
  decadeOf(force) * STEPS.findLast((step) => step * decadeOf(force) < force * (1 - 1e-9))!;
/** Ticks at 1, 2 and 5 of every decade, or at whole decades where more than one and a half are shown. */
const keepSteps: UPlot.Axis.Filter = (_, ticks) => {
  const wide = ticks.at(-1)! / ticks[0]! > 30;
  return ticks.map((tick) => {
    const step = Number((tick / decadeOf(tick)).toFixed(6));
    return step === 1 || (!wide && STEPS.includes(step)) ? tick : null;
  });
};

/** Hatches the lengths at which a pull is refused, before anyone tries. */
const shadeRefused = (chart: UPlot): void => {
  const [lengths, needed, bears] = chart.data as [number[], (number | null)[], (number | null)[]];
  const { ctx, bbox } = chart;
  ctx.save();
  ctx.fillStyle = inkOf('--hatch');
  lengths.forEach((length, i) => {
    if (i === 0 || needed[i] == null || bears[i] == null || bears[i]! >= needed[i]!) return;
    const from = chart.valToPos(lengths[i - 1]!, 'x', true);
    ctx.fillRect(from, bbox.top, chart.valToPos(length, 'x', true) - from + 1, bbox.height);
  });
  ctx.restore();
};

const drawMarks = (chart: UPlot): void => {
  const { mission, frame } = consoleStore.getState();
  const { ctx, bbox } = chart;
  ctx.save();
  ctx.font = `${12 * devicePixelRatio}px sans-serif`;
  ctx.fillStyle = inkOf('--ink');
  ctx.strokeStyle = inkOf('--ink-soft');
  ctx.setLineDash([3, 3]);
  ctx.textAlign = 'left';
  ctx.textBaseline = 'alphabetic';
  let busyUntil = Number.NEGATIVE_INFINITY;
  for (const target of targetsOnBody(mission, frame?.estimate?.length ?? 0).reverse()) {
    const x = chart.valToPos(target.length, 'x', true);
    ctx.beginPath();
    ctx.moveTo(x, bbox.top);
    ctx.lineTo(x, bbox.top + bbox.height);
    ctx.stroke();
    const label =
      target.kind === 'branch-point'
        ? `◇ ${target.label}`
        : `△ ${target.label.replace(/:.*/, '').replace('Waypoint ', '')}`;
    // Labels that would lie over each other are left to the list on the Path tab.
    if (x < busyUntil) continue;
    ctx.fillText(
      label,
      Math.min(x, bbox.left + bbox.width - ctx.measureText(label).width),
      bbox.top - 5 * devicePixelRatio,
    );
    busyUntil = x + ctx.measureText(label).width + 8;
  }
  ctx.restore();
};

/** The measured tension at the present length, as a dot. */
const drawTension = (chart: UPlot): void => {
  const { frame } = consoleStore.getState();
  const tension = frame?.readings.tail_tension;
  if (frame?.estimate == null || tension?.quality !== 'good') return;
  const { ctx } = chart;
  ctx.save();
  ctx.fillStyle = inkOf('--ink');
  ctx.beginPath();
  ctx.arc(
    chart.valToPos(frame.estimate.length, 'x', true),
    chart.valToPos(Math.max(FLOOR, tension.value), 'y', true),
    5 * devicePixelRatio,
    0,
    2 * Math.PI,
  );
  ctx.fill();
  ctx.restore();
};

const inkOf = (name: string): string =>
  getComputedStyle(document.documentElement).getPropertyValue(name).trim();
