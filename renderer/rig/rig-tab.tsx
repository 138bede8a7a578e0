import type { Reading } from '../../shared-model/contract/reading.ts';
import type { ConsoleRequest } from '../../shared-model/contract/request.ts';
import { consoleApi } from '../connection/console-api.ts';
import { fixed, inUnit } from '../parts/format.ts';
import { report } from '../parts/notice.ts';
import { Cautions } from '../parts/shortcuts.tsx';
import { useConsole } from '../store/console-store.ts';

export const RigTab = () => (
  <div className="page">
    <div className="columns">
      <LinkHealth />
      <Faults />
      <section className="panel">
        <h2>Cautions</h2>
        <Cautions />
      </section>
    </div>
    <Signals />
  </div>
);

const LinkHealth = () => {
  const link = useConsole(({ frame }) => frame?.link ?? null);
  const name = useConsole(({ rig }) => rig?.name ?? '–');
  const file = useConsole(({ rig }) => rig?.file ?? '–');
  const reconnect = async (): Promise<void> =>
    report(await consoleApi.request({ kind: 'reconnect' }), 'The line is opened again.');
  return (
    <section className="panel">
      <h2>{name}</h2>
      <p style={{ overflowWrap: 'anywhere' }}>Rig file: {file}</p>
      <p>
        Port: {link?.port ?? '–'}; link {link?.state ?? 'unknown'}
        {link?.state === 'open'
          ? `, ${fixed(link.cycleRate, 1)} readings of everything a second, ${link.errors} failed transactions`
          : ''}
        .
      </p>
      {link?.state === 'lost' ? (
        <p>
          ■ {link.text} {link.remedy}
        </p>
      ) : null}
      <button type="button" style={{ marginTop: 8 }} onClick={() => void reconnect()}>
        Reconnect
      </button>
    </section>
  );
};

type Fault = Extract<ConsoleRequest, { kind: 'simulate-fault' }>['fault'];
const FAULTS: readonly (readonly [Fault, string])[] = [
  ['unplug', 'Unplug the cable'],
  ['dead-unit', 'Unit does not answer'],
  ['bit-errors', 'Bit errors on the line'],
  ['stuck-pressure', 'Pressure sensor stuck'],
  ['leak', 'Leak in the body'],
  ['motor-stall', 'Spool motor stalls'],
  ['retractor-loss', 'Retractor loses its grip'],
  ['retractor-stall', 'Retractor motor stalls'],
  ['weak-wall', 'Wall weaker than measured'],
  ['none', 'End all faults'],
];

/** Only the built-in rig can have faults to order. */
const Faults = () => {
  const simulated = useConsole(({ rig }) => rig?.simulated === true);
  if (!simulated) return null;
  const order = async (fault: Fault, words: string): Promise<void> =>
    report(await consoleApi.request({ kind: 'simulate-fault', fault }), `Simulated: ${words.toLowerCase()}.`);
  return (
    <section className="panel">
      <h2>Simulated faults</h2>
      <div className="row" style={{ flexWrap: 'wrap' }}>
        {FAULTS.map(([fault, words]) => (
          <button key={fault} type="button" onClick={() => void order(fault, words)}>
            {words}
          </button>
        ))}
      </div>
    </section>
  );
};

const Signals = () => {
  const signals = useConsole(({ rig }) => rig?.signals ?? NONE);
  return (
    <section className="panel" style={{ marginTop: 12 }}>
      <h2>Signals</h2>
      <table>
        <thead>
          <tr>
            <th>Signal</th>
            <th>Unit id</th>
            <th>Table</th>
            <th>Address</th>
            <th>Type</th>
            <th className="number">Value</th>
            <th>Quality</th>
          </tr>
        </thead>
        <tbody>
          {signals.map((signal) => (
            <tr key={signal.name}>
              <td>{signal.name.replaceAll('_', ' ')}</td>
              <td>{signal.slave}</td>
              <td>{signal.table}</td>
              <td>{signal.address}</td>
              <td>{signal.type}</td>
              <SignalValue name={signal.name} unit={signal.unit} />
            </tr>
          ))}
        </tbody>
      </table>
    </section>
  );
};
const NONE: never[] = [];

const SignalValue = ({ name, unit }: { readonly name: string; readonly unit: string }) => {
  const reading = useConsole(({ frame }) => (frame?.readings as Record<string, Reading> | undefined)?.[name]);
  if (reading === undefined)
    return (
      <>
        <td>–</td>
        <td>written only</td>
      </>
    );
  if (reading.quality === 'bad')
    return (
      <>
        <td>–</td>
        <td>○ bad: {reading.why}</td>
      </>
    );
  return (
    <>
      <td className="number">{inUnit(reading.value, unit)}</td>
      <td>{reading.quality === 'good' ? '● good' : '◐ stale'}</td>
    </>
  );
};
