import type { SerialLine } from '../../main/rig/serial-line.ts';
import type { Random } from '../../main/simulator/random.ts';
import type { VirtualClock } from '../main/virtual-clock.ts';

/** A line on which every answer may be lost, cut, doubled, spoiled, late, or followed by a foreign frame. */
export const badLine =
  (random: Random, share: number) =>
  (line: SerialLine, clock: VirtualClock): SerialLine => ({
    ...line,
    onData: (listener) =>
      line.onData((bytes) => {
        if (random.uniform() >= share) return listener(bytes);
        const kind = Math.floor(6 * random.uniform());
        const cut = Math.floor(random.uniform() * bytes.length);
        if (kind === 1) listener(bytes.slice(0, cut));
        else if (kind === 2) listener(Uint8Array.from([...bytes, ...bytes]));
        else if (kind === 3) listener(spoiled(bytes, random));
        else if (kind === 4) clock.after(0.03 + 0.3 * random.uniform(), () => listener(bytes));
        else if (kind === 5) {
          listener(bytes);
          listener(Uint8Array.from({ length: 1 + cut }, () => Math.floor(256 * random.uniform())));
        }
      }),
  });

const spoiled = (bytes: Uint8Array, random: Random): Uint8Array => {
  const bits = bytes.slice();
  const at = Math.floor(random.uniform() * bits.length);
  bits[at] = bits[at]! ^ (1 << Math.floor(8 * random.uniform()));
  return bits;
};
