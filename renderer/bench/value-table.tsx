import type { FittedValue } from '../../shared-model/trials/trial.ts';
import { fixed } from '../parts/format.ts';
import { useConsole } from '../store/console-store.ts';
import { VALUE_NAMES } from './trial-guide.ts';

/** What a trial gives beside what is in force now. */
export const ValueTable = ({ values }: { readonly values: readonly FittedValue[] }) => {
  const rig = useConsole((state) => state.rig);
  const before: Readonly<Record<FittedValue['name'], number | undefined>> = {
    payoutScale: rig?.payout.scale,
    payoutOffset: rig?.payout.offset,
    bendGain: rig?.machine.muscles.bendGain,
    inversionYield: rig?.machine.body.inversion.yield,
    friction: rig?.machine.body.friction,
    collapseFraction: rig?.machine.body.collapseFraction,
    eccentricityFloor: rig?.machine.body.eccentricityFloor,
    margin: rig?.margin,
  };
  return (
    <table aria-label="Values of the fit">
      <thead>
        <tr>
          <th>Value</th>
          <th className="number">In force now</th>
          <th className="number">By this trial</th>
          <th className="number">95 % band, ±</th>
        </tr>
      </thead>
      <tbody>
        {values.map(({ name, value, halfWidth }) => {
          const { name: words, unit, factor, places } = VALUE_NAMES[name];
          const text = (x: number | undefined) =>
            `${fixed(x === undefined ? x : x / factor, places)} ${unit}`;
          return (
            <tr key={name}>
              <td>{words}</td>
              <td className="number">{text(before[name])}</td>
              <td className="number">{text(value)}</td>
              <td className="number">{name === 'margin' ? '–' : text(halfWidth)}</td>
            </tr>
          );
        })}
      </tbody>
    </table>
  );
};
