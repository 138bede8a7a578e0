import { useEffect, useRef } from 'react';
import UPlot from 'uplot';
import 'uplot/dist/uPlot.min.css';
import type { TrialPlot as Plot } from '../../shared-model/trials/trial.ts';

/** Data as dots, the fit as a line, its 95 % band as dashes. */
export const TrialPlot = ({ plot }: { readonly plot: Plot }) => {
  const host = useRef<HTMLDivElement>(null);
  useEffect(() => {
    const element = host.current;
    if (element === null) return undefined;
    const draw = () => new UPlot(optionsFor(plot, element), dataOf(plot), element);
    let chart = draw();
    // Axes are drawn in theme colours, so a change of theme draws them anew.
    const themes = new MutationObserver(() => {
      chart.destroy();
      chart = draw();
    });
    themes.observe(document.documentElement, { attributes: true, attributeFilter: ['data-theme'] });
    return () => {
      themes.disconnect();
      chart.destroy();
    };
  }, [plot]);
  return (
    <figure className="trial-plot" aria-label="Data and fit">
      <div ref={host} />
      <figcaption className="trace">
        ● points, <span className="key-line" /> fit, <span className="key-line key-dashed" /> its 95 % band
      </figcaption>
    </figure>
  );
};

/** Points and line share one rising axis; each leaves gaps where the other stands. */
const dataOf = ({ points, line }: Plot): UPlot.AlignedData => {
  const rows = [
    ...line.map(({ x, y, band }) => ({ x, point: null, fit: y, low: y - band, high: y + band })),
    ...points.map(([x, y]) => ({ x, point: y, fit: null, low: null, high: null })),
  ].sort((a, b) => a.x - b.x);
  return [
    rows.map((row) => row.x),
    rows.map((row) => row.point),
    rows.map((row) => row.fit),
    rows.map((row) => row.low),
    rows.map((row) => row.high),
  ];
};

/** Room at both ends, or of several points at the last place only the first is drawn. */
const withRoom = (_: UPlot, low: number, high: number): UPlot.Range.MinMax => {
  const room = 0.03 * (high - low) || 1;
  return [low - room, high + room];
};

const optionsFor = (plot: Plot, element: HTMLElement): UPlot.Options => {
  const style = getComputedStyle(document.documentElement);
  const colour = (name: string) => style.getPropertyValue(name).trim();
  const axis = (label: string) => ({
    label,
    stroke: colour('--ink-soft'),
    grid: { stroke: colour('--line'), width: 1 },
    ticks: { stroke: colour('--line'), width: 1 },
    font: '12px sans-serif',
    labelFont: '12px sans-serif',
  });
  const ink = colour('--ink');
  const line = { stroke: ink, spanGaps: true, points: { show: false } };
  return {
    width: Math.max(280, element.clientWidth),
    height: 240,
    legend: { show: false },
    cursor: { show: false },
    scales: { x: { time: false, range: withRoom } },
    axes: [axis(plot.x), axis(plot.y)],
    series: [
      {},
      { stroke: ink, width: 0, points: { show: true, size: 8, fill: ink, stroke: ink } },
      { ...line, width: 2 },
      { ...line, width: 1, dash: [6, 4] },
      { ...line, width: 1, dash: [6, 4] },
    ],
  };
};
