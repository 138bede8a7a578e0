import type { WireSignal, WireType } from './signal.ts';

export const registersOf = (type: WireType): 1 | 2 => (type === 'u16' || type === 'i16' ? 1 : 2);

/** SI value of a signal's registers, or why there is none: a sentinel, not a number, or out of the valid range. */
export const decodeSignal = (
  signal: WireSignal,
  registers: readonly number[],
): { readonly ok: true; readonly value: number } | { readonly ok: false; readonly why: string } => {
  const raw = rawOf(signal, registers);
  if (signal.sentinels.includes(raw)) return { ok: false, why: `the device says "no reading" (${raw})` };
  const value = raw * signal.scale + signal.offset;
  if (!Number.isFinite(value)) return { ok: false, why: 'not a number' };
  if (!(value >= signal.min && value <= signal.max))
    return {
      ok: false,
      why: `${rounded(value)} is outside ${rounded(signal.min)} to ${rounded(signal.max)}`,
    };
  return { ok: true, value };
};

/** Registers for an SI value, clamped to the signal's range and to what the type can hold. Throws for NaN: a bug, not a setpoint. */
export const encodeSignal = (signal: WireSignal, value: number): number[] => {
  if (Number.isNaN(value)) throw new Error('A setpoint that is not a number was to be written.');
  const clamped = Math.min(signal.max, Math.max(signal.min, value));
  const raw = (clamped - signal.offset) / signal.scale;
  const view = new DataView(new ArrayBuffer(4));
  if (signal.type === 'f32') view.setFloat32(0, raw);
  else {
    const [low, high] = INTEGER_RANGE[signal.type];
    const whole = Math.min(high, Math.max(low, Math.round(raw)));
    if (registersOf(signal.type) === 1) return [whole & 0xffff];
    view.setInt32(0, whole | 0);
    if (signal.type === 'u32') view.setUint32(0, whole);
  }
  const words = [view.getUint16(0), view.getUint16(2)];
  return signal.wordOrder === 'high-first' ? words : words.reverse();
};

const INTEGER_RANGE = {
  u16: [0, 0xffff],
  i16: [-0x8000, 0x7fff],
  u32: [0, 0xffffffff],
  i32: [-0x80000000, 0x7fffffff],
} as const;

const rawOf = (signal: WireSignal, registers: readonly number[]): number => {
  const first = registers[0] ?? Number.NaN;
  if (signal.type === 'u16') return first;
  if (signal.type === 'i16') return first > 0x7fff ? first - 0x10000 : first;
  const second = registers[1] ?? Number.NaN;
  if (Number.isNaN(first + second)) return Number.NaN;
  const [high, low] = signal.wordOrder === 'high-first' ? [first, second] : [second, first];
  const view = new DataView(new ArrayBuffer(4));
  view.setUint16(0, high);
  view.setUint16(2, low);
  return signal.type === 'f32'
    ? view.getFloat32(0)
    : signal.type === 'u32'
      ? view.getUint32(0)
      : view.getInt32(0);
};

const rounded = (value: number): string => String(Number(value.toPrecision(5)));
