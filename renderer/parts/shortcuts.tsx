import { CloseDialog, ConsoleDialog } from './console-dialog.tsx';

const KEYS = [
  ['G (held)', 'Grow'],
  ['R (held)', 'Retract'],
  ['Arrow keys (held)', 'Steer left, right, up, down'],
  ['Escape', 'Stop, from any tab'],
  ['Gamepad', 'Hold the right shoulder button; left stick grows and retracts, right stick steers'],
  ['Tab, Enter, Space', 'Reach and press every control; hold buttons act while Enter or Space is held'],
] as const;

export const Shortcuts = () => (
  <ConsoleDialog
    title="Keys and cautions"
    trigger={
      <button type="button" aria-label="Keys and cautions">
        ?
      </button>
    }
  >
    <table>
      <tbody>
        {KEYS.map(([key, what]) => (
          <tr key={key}>
            <th scope="row">{key}</th>
            <td>{what}</td>
          </tr>
        ))}
      </tbody>
    </table>
    <Cautions />
    <CloseDialog>Close</CloseDialog>
  </ConsoleDialog>
);

export const Cautions = () => (
  <div className="cautions">
    <p>
      Compressed gas, a moving spool and a body under tension can injure. Stop here is a control function, not
      an emergency stop: the machine needs a hard-wired emergency stop and a pressure relief valve.
    </p>
    <p>
      Predictions are estimates with stated assumptions. Confined-space entry, structural judgement and work
      near people follow local codes and licensed practice.
    </p>
  </div>
);
