import type { Alarm, ConsoleFrame } from '../../shared-model/contract/frame.ts';
import { consoleApi } from '../connection/console-api.ts';
import { CloseDialog, ConsoleDialog } from '../parts/console-dialog.tsx';
import { clearNotice, report, useNotice } from '../parts/notice.ts';
import { useConsole } from '../store/console-store.ts';

const SHAPES = { high: '■', medium: '▲', low: '●' } as const;

/** The newest alarm or refusal in one line; the rest a press away. */
export const AlarmLine = () => {
  const alarm = useConsole(({ frame }) => frame?.alarms[0] ?? null);
  const more = useConsole(({ frame }) => frame?.alarms.length ?? 0);
  const refusal = useConsole(({ frame }) => refusalText(frame));
  const notice = useNotice();
  const refused: Line | null = refusal === '' ? null : ['alarm-refusal', `▲ ${refusal}`];
  const noted: Line | null =
    notice === null
      ? null
      : notice.kind === 'refused'
        ? ['alarm-refusal', `▲ ${notice.text}`]
        : ['', `✓ ${notice.text}`];
  const quiet: Line = ['', more === 0 ? 'No alarms.' : `No new alarms, ${more} in the list.`];
  const [tone, text] =
    lineOf(alarm, 'unacknowledged') ?? refused ?? noted ?? lineOf(alarm, 'returned') ?? quiet;
  return (
    <footer className={`alarm-line ${tone}`}>
      <p role="alert" title={text}>
        {text}
      </p>
      {notice === null ? null : (
        <button type="button" onClick={clearNotice}>
          Clear note
        </button>
      )}
      <AlarmList />
    </footer>
  );
};

type Line = readonly [tone: string, text: string];

/** The alarm in one line, if it is in this state. What is over says so, and what holds now comes first. */
const lineOf = (alarm: Alarm | null, state: Alarm['state']): Line | null => {
  if (alarm === null || alarm.state !== state) return null;
  if (state === 'returned') return ['', `${SHAPES[alarm.priority]} Over, not yet seen: ${alarm.cause}`];
  return [`alarm-${alarm.priority}`, `${SHAPES[alarm.priority]} ${alarm.cause} ${alarm.action}`];
};

const refusalText = (frame: ConsoleFrame | null): string => {
  if (frame?.hold.state === 'burnt') return frame.hold.text;
  const first = frame?.refusal?.reasons[0];
  if (frame?.refusal == null || first === undefined) return '';
  const verb = {
    grow: 'Growing',
    retract: 'Retracting',
    backtrack: 'Backtracking',
    steer: 'Steering',
    pressure: 'Changing pressure',
  }[frame.refusal.motion];
  return `${verb} refused. ${first.text} ${first.remedy}`;
};

const AlarmList = () => {
  const alarms = useConsole(({ frame }) => frame?.alarms ?? NONE);
  const acknowledge = async (id: string): Promise<void> =>
    report(await consoleApi.request({ kind: 'acknowledge-alarm', alarm: id }), 'Acknowledged.');
  return (
    <ConsoleDialog title="Alarms" trigger={<button type="button">Alarms ({alarms.length})</button>}>
      {alarms.length === 0 ? <p>There are none.</p> : null}
      {alarms.map((alarm) => (
        <section key={alarm.id} className="panel">
          <h3>
            {SHAPES[alarm.priority]} {alarm.cause}
          </h3>
          <p>Consequence: {alarm.consequence}</p>
          <p>Action: {alarm.action}</p>
          <p>
            Priority {alarm.priority}, {alarm.state}.
          </p>
          {alarm.state === 'acknowledged' ? null : (
            <button type="button" onClick={() => void acknowledge(alarm.id)}>
              Acknowledge
            </button>
          )}
        </section>
      ))}
      <CloseDialog>Close</CloseDialog>
    </ConsoleDialog>
  );
};
const NONE: never[] = [];
