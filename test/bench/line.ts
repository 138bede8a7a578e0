import { createRigLink } from '../../main/rig/link.ts';
import { createBuiltInRig } from '../../main/simulator/built-in-rig.ts';
import { PermittedDrive } from '../../shared-model/retraction/interlock.ts';
import { builtInRig } from '../main/rig/built-in-rig.ts';
import { createVirtualClock } from '../main/virtual-clock.ts';
import type { Figure } from './figure.ts';

/**
 * Ticks a second on a line paced to the rig's baud rate, in virtual time, against what the bytes alone allow (11 bits a
 * byte and a gap of 3.5 characters a frame).
 */
export const lineFigures = async (): Promise<Figure[]> => {
  const rig = builtInRig();
  const clock = createVirtualClock();
  const simulated = createBuiltInRig(rig, { seed: 1, clock });
  let bytes = 0;
  let frames = 0;
  const link = createRigLink(
    rig,
    async () => {
      const line = await simulated.openLine();
      line.onData((part) => {
        bytes += part.length;
        frames++;
      });
      return {
        ...line,
        write: (part) => {
          bytes += part.length;
          frames++;
          return line.write(part);
        },
      };
    },
    clock,
  );
  const during = async (work: Promise<unknown>): Promise<void> => {
    let done = false;
    void work.then(() => {
      done = true;
    });
    while (!done) await clock.advanceTo(clock.now() + 0.0001);
  };
  await clock.advanceTo(0.5);
  [bytes, frames] = [0, 0];
  const from = clock.now();
  const ticks = 200;
  for (let i = 0; i < ticks; i++) {
    await during(link.read(clock.now()));
    await during(link.write(PermittedDrive.holdStill(clock.now(), true), clock.now()));
  }
  const took = clock.now() - from;
  const character = 11 / rig.serial.baudRate;
  const least = bytes * character + frames * 3.5 * character;
  return [
    {
      name: `a tick on the line (read everything, write setpoints), ${Math.round(ticks / took)} a second`,
      milliseconds: (took / ticks) * 1000,
      ratio: least / took,
      of: "of the line's own limit",
    },
  ];
};
