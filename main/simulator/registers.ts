import type { ReadSignal, WriteSignal } from '../../shared-model/contract/reading.ts';
import type { RigDescription, WireSignal } from '../rig/signal.ts';
import type { RegisterBank } from './modbus-server.ts';

/** The two sides of a simulated slave that registers stand for. SI. */
export interface RegisterSource {
  sense(): Partial<Record<ReadSignal, number>>;
  command(name: WriteSignal, value: number): void;
  heartbeat(count: number): void;
}

/** Serves exactly what the rig file describes for `unit`: its addresses, types, scales and word orders. */
export const createRegisters = (rig: RigDescription, unit: number, source: RegisterSource): RegisterBank => {
  const slave = rig.slaves.find((one) => one.id === unit);
  const mine = (entries: object) =>
    (Object.entries(entries) as [string, WireSignal][]).filter(([, signal]) => signal.slave === unit);
  const reads = mine(rig.reads);
  const writes = mine(rig.writes);
  const held = new Map<string, number>();
  const key = (table: string, address: number) => `${table} ${address}`;
  const put = (signal: WireSignal, value: number): void =>
    toWords(signal, value).forEach((word, i) => held.set(key(signal.table, signal.address + i), word));

  for (const [, signal] of [...reads, ...writes]) put(signal, Math.min(signal.max, Math.max(signal.min, 0)));
  if (slave?.heartbeat) put(slave.heartbeat, 0);
  if (slave?.identity) put(slave.identity, slave.identityExpected ?? 0);
  if (slave?.faultWord) put(slave.faultWord, 0);

  const refresh = (): void => {
    const values = source.sense();
    for (const [name, signal] of reads) {
      const value = values[name as ReadSignal];
      if (value !== undefined) put(signal, value);
    }
  };

  const deliver = (touched: ReadonlySet<number>, table: string): void => {
    for (const [name, signal] of writes) {
      if (signal.table !== table || !covers(signal, touched)) continue;
      source.command(name as WriteSignal, fromWords(signal, wordsAt(signal)));
    }
    const beat = slave?.heartbeat;
    if (beat && beat.table === table && covers(beat, touched))
      source.heartbeat(fromWords(beat, wordsAt(beat)));
  };
  const wordsAt = (signal: WireSignal): number[] =>
    Array.from({ length: widthOf(signal) }, (_, i) => held.get(key(signal.table, signal.address + i)) ?? 0);

  const range = (table: string, address: number, count: number): number[] | null => {
    const values = Array.from({ length: count }, (_, i) => held.get(key(table, address + i)));
    return values.every((value) => value !== undefined) ? (values as number[]) : null;
  };
  const store = (table: string, address: number, values: readonly number[]): boolean => {
    if (range(table, address, values.length) === null) return false;
    values.forEach((value, i) => held.set(key(table, address + i), value));
    deliver(new Set(values.map((_, i) => address + i)), table);
    return true;
  };
  return {
    unit,
    readWords: (table, address, count) => {
      refresh();
      return range(table, address, count);
    },
    readBits: (table, address, count) => {
      refresh();
      return range(table, address, count)?.map((value) => value !== 0) ?? null;
    },
    writeWords: (address, values) => store('holding', address, values),
    writeBits: (address, values) => store('coil', address, values.map(Number)),
  };
};

const covers = (signal: WireSignal, touched: ReadonlySet<number>): boolean =>
  Array.from({ length: widthOf(signal) }, (_, i) => signal.address + i).some((address) =>
    touched.has(address),
  );

const widthOf = (signal: WireSignal): number =>
  signal.table === 'coil' || signal.table === 'discrete' || signal.type === 'u16' || signal.type === 'i16'
    ? 1
    : 2;

const toWords = (signal: WireSignal, value: number): number[] => {
  const raw = (value - signal.offset) / signal.scale;
  const buffer = Buffer.alloc(4);
  if (signal.type === 'f32') buffer.writeFloatBE(raw);
  else if (widthOf(signal) === 1) {
    const limits = signal.type === 'i16' ? [-32768, 32767] : [0, 65535];
    return [Math.round(Math.min(limits[1]!, Math.max(limits[0]!, raw))) & 0xffff];
  } else if (signal.type === 'i32') buffer.writeInt32BE(Math.round(raw));
  else buffer.writeUInt32BE(Math.max(0, Math.round(raw)));
  const both = [buffer.readUInt16BE(0), buffer.readUInt16BE(2)];
  return signal.wordOrder === 'high-first' ? both : [both[1]!, both[0]!];
};

const fromWords = (signal: WireSignal, words: readonly number[]): number => {
  const buffer = Buffer.alloc(4);
  const [high, low] = signal.wordOrder === 'high-first' ? [words[0], words[1]] : [words[1], words[0]];
  if (widthOf(signal) === 1) {
    const raw = signal.type === 'i16' ? (words[0]! << 16) >> 16 : words[0]!;
    return raw * signal.scale + signal.offset;
  }
  buffer.writeUInt16BE(high ?? 0, 0);
  buffer.writeUInt16BE(low ?? 0, 2);
  const raw =
    signal.type === 'f32'
      ? buffer.readFloatBE()
      : signal.type === 'i32'
        ? buffer.readInt32BE()
        : buffer.readUInt32BE();
  return raw * signal.scale + signal.offset;
};
