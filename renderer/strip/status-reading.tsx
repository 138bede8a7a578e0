import type { ReactNode } from 'react';

/** How sure a reading is, doubled by a shape and a word. */
export type Mark = 'good' | 'stale' | 'bad' | 'caution' | 'warning' | 'none';
const SHAPES: Record<Mark, string> = {
  good: '●',
  stale: '◐',
  bad: '○',
  caution: '▲',
  warning: '■',
  none: '',
};

/** One reading of the strip: name, value with unit, and its quality in a word. */
export const StatusReading = (props: {
  readonly name: string;
  readonly value: string;
  readonly unit?: string;
  readonly mark: Mark;
  readonly word: ReactNode;
  readonly wide?: boolean;
}) => (
  <div
    role="status"
    aria-live="off"
    aria-label={props.name}
    className={`status status-${props.mark} ${props.wide ? 'status-wide' : ''}`}
  >
    <span className="status-name">{props.name}</span>
    <span className="status-value">
      {props.value}
      {props.unit === undefined ? null : <span className="unit"> {props.unit}</span>}
    </span>
    <span className="status-word">
      <span aria-hidden="true">{SHAPES[props.mark]} </span>
      {props.word}
    </span>
  </div>
);
