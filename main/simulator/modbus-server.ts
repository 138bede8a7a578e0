/** The registers and bits of one simulated slave, by table. Reading and writing may be refused by returning false. */
export interface RegisterBank {
  readonly unit: number;
  /** Raw 16-bit words from `address` on, or null when an address does not exist. */
  readWords(table: 'holding' | 'input', address: number, count: number): number[] | null;
  readBits(table: 'coil' | 'discrete', address: number, count: number): boolean[] | null;
  writeWords(address: number, words: readonly number[]): boolean;
  writeBits(address: number, bits: readonly boolean[]): boolean;
}

/**
 * A Modbus RTU slave (MODBUS Application Protocol V1.1b3, functions 1–6, 15, 16), written apart from the master so that
 * a mistake in one is not mirrored in the other. Bytes in; whole reply frames out, or nothing for other units, broken
 * frames and broadcasts.
 */
export const createModbusServer = (bank: RegisterBank): { receive(bytes: Uint8Array): Uint8Array[] } => {
  let pending: number[] = [];
  return {
    receive: (bytes) => {
      pending.push(...bytes);
      const replies: Uint8Array[] = [];
      while (pending.length >= 4) {
        const length = requestLength(pending);
        if (length !== null && pending.length < length) break;
        if (length === null || !checksumFits(pending.slice(0, length))) {
          // Out of step: look for the next byte that may begin a frame.
          pending = pending.slice(1);
          continue;
        }
        const reply = answer(bank, pending.slice(0, length - 2));
        pending = pending.slice(length);
        if (reply !== null) replies.push(framed(reply));
      }
      return replies;
    },
  };
};

/** Bytes of the request that begins here, or null when its function is not one a length is known for. */
const requestLength = (bytes: readonly number[]): number | null => {
  const fn = bytes[1]!;
  if (fn >= 1 && fn <= 6) return 8;
  if (fn === 15 || fn === 16) return bytes.length < 7 ? 9 : 9 + bytes[6]!;
  return fn < 0x80 ? 8 : null;
};

const answer = (bank: RegisterBank, frame: readonly number[]): number[] | null => {
  const [unit, fn] = [frame[0]!, frame[1]!];
  const broadcast = unit === 0;
  if (!broadcast && unit !== bank.unit) return null;
  const reply = perform(bank, fn, frame);
  return broadcast ? null : [unit, ...(typeof reply === 'number' ? [fn | 0x80, reply] : [fn, ...reply])];
};

const ILLEGAL_FUNCTION = 1;
const ILLEGAL_ADDRESS = 2;
const ILLEGAL_VALUE = 3;

/** Data behind the function code, or an exception code. */
const perform = (bank: RegisterBank, fn: number, frame: readonly number[]): number[] | number => {
  const address = (frame[2]! << 8) | frame[3]!;
  const second = (frame[4]! << 8) | frame[5]!;
  const echo = frame.slice(2, 6);
  if (fn === 1 || fn === 2)
    return bits(bank.readBits(fn === 1 ? 'coil' : 'discrete', address, second), second);
  if (fn === 3 || fn === 4)
    return words(bank.readWords(fn === 3 ? 'holding' : 'input', address, second), second);
  if (fn === 5) {
    if (second !== 0 && second !== 0xff00) return ILLEGAL_VALUE;
    return bank.writeBits(address, [second === 0xff00]) ? echo : ILLEGAL_ADDRESS;
  }
  if (fn === 6) return bank.writeWords(address, [second]) ? echo : ILLEGAL_ADDRESS;
  if (fn === 15) {
    if (second < 1 || second > 1968 || frame[6] !== Math.ceil(second / 8)) return ILLEGAL_VALUE;
    const values = Array.from({ length: second }, (_, i) => ((frame[7 + (i >> 3)]! >> (i & 7)) & 1) === 1);
    return bank.writeBits(address, values) ? echo : ILLEGAL_ADDRESS;
  }
  if (fn === 16) {
    if (second < 1 || second > 123 || frame[6] !== 2 * second) return ILLEGAL_VALUE;
    const values = Array.from({ length: second }, (_, i) => (frame[7 + 2 * i]! << 8) | frame[8 + 2 * i]!);
    return bank.writeWords(address, values) ? echo : ILLEGAL_ADDRESS;
  }
  return ILLEGAL_FUNCTION;
};

const words = (values: number[] | null, count: number): number[] | number => {
  if (count < 1 || count > 125) return ILLEGAL_VALUE;
  if (values === null) return ILLEGAL_ADDRESS;
  return [2 * values.length, ...values.flatMap((value) => [(value >> 8) & 0xff, value & 0xff])];
};

const bits = (values: boolean[] | null, count: number): number[] | number => {
  if (count < 1 || count > 2000) return ILLEGAL_VALUE;
  if (values === null) return ILLEGAL_ADDRESS;
  const packed = new Array<number>(Math.ceil(values.length / 8)).fill(0);
  values.forEach((value, i) => {
    if (value) packed[i >> 3]! |= 1 << (i & 7);
  });
  return [packed.length, ...packed];
};

const TABLE = Uint16Array.from({ length: 256 }, (_, byte) => {
  let value = byte;
  for (let i = 0; i < 8; i++) value = value % 2 === 1 ? Math.floor(value / 2) ^ 0xa001 : value / 2;
  return value;
});

const checksum = (bytes: readonly number[]): number =>
  bytes.reduce((sum, byte) => (sum >> 8) ^ TABLE[(sum ^ byte) & 0xff]!, 0xffff);

const checksumFits = (frame: readonly number[]): boolean =>
  checksum(frame.slice(0, -2)) === frame.at(-2)! + 256 * frame.at(-1)!;

const framed = (body: readonly number[]): Uint8Array => {
  const sum = checksum(body);
  return Uint8Array.from([...body, sum % 256, Math.floor(sum / 256)]);
};
