import type { ConsoleFrame } from '../../shared-model/contract/frame.ts';
import type { Reading } from '../../shared-model/contract/reading.ts';
import { stopEverything } from '../drive/use-hand.ts';
import { clockTime, fixed, megabytes } from '../parts/format.ts';
import { useConsole } from '../store/console-store.ts';
import { type Mark, StatusReading } from './status-reading.tsx';

/** Always on screen: what the operator must never have to look for, and Stop. */
export const Strip = () => (
  <header className="strip">
    <BodyLength />
    <Pressure />
    <Tension />
    <WayBackReading />
    <Link />
    <Recording />
    <button type="button" className="stop" onPointerDown={stopEverything} onClick={stopEverything}>
      Stop
    </button>
  </header>
);

/** With the console out of reach no reading is more than a memory. */
const useQuality = (
  reading: (frame: ConsoleFrame) => Reading | undefined,
): { mark: Mark; word: string; value: number | null } => {
  const connected = useConsole((state) => state.connected);
  const found = useConsole((state) => (state.frame === null ? undefined : reading(state.frame)));
  if (found === undefined) return { mark: 'bad', word: 'no reading', value: null };
  if (found.quality === 'bad') return { mark: 'bad', word: 'bad', value: null };
  if (!connected || found.quality === 'stale') return { mark: 'stale', word: 'stale', value: found.value };
  return { mark: 'good', word: 'good', value: found.value };
};

const BodyLength = () => {
  const text = useConsole(({ frame }) => (frame?.estimate == null ? '–' : fixed(frame.estimate.length, 2)));
  const band = useConsole(({ frame }) =>
    frame?.estimate == null ? '' : `±${fixed(frame.estimate.lengthBand, 2)} m`,
  );
  const { mark, word } = useQuality((frame) => frame.readings.tail_payout);
  return <StatusReading name="Body length" value={text} unit="m" mark={mark} word={`${word} ${band}`} />;
};

const Pressure = () => {
  const { mark, word, value } = useQuality((frame) => frame.readings.body_pressure);
  const setpoint = useConsole(({ frame }) => frame?.drive.bodyPressureSetpoint ?? null);
  const set = setpoint === null ? '' : `, set ${fixed(setpoint / 1000, 1)}`;
  return (
    <StatusReading
      name="Body pressure"
      value={fixed(value === null ? null : value / 1000, 1)}
      unit="kPa"
      mark={mark}
      word={word + set}
    />
  );
};

const Tension = () => {
  const { mark, word, value } = useQuality((frame) => frame.readings.tail_tension);
  return (
    <StatusReading
      name="Tail tension"
      value={fixed(value, value !== null && Math.abs(value) < 10 ? 1 : 0)}
      unit="N"
      mark={mark}
      word={word}
    />
  );
};

const VERDICTS: Record<ConsoleFrame['wayBack']['kind'], { words: string; mark: Mark }> = {
  clear: { words: 'clear', mark: 'good' },
  'would-buckle': { words: 'would buckle', mark: 'caution' },
  'by-tip-retractor': { words: 'by tip retractor', mark: 'good' },
  'cannot-judge': { words: 'cannot judge', mark: 'caution' },
};

const WayBackReading = () => {
  const kind = useConsole(({ frame }) => frame?.wayBack.kind ?? 'cannot-judge');
  const detail = useConsole(({ frame }) => wayBackDetail(frame));
  const { words, mark } = VERDICTS[kind];
  return <StatusReading name="Way back" value={words} mark={mark} word={detail} wide />;
};

const wayBackDetail = (frame: ConsoleFrame | null): string => {
  const way = frame?.wayBack;
  if (way === undefined) return 'no frame yet';
  if (way.kind === 'cannot-judge')
    return way.reasons[0]?.code.replaceAll('-', ' ').replace('reading:', 'no ') ?? 'input missing';
  if (way.kind === 'by-tip-retractor')
    return `spool holds ${fixed(way.held, 1)} of ${fixed(way.heldMax, 1)} N`;
  if (!Number.isFinite(way.worst.ratio)) return `no body out, needs ${way.margin}`;
  return `ratio ${fixed(way.worst.ratio, 2)}, needs ${way.margin}`;
};

const Link = () => {
  const connected = useConsole((state) => state.connected);
  const state = useConsole(({ frame }) => frame?.link.state ?? 'opening');
  const rate = useConsole(({ frame }) =>
    frame?.link.state === 'open' ? Math.round(frame.link.cycleRate) : 0,
  );
  const errors = useConsole(({ frame }) => (frame?.link.state === 'open' ? frame.link.errors : 0));
  if (!connected) return <StatusReading name="Link" value="no console" mark="warning" word="reconnecting" />;
  if (state === 'open')
    return (
      <StatusReading name="Link" value={String(rate)} unit="Hz" mark="good" word={`open, ${errors} errors`} />
    );
  return (
    <StatusReading
      name="Link"
      value={state}
      mark={state === 'opening' ? 'stale' : 'warning'}
      word={state === 'lost' ? 'opening again' : 'wait'}
    />
  );
};

const Recording = () => {
  const state = useConsole(({ frame }) => frame?.recording.state ?? 'off');
  const time = useConsole(({ frame }) =>
    frame?.recording.state === 'recording' ? clockTime(frame.at - frame.recording.since) : '–',
  );
  const size = useConsole(({ frame }) =>
    frame?.recording.state === 'recording' ? megabytes(frame.recording.bytes) : '',
  );
  if (state === 'recording')
    return <StatusReading name="Recording" value={time} mark="good" word={`on disk, ${size}`} />;
  return (
    <StatusReading
      name="Recording"
      value={state === 'failed' ? 'failed' : 'off'}
      mark="warning"
      word="see alarms"
    />
  );
};
