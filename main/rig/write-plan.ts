import { encodeSignal } from './codec.ts';
import type { Question } from './frames.ts';
import type { WireSignal } from './signal.ts';

/** A signal with the SI value to write. */
export type SignalValue = readonly [signal: WireSignal, value: number];

/** Most registers one write may carry (MODBUS Application Protocol V1.1b3, 6.12). */
const MOST_REGISTERS = 123;

/**
 * Writes for these values: neighbouring registers of one slave in one frame, so that a set of speeds arrives whole.
 * The order of the slaves is that of first mention; coils are single frames.
 */
export const planWrites = (values: readonly SignalValue[]): Question[] => {
  const coils = values.filter(([signal]) => signal.table === 'coil');
  const registers = values.filter(([signal]) => signal.table === 'holding');
  const slaves = [...new Set(registers.map(([signal]) => signal.slave))];
  return [
    ...slaves.flatMap((slave) =>
      registerWrites(
        slave,
        registers.filter(([signal]) => signal.slave === slave),
      ),
    ),
    ...coils.map(
      ([signal, value]): Question => ({
        kind: 'write-coil',
        slave: signal.slave,
        address: signal.address,
        on: value !== 0,
      }),
    ),
  ];
};

const registerWrites = (slave: number, values: readonly SignalValue[]): Question[] => {
  const sorted = [...values].sort((a, b) => a[0].address - b[0].address);
  const runs: { address: number; values: number[] }[] = [];
  for (const [signal, value] of sorted) {
    const words = encodeSignal(signal, value);
    const run = runs.at(-1);
    const follows = run !== undefined && run.address + run.values.length === signal.address;
    if (follows && run.values.length + words.length <= MOST_REGISTERS) run.values.push(...words);
    else runs.push({ address: signal.address, values: [...words] });
  }
  return runs.map((run) => ({ kind: 'write-registers', slave, ...run }));
};
