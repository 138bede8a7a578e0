import type { Standing } from '../../shared-model/retraction/standing.ts';
import { HOOP_FACTOR } from '../../shared-model/retraction/standing.ts';
import { fixed, kilopascals, newtons } from '../parts/format.ts';
import { type ConsoleState, useConsole } from '../store/console-store.ts';

/** How the body is loaded while it is held or grown, in one line. */
export const StandingLine = () => {
  const text = useConsole(textOf);
  const asks = useConsole(overloaded);
  if (text === '') return null;
  return (
    <p className={asks ? 'trace one-line verdict-asks' : 'trace one-line'} title={text}>
      {text}
    </p>
  );
};

const overloaded = ({ standing, outlook }: ConsoleState): boolean =>
  standing !== null &&
  (!(standing.hold.ratio >= (outlook?.margin ?? 1)) ||
    !(standing.growth.reserve >= 0) ||
    (standing.hoop !== null && !(standing.hoop >= HOOP_FACTOR)));

const textOf = (state: ConsoleState): string => {
  const { standing, outlook } = state;
  if (standing === null || outlook === null) return '';
  return [
    holdText(standing.hold, outlook.margin),
    growthText(standing.growth),
    standing.hoop === null ? 'Wall: strength not given' : `Wall ${hoopText(standing.hoop)}`,
  ].join(' · ');
};

const holdText = (hold: Standing['hold'], margin: number): string => {
  const held = `Holding ${hold.measured ? '' : 'up to '}${newtons(hold.tension)}`;
  if (hold.ratio >= margin) return held;
  const eased =
    hold.easedPressure === null ? 'no pressure eases it' : `ease to ${kilopascals(hold.easedPressure)}`;
  return `▲ ${held}; a free body folds at ${newtons(hold.capacity)}: ${eased}`;
};

const growthText = ({ needed, reserve, stallLength }: Standing['growth']): string =>
  reserve >= 0
    ? `Growth takes ${kilopascals(needed)}${stallLength < 200 ? `, stalls at ${fixed(stallLength, 0)} m` : ''}`
    : `▲ Growth stalls: takes ${kilopascals(needed)}`;

const hoopText = (factor: number): string =>
  factor >= HOOP_FACTOR
    ? `${fixed(Math.min(factor, 99), 1)} × its load`
    : `▲ only ${fixed(factor, 1)} × its load`;
