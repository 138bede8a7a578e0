import type { MeasuredValue } from '../../shared-model/body/body.ts';
import { dateAndTime } from '../parts/format.ts';
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
    trial: 'Trial “Inversion tension” above.',
  },
  {
    value: 'friction',
    name: 'Friction of the tail on the wall',
    decides: 'the pull that reaches the base through bends',
    trial: 'Trial “Inversion tension” above.',
  },
];

/** Which values behind the verdict were measured on this machine, by whom, and what margin follows. */
export const ValuesBehind = () => {
  const catalogue = useConsole(({ rig }) => rig?.catalogue ?? []);
  const margin = useConsole(({ rig }) => rig?.margin ?? null);
  const file = useConsole(({ rig }) => rig?.file ?? '');
  const inversion = useConsole(({ rig }) => rig?.trials.find((one) => one.kind === 'inversion') ?? null);
  const stateOf = (value: MeasuredValue): string => {
    const byTrial = value === 'inversionYield' || value === 'friction' ? inversion : null;
    if (byTrial?.state === 'expired') return '▲ expired';
    if (byTrial?.state === 'measured' && byTrial.record !== null)
      return `● measured, ${byTrial.record.initials}, ${dateAndTime(byTrial.record.date).slice(0, 10)}`;
    return catalogue.includes(value) ? '◐ catalogue' : '● measured, says the rig file';
  };
  return (
    <section className="panel">
      <h2>Values behind the verdict</h2>
      <p>
        Margin in force: <strong>{margin}</strong>.{' '}
        {catalogue.length === 0
          ? 'All four values were measured on this machine.'
          : 'It stays at 1.5 or more while any of the four is a catalogue value.'}
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
              <td>{stateOf(one.value)}</td>
              <td>{one.decides}</td>
              <td>{one.trial}</td>
            </tr>
          ))}
        </tbody>
      </table>
      <p className="trace" style={{ marginTop: 8 }}>
        The two moduli are entered under <code>body</code> in {file} and listed there under{' '}
        <code>measured</code>; the trials above give the rest.
      </p>
    </section>
  );
};
