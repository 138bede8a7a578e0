import { fixed } from '../parts/format.ts';
import { HoldButton } from '../parts/hold-button.tsx';
import { useConsole } from '../store/console-store.ts';
import { MarkControls } from './mark-controls.tsx';
import { RetractorControl } from './retractor-control.tsx';
import { chooseSpeed, SPEEDS, useSpeed } from './use-hand.ts';

/** Glove-size controls; everything that moves is held. */
export const DriveControls = () => (
  <div className="controls">
    <TravelControls />
    <SteeringControls />
    <div className="stack">
      <PressureControls />
      <RetractorControl />
    </div>
    <MarkControls />
  </div>
);

const TravelControls = () => {
  const speed = useSpeed();
  const limit = useConsole(({ rig }) => rig?.limits.tipSpeed ?? 0);
  return (
    <section className="panel" aria-label="Travel">
      <div className="drive-buttons">
        <HoldButton control="grow" part={{ motion: { kind: 'grow' } }} label="Grow">
          Grow
        </HoldButton>
        <HoldButton control="retract" part={{ motion: { kind: 'retract' } }} label="Retract">
          Retract
        </HoldButton>
      </div>
      <fieldset className="row segment" aria-label="Speed" style={{ border: 0, margin: 0, padding: 0 }}>
        {(['fine', 'coarse'] as const).map((one) => (
          <button key={one} type="button" aria-pressed={speed === one} onClick={() => chooseSpeed(one)}>
            {one === 'fine' ? 'Fine' : 'Coarse'} {fixed(SPEEDS[one] * limit, 2)} m/s
          </button>
        ))}
      </fieldset>
      <Trace />
    </section>
  );
};

/** What was asked, permitted and confirmed by the rig. */
const Trace = () => {
  const asked = useConsole(({ frame }) => fixed(frame?.drive.asked ?? 0, 2));
  const permitted = useConsole(({ frame }) => fixed(frame?.drive.permitted ?? 0, 2));
  const confirmed = useConsole(({ frame }) => frame?.drive.confirmed === true);
  return (
    <p className="trace">
      Asked {asked}, permitted {permitted} m/s, {confirmed ? '✓ confirmed by the rig' : '… not confirmed'}
    </p>
  );
};

const STEERS = [
  { label: 'Steer up', sign: '↑', right: 0, down: -1 },
  { label: 'Steer left', sign: '←', right: -1, down: 0 },
  { label: 'Steer down', sign: '↓', right: 0, down: 1 },
  { label: 'Steer right', sign: '→', right: 1, down: 0 },
] as const;

const SteeringControls = () => {
  const bend = useConsole(({ frame }) =>
    frame?.estimate == null
      ? 'bend unknown'
      : `bend ${fixed(frame.estimate.bend.right, 2)} right, ${fixed(frame.estimate.bend.down, 2)} down 1/m`,
  );
  const pad = (i: number) => {
    const { label, sign, right, down } = STEERS[i]!;
    return (
      <HoldButton control={label} part={{ steer: { kind: 'bend', right, down } }} label={label}>
        {sign}
      </HoldButton>
    );
  };
  return (
    <section className="panel" aria-label="Steering">
      <div className="steer">
        <span />
        {pad(0)}
        <HoldButton control="straighten" part={{ steer: { kind: 'straighten' } }} label="Straighten">
          <span style={{ fontSize: 12 }}>Straight</span>
        </HoldButton>
        {pad(1)}
        {pad(2)}
        {pad(3)}
      </div>
      <p className="trace">{bend}</p>
    </section>
  );
};

const PressureControls = () => (
  <section className="panel" aria-label="Body pressure controls">
    <div className="row">
      <HoldButton control="pressure-up" part={{ pressure: 1 }} label="Raise body pressure">
        Raise pressure
      </HoldButton>
      <HoldButton control="pressure-down" part={{ pressure: -1 }} label="Lower body pressure">
        Lower pressure
      </HoldButton>
    </div>
  </section>
);
