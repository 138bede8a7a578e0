import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { crc16, withCrc } from '../../../main/rig/crc.ts';
import { encodeQuestion, parseAnswer, type Question } from '../../../main/rig/frames.ts';

const hex = (bytes: Uint8Array): string => Buffer.from(bytes).toString('hex');
const bytes = (text: string): Uint8Array => Uint8Array.from(Buffer.from(text.replaceAll(' ', ''), 'hex'));

test('the checksum of "123456789" is 0x4B37, low byte first on the wire (catalogue of CRC algorithms, CRC-16/MODBUS)', () => {
  expect(crc16(new TextEncoder().encode('123456789'))).toBe(0x4b37);
  expect(hex(withCrc([...new TextEncoder().encode('123456789')]).slice(-2))).toBe('374b');
});

describe('questions, as in the examples of MODBUS Application Protocol V1.1b3 (from memory), behind unit 17', () => {
  test.each<[string, Question, string]>([
    [
      'reads registers 108 to 110',
      { kind: 'read', slave: 17, table: 'holding', address: 107, count: 3 },
      '1103006b0003',
    ],
    [
      'reads input register 9',
      { kind: 'read', slave: 17, table: 'input', address: 8, count: 1 },
      '110400080001',
    ],
    [
      'reads coils 20 to 38',
      { kind: 'read', slave: 17, table: 'coil', address: 19, count: 19 },
      '110100130013',
    ],
    [
      'reads discrete inputs 197 to 218',
      { kind: 'read', slave: 17, table: 'discrete', address: 196, count: 22 },
      '110200c40016',
    ],
    ['writes one register', { kind: 'write-registers', slave: 17, address: 1, values: [3] }, '110600010003'],
    [
      'writes two registers',
      { kind: 'write-registers', slave: 17, address: 1, values: [10, 258] },
      '1110000100020 4000a0102'.replace(' ', ''),
    ],
    ['sets a coil', { kind: 'write-coil', slave: 17, address: 172, on: true }, '110500acff00'],
  ])('%s', (_, question, frame) => {
    expect(hex(encodeQuestion(question).slice(0, -2))).toBe(frame);
  });
});

describe('answers', () => {
  const read: Question = { kind: 'read', slave: 17, table: 'holding', address: 107, count: 3 };

  test('gives the registers of the answer in the specification’s example (from memory)', () => {
    expect(parseAnswer(read, withCrc(bytes('1103 06 022b 0000 0064')))).toEqual({
      is: 'answer',
      values: [555, 0, 100],
    });
  });

  test('gives bits in the order of their addresses (from memory: CD 6B 05 for coils 20 to 38)', () => {
    const question: Question = { kind: 'read', slave: 17, table: 'coil', address: 19, count: 19 };
    const parsed = parseAnswer(question, withCrc(bytes('1101 03 cd 6b 05')));
    expect(parsed).toEqual({
      is: 'answer',
      values: [1, 0, 1, 1, 0, 0, 1, 1, 1, 1, 0, 1, 0, 1, 1, 0, 1, 0, 1],
    });
  });

  test('tells an exception from an answer', () => {
    expect(parseAnswer(read, withCrc(bytes('1183 02')))).toEqual({ is: 'exception', code: 2 });
  });

  test.each([
    ['another unit', '1203 06 022b 0000 0064'],
    ['another function', '1104 06 022b 0000 0064'],
    ['another number of registers', '1103 04 022b 0000'],
  ])('is never what %s sent', (_, frame) => {
    expect(parseAnswer(read, withCrc(bytes(frame))).is).toBe('wrong');
  });

  test('is never the echo of another write', () => {
    const write: Question = { kind: 'write-registers', slave: 17, address: 1, values: [3] };
    expect(parseAnswer(write, withCrc(bytes('1106 0001 0003'))).is).toBe('answer');
    for (const other of ['1106 0002 0003', '1106 0001 0004'])
      expect(parseAnswer(write, withCrc(bytes(other))).is).toBe('wrong');
  });

  test('is incomplete until its last byte, however it is cut', () => {
    const whole = withCrc(bytes('1103 06 022b 0000 0064'));
    for (let cut = 0; cut < whole.length; cut++)
      expect(parseAnswer(read, whole.slice(0, cut)).is).toBe('incomplete');
  });

  test('with any one bit wrong is never taken for an answer', () => {
    const whole = withCrc(bytes('1103 06 022b 0000 0064'));
    fc.assert(
      fc.property(fc.nat(whole.length * 8 - 1), (bit) => {
        const spoiled = whole.slice();
        spoiled[bit >> 3]! ^= 1 << (bit & 7);
        expect(parseAnswer(read, spoiled).is).not.toBe('answer');
      }),
    );
  });
});
