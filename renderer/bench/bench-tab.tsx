import type { MeasuredValue } from '../../shared-model/body/body.ts';
import { useConsole } from '../store/console-store.ts';

const VALUES: readonly {
  readonly value: MeasuredValue;
  readonly name: string;
  readonly decides: string;
  readonly trial: string;
}[] = [
  {
    value: 'E',
    name: 'Axial modulus of the wall',
    decides: 'the load at which a long body buckles as a column',
    trial: 'Hang known weights on an inflated tube and measure how far it bends.',
  },
  {
    value: 'G',
    name: 'Shear modulus of the wall',
    decides: 'the load at which a short body buckles',
    trial: 'Twist an inflated tube with a known moment and measure the angle.',
  },
  {
    value: 'inversionYield',
    name: 'Pressure that inversion takes',
    decides: 'the pull that turns the tip',
    trial: 'Invert a short straight body slowly at several pressures and read the tail tension.',
  },
  {
    value: 'friction',
    name: 'Friction of the tail on the wall',
    decides: 'the pull that reaches the base through bends',
    trial: 'Pull the tail through half a turn and a full turn and compare the tensions.',
  },
];

/** Which values behind the verdict were measured on this machine, and what margin follows. */
export const BenchTab = () => {
  const catalogue = useConsole(({ rig }) => rig?.catalogue ?? null);
  const margin = useConsole(({ rig }) => rig?.margin ?? null);
  const file = useConsole(({ rig }) => rig?.file ?? '');
  if (catalogue === null) return <p className="page">Waiting for the console.</p>;
  return (
    <div className="page">
      <section className="panel">
        <h2>Values behind the verdict</h2>
        <p>
          Margin in force: <strong>{margin}</strong>.{' '}
          {catalogue.length === 0
            ? 'All four values were measured on this machine.'
            : 'It stays at 1.5 while any of the four is a catalogue value, and falls to 1.25 when all are measured.'}
        </p>
        <table>
          <thead>
            <tr>
              <th>Value</th>
              <th>State</th>
              <th>It decides</th>
              <th>How to measure it</th>
            </tr>
          </thead>
          <tbody>
            {VALUES.map((one) => (
              <tr key={one.value}>
                <td>{one.name}</td>
                <td style={{ whiteSpace: 'nowrap' }}>
                  {catalogue.includes(one.value) ? '◐ catalogue' : '● measured'}
                </td>
                <td>{one.decides}</td>
                <td>{one.trial}</td>
              </tr>
            ))}
          </tbody>
        </table>
        <p style={{ marginTop: 12 }}>
          Enter what you measured under <code>body</code> in {file} and list the value there under{' '}
          <code>measured</code>.
        </p>
      </section>
    </div>
  );
};
