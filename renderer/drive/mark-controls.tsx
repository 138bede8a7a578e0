import { useMemo, useState } from 'react';
import { branchPointHere, targetsOnBody } from '../../shared-model/mission/selectors.ts';
import { consoleApi } from '../connection/console-api.ts';
import { CloseDialog, ConsoleDialog } from '../parts/console-dialog.tsx';
import { metres } from '../parts/format.ts';
import { HoldButton } from '../parts/hold-button.tsx';
import { report } from '../parts/notice.ts';
import { useConsole } from '../store/console-store.ts';
import { stillPicture } from './still-picture.ts';

/** Branch points, waypoints, and the way back to them. */
export const MarkControls = () => (
  <section className="panel marks" aria-label="Marks">
    <MarkBranchPoint />
    <LogWaypoint />
    <ArmChoice />
    <Backtrack />
  </section>
);

const MarkBranchPoint = () => {
  const [open, setOpen] = useState(false);
  const [label, setLabel] = useState('');
  const [next, setNext] = useState<'left' | 'right'>('left');
  const mark = async (): Promise<void> => {
    setOpen(false);
    const arms = next === 'left' ? ['left', 'right'] : ['right', 'left'];
    report(
      await consoleApi.request({ kind: 'mark-branch-point', label, arms }),
      `Branch point marked; growing takes the ${next} arm.`,
    );
    setLabel('');
  };
  return (
    <ConsoleDialog
      title="Branch point here"
      trigger={<button type="button">Mark branch point</button>}
      open={open}
      onOpenChange={setOpen}
    >
      <label>
        Name (may stay empty)
        <input value={label} maxLength={60} onChange={(event) => setLabel(event.target.value)} />
      </label>
      <div className="row segment">
        <span>Arm to take first:</span>
        {(['left', 'right'] as const).map((arm) => (
          <button key={arm} type="button" aria-pressed={next === arm} onClick={() => setNext(arm)}>
            {arm === 'left' ? 'Left arm' : 'Right arm'}
          </button>
        ))}
      </div>
      <button type="button" className="go" onClick={() => void mark()}>
        Mark it
      </button>
      <CloseDialog>Not here</CloseDialog>
    </ConsoleDialog>
  );
};

const LogWaypoint = () => {
  const [note, setNote] = useState('');
  const [busy, setBusy] = useState(false);
  const log = async (): Promise<void> => {
    setBusy(true);
    const picture = await stillPicture();
    const answer = await consoleApi.request({ kind: 'log-waypoint', note, picture });
    setBusy(false);
    const value = answer.ok ? (answer.value as { number: number; warning: string | null }) : null;
    report(
      answer,
      `Waypoint ${value?.number ?? ''} logged${picture === null ? ' without a picture' : ''}. ${value?.warning ?? ''}`,
    );
    if (answer.ok) setNote('');
  };
  return (
    <>
      <button type="button" aria-busy={busy} onClick={() => void log()}>
        Log waypoint
      </button>
      <input
        aria-label="Note for the waypoint"
        placeholder="Note"
        value={note}
        maxLength={500}
        onChange={(event) => setNote(event.target.value)}
      />
    </>
  );
};

const ARM_SIGNS = { open: '○', current: '●', explored: '◐' } as const;

/** At a branch point: the arm that growing will enter. */
const ArmChoice = () => {
  const mission = useConsole((state) => state.mission);
  const length = useConsole(({ frame }) => Math.round((frame?.estimate?.length ?? Number.NaN) * 50) / 50);
  const point = useMemo(
    () => (Number.isFinite(length) ? branchPointHere(mission, length) : null),
    [mission, length],
  );
  const choose = async (arm: string): Promise<void> => {
    if (point !== null)
      report(
        await consoleApi.request({ kind: 'choose-arm', branchPoint: point.id, arm }),
        `Growing takes the ${arm} arm now.`,
      );
  };
  if (point === null) return <p className="trace">At a branch point, the arm to take is chosen here.</p>;
  return (
    <div className="row segment">
      <span className="trace">Take arm</span>
      {[...point.arms]
        .sort((a, b) => a.name.localeCompare(b.name))
        .map((arm) => (
          <button
            key={arm.name}
            type="button"
            title={arm.state}
            aria-pressed={arm.state === 'current'}
            onClick={() => void choose(arm.name)}
          >
            {arm.name} {ARM_SIGNS[arm.state]}
          </button>
        ))}
    </div>
  );
};

const Backtrack = () => {
  const mission = useConsole((state) => state.mission);
  const length = useConsole(({ frame }) => Math.round((frame?.estimate?.length ?? 0) * 20) / 20);
  const remaining = useConsole(({ frame }) =>
    frame?.backtrack == null
      ? ''
      : frame.backtrack.arrived
        ? 'arrived'
        : `${metres(frame.backtrack.remaining)} to go`,
  );
  const targets = useMemo(() => targetsOnBody(mission, length), [mission, length]);
  const [chosen, setChosen] = useState('');
  const target =
    targets.find((one) => one.id === chosen) ??
    targets.find((one) => one.length < length - 0.05) ??
    targets[0];
  return (
    <div className="row full">
      <select
        aria-label="Backtrack to"
        style={{ flex: 1, minHeight: 64 }}
        value={target?.id ?? ''}
        disabled={targets.length === 0}
        onChange={(event) => setChosen(event.target.value)}
      >
        {targets.length === 0 ? <option value="">Backtrack to… (no mark behind the tip yet)</option> : null}
        {targets.map((one) => (
          <option key={one.id} value={one.id}>
            To {one.label} at {metres(one.length)}
          </option>
        ))}
      </select>
      {target === undefined ? null : (
        <HoldButton
          key={target.id}
          control="backtrack"
          part={{ motion: { kind: 'backtrack', target: target.id } }}
          label="Backtrack"
          onHold={() => setChosen(target.id)}
        >
          Backtrack {remaining}
        </HoldButton>
      )}
    </div>
  );
};
