import { registersOf } from './codec.ts';
import { isBitTable, type Question } from './frames.ts';
import type { Table, WireSignal } from './signal.ts';

/** One read that covers several signals of one table of one slave. */
export interface PlannedRead<Name extends string> {
  readonly question: Extract<Question, { kind: 'read' }>;
  readonly signals: readonly {
    readonly name: Name;
    readonly signal: WireSignal;
    readonly offset: number;
    readonly width: number;
  }[];
}

/** Most that one read may ask for (MODBUS Application Protocol V1.1b3, 6.1 and 6.3). */
const MOST_REGISTERS = 125;
const MOST_BITS = 2000;
/** A further read costs about 13 bytes and two gaps; reading over a hole costs two bytes a register. */
const WORTH_BRIDGING = 10;

/** The fewest reads that cover every signal; a 32-bit value is never cut in two, no read crosses tables or slaves. */
export const planReads = <Name extends string>(
  signals: readonly (readonly [Name, WireSignal])[],
): PlannedRead<Name>[] => {
  const groups = new Map<string, (readonly [Name, WireSignal])[]>();
  for (const entry of signals) {
    const key = `${entry[1].slave} ${entry[1].table}`;
    groups.set(key, [...(groups.get(key) ?? []), entry]);
  }
  return [...groups.values()].flatMap(planTable);
};

const planTable = <Name extends string>(group: (readonly [Name, WireSignal])[]): PlannedRead<Name>[] => {
  const sorted = [...group].sort((a, b) => a[1].address - b[1].address);
  const { slave, table } = sorted[0]![1];
  const runs: { start: number; end: number; members: (readonly [Name, WireSignal])[] }[] = [];
  for (const entry of sorted) {
    const start = entry[1].address;
    const end = start + widthOf(table, entry[1]);
    const run = runs.at(-1);
    const room = isBitTable(table) ? MOST_BITS : MOST_REGISTERS;
    if (
      run !== undefined &&
      start - run.end <= WORTH_BRIDGING &&
      Math.max(end, run.end) - run.start <= room
    ) {
      run.end = Math.max(end, run.end);
      run.members.push(entry);
    } else runs.push({ start, end, members: [entry] });
  }
  return runs.map((run) => ({
    question: { kind: 'read', slave, table, address: run.start, count: run.end - run.start },
    signals: run.members.map(([name, signal]) => ({
      name,
      signal,
      offset: signal.address - run.start,
      width: widthOf(table, signal),
    })),
  }));
};

const widthOf = (table: Table, signal: WireSignal): number =>
  isBitTable(table) ? 1 : registersOf(signal.type);
