/** CRC-16/MODBUS: polynomial 0x8005 reflected, initial 0xFFFF, no final inversion. Sent low byte first. */
export const crc16 = (bytes: Uint8Array, end = bytes.length): number => {
  let crc = 0xffff;
  for (let i = 0; i < end; i++) {
    crc ^= bytes[i]!;
    for (let bit = 0; bit < 8; bit++) crc = crc & 1 ? (crc >> 1) ^ 0xa001 : crc >> 1;
  }
  return crc;
};

/** The frame with its CRC behind it. */
export const withCrc = (body: readonly number[] | Uint8Array): Uint8Array => {
  const frame = new Uint8Array(body.length + 2);
  frame.set(body);
  const crc = crc16(frame, body.length);
  frame[body.length] = crc & 0xff;
  frame[body.length + 1] = crc >> 8;
  return frame;
};

export const crcFits = (frame: Uint8Array): boolean =>
  frame.length >= 4 &&
  crc16(frame, frame.length - 2) === (frame[frame.length - 2]! | (frame[frame.length - 1]! << 8));
