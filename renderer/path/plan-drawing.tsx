import { useMemo } from 'react';
import type { MissionState } from '../../shared-model/mission/mission.ts';
import { ghosts } from '../../shared-model/mission/selectors.ts';
import { useConsole } from '../store/console-store.ts';

/** Which base axes a drawing shows: across the sheet, and up it. */
interface Projection {
  readonly across: (p: readonly number[]) => number;
  readonly up: (p: readonly number[]) => number;
}
export const PLAN: Projection = { across: (p) => p[2] ?? 0, up: (p) => -(p[0] ?? 0) };
export const ELEVATION: Projection = { across: (p) => p[2] ?? 0, up: (p) => -(p[1] ?? 0) };

/** The body, explored ways and marks to one scale, the base on the left. */
export const PlanDrawing = ({
  projection,
  words,
}: {
  readonly projection: Projection;
  readonly words: string;
}) => {
  const body = useConsole((state) => state.body);
  const mission = useConsole((state) => state.mission);
  const drawn = useMemo(() => sheetOf(mission, body?.points ?? [], projection), [mission, body, projection]);
  const { sheet, px } = drawn;
  return (
    <svg
      className="plan"
      viewBox={sheet.join(' ')}
      role="img"
      aria-label={words}
      preserveAspectRatio="xMidYMid meet"
    >
      {drawn.grid.map((line) => (
        <line
          key={line.key}
          x1={line.x1}
          y1={line.y1}
          x2={line.x2}
          y2={line.y2}
          stroke="var(--line)"
          strokeWidth={line.heavy ? 1.4 * px : 0.5 * px}
        />
      ))}
      {drawn.grid
        .filter((line) => line.label !== '')
        .map((line) => (
          <text
            key={`t${line.key}`}
            x={line.x1 + 3 * px}
            y={line.y2 - 4 * px}
            fontSize={13 * px}
            fill="var(--ink-soft)"
          >
            {line.label}
          </text>
        ))}
      {drawn.ghosts.map((line) => (
        <polyline
          key={line}
          points={line}
          fill="none"
          stroke="var(--ink-soft)"
          strokeWidth={3 * px}
          strokeDasharray={`${7 * px} ${5 * px}`}
        />
      ))}
      <polyline
        points={drawn.body}
        fill="none"
        stroke="var(--ink)"
        strokeWidth={5 * px}
        strokeLinejoin="round"
        strokeLinecap="round"
      />
      <rect x={-8 * px} y={-8 * px} width={12 * px} height={16 * px} fill="var(--ink)" />
      {drawn.marks.map((mark) => (
        <g key={mark.key}>
          <path d={markPath(mark, px)} fill="var(--surface-3)" stroke="var(--ink)" strokeWidth={2 * px} />
          <text
            x={mark.x + 11 * px}
            y={mark.y + (mark.below ? 22 : -9) * px}
            fontSize={14 * px}
            fill="var(--ink)"
          >
            {mark.label}
          </text>
        </g>
      ))}
    </svg>
  );
};

interface Mark {
  readonly key: string;
  readonly x: number;
  readonly y: number;
  readonly label: string;
  readonly kind: 'branch-point' | 'waypoint';
  readonly below: boolean;
}

const markPath = ({ x, y, kind }: Mark, px: number): string => {
  const r = 8 * px;
  return kind === 'branch-point'
    ? `M${x - r},${y} L${x},${y - r} L${x + r},${y} L${x},${y + r} Z`
    : `M${x - r},${y + r * 0.7} L${x},${y - r} L${x + r},${y + r * 0.7} Z`;
};

const sheetOf = (mission: MissionState, flat: readonly number[], projection: Projection) => {
  const to = (p: readonly number[]): [number, number] => [projection.across(p), -projection.up(p)];
  const body = Array.from({ length: Math.floor(flat.length / 3) }, (_, i) =>
    to(flat.slice(3 * i, 3 * i + 3)),
  );
  const lines = ghosts(mission).map((branch) => branch.line.map((point) => to(point.position)));
  const marks: Mark[] = [
    ...mission.branchPoints.map((point) =>
      markOf(point.id, to(point.tip.position), point.label, 'branch-point'),
    ),
    ...mission.waypoints.map((one) => markOf(one.id, to(one.tip.position), String(one.number), 'waypoint')),
  ];
  const all = [
    [0, 0] as [number, number],
    ...body,
    ...lines.flat(),
    ...marks.map((mark): [number, number] => [mark.x, mark.y]),
  ];
  const xs = all.map(([x]) => x);
  const ys = all.map(([, y]) => y);
  const [left, right] = [Math.min(...xs) - 0.8, Math.max(...xs, 3) + 1.4];
  const middle = (Math.min(...ys) + Math.max(...ys)) / 2;
  const half = Math.max((Math.max(...ys) - Math.min(...ys)) / 2 + 0.8, (right - left) * 0.16);
  const sheet = [left, middle - half, right - left, 2 * half] as const;
  return {
    sheet,
    /** About one pixel of a drawing 700 wide. */
    px: (right - left) / 700,
    body: body.map((p) => p.join(',')).join(' '),
    ghosts: lines.map((line) => line.map((p) => p.join(',')).join(' ')),
    marks,
    grid: gridOf(left, right, middle - half, middle + half),
  };
};

const markOf = (key: string, [x, y]: [number, number], label: string, kind: Mark['kind']): Mark => ({
  key,
  x,
  y,
  label,
  kind,
  below: kind === 'waypoint',
});

const gridOf = (left: number, right: number, top: number, bottom: number) => {
  const step = right - left > 24 ? 5 : right - left > 10 ? 2 : 1;
  const lines = [];
  for (let x = Math.ceil(left / step) * step; x <= right; x += step)
    lines.push({ key: `x${x}`, x1: x, y1: top, x2: x, y2: bottom, heavy: x === 0, label: `${x} m` });
  for (let y = Math.ceil(top / step) * step; y <= bottom; y += step)
    lines.push({ key: `y${y}`, x1: left, y1: y, x2: right, y2: y, heavy: y === 0, label: '' });
  return lines;
};
