import { crcFits, withCrc } from './crc.ts';
import type { Table } from './signal.ts';

/** One question to one slave (MODBUS Application Protocol V1.1b3). */
export type Question =
  | {
      readonly kind: 'read';
      readonly slave: number;
      readonly table: Table;
      readonly address: number;
      readonly count: number;
    }
  | {
      readonly kind: 'write-registers';
      readonly slave: number;
      readonly address: number;
      readonly values: readonly number[];
    }
  | { readonly kind: 'write-coil'; readonly slave: number; readonly address: number; readonly on: boolean };

const READ_FUNCTION: Record<Table, number> = { coil: 1, discrete: 2, holding: 3, input: 4 };

export const functionOf = (question: Question): number => {
  if (question.kind === 'read') return READ_FUNCTION[question.table];
  if (question.kind === 'write-coil') return 5;
  return question.values.length === 1 ? 6 : 16;
};

export const encodeQuestion = (question: Question): Uint8Array => {
  const head = [question.slave, functionOf(question), ...word(question.address)];
  if (question.kind === 'read') return withCrc([...head, ...word(question.count)]);
  if (question.kind === 'write-coil') return withCrc([...head, ...word(question.on ? 0xff00 : 0)]);
  const { values } = question;
  if (values.length === 1) return withCrc([...head, ...word(values[0]!)]);
  return withCrc([...head, ...word(values.length), 2 * values.length, ...values.flatMap(word)]);
};

/** Bytes of the whole answer when all is well. */
export const answerLength = (question: Question): number =>
  question.kind === 'read' ? 5 + dataBytes(question) : 8;

/** An exception answer is always this long. */
export const EXCEPTION_LENGTH = 5;

/** What the bytes received so far are, as the answer to `question`. */
export type AnswerParse =
  | { readonly is: 'incomplete' }
  /** Registers of a read, or bits as 0 and 1; empty for a write. */
  | { readonly is: 'answer'; readonly values: readonly number[] }
  | { readonly is: 'exception'; readonly code: number }
  | { readonly is: 'wrong'; readonly why: string };

/** Matches on unit, function, byte count and, for writes, the echo; anything else is never an answer. */
export const parseAnswer = (question: Question, bytes: Uint8Array): AnswerParse => {
  const fn = functionOf(question);
  if (bytes.length >= 1 && bytes[0] !== question.slave)
    return wrong(`unit ${bytes[0]} answered instead of ${question.slave}`);
  if (bytes.length >= 2 && bytes[1] !== fn && bytes[1] !== (fn | 0x80))
    return wrong(`function ${bytes[1]} answered instead of ${fn}`);
  const exception = bytes[1] === (fn | 0x80);
  const wanted = exception ? EXCEPTION_LENGTH : answerLength(question);
  if (bytes.length >= 3 && !exception && question.kind === 'read' && bytes[2] !== dataBytes(question))
    return wrong(`${bytes[2]} bytes of data instead of ${dataBytes(question)}`);
  if (bytes.length < wanted) return { is: 'incomplete' };
  if (bytes.length > wanted) return wrong('more bytes than the answer has');
  if (!crcFits(bytes)) return wrong('checksum does not fit');
  if (exception) return { is: 'exception', code: bytes[2]! };
  return question.kind === 'read'
    ? { is: 'answer', values: dataOf(question, bytes) }
    : echoOf(question, bytes);
};

const echoOf = (question: Exclude<Question, { kind: 'read' }>, bytes: Uint8Array): AnswerParse => {
  const address = (bytes[2]! << 8) | bytes[3]!;
  const value = (bytes[4]! << 8) | bytes[5]!;
  const expected =
    question.kind === 'write-coil'
      ? question.on
        ? 0xff00
        : 0
      : question.values.length === 1
        ? question.values[0]!
        : question.values.length;
  if (address !== question.address || value !== (expected & 0xffff))
    return wrong('the echo of the write differs');
  return { is: 'answer', values: [] };
};

const dataOf = (question: Extract<Question, { kind: 'read' }>, bytes: Uint8Array): number[] =>
  Array.from({ length: question.count }, (_, i) =>
    isBitTable(question.table)
      ? (bytes[3 + (i >> 3)]! >> (i & 7)) & 1
      : (bytes[3 + 2 * i]! << 8) | bytes[4 + 2 * i]!,
  );

const dataBytes = (question: Extract<Question, { kind: 'read' }>): number =>
  isBitTable(question.table) ? Math.ceil(question.count / 8) : 2 * question.count;

export const isBitTable = (table: Table): boolean => table === 'coil' || table === 'discrete';

const word = (value: number): [number, number] => [(value >> 8) & 0xff, value & 0xff];
const wrong = (why: string): AnswerParse => ({ is: 'wrong', why });
