import type { HeldPart } from './hand.ts';

/** The parts of a gamepad in the standard mapping (W3C Gamepad) that are used. */
export interface PadState {
  readonly mapping: string;
  readonly buttons: readonly { readonly pressed: boolean }[];
  readonly axes: readonly number[];
}

/** Right shoulder button: nothing moves unless it is held too. */
const ENABLE = 5;
const LEFT_Y = 1;
const RIGHT_X = 2;
const RIGHT_Y = 3;
const DEAD_ZONE = 0.25;

/** Whether a pad has been seen neutral since it was connected or let go. */
export type PadMemory = 'must-be-neutral' | 'ready';

/** What the pad asks for now. Motion needs the enable button and an axis, and a neutral pad first. */
export const readPad = (
  memory: PadMemory,
  pad: PadState | null,
): { readonly memory: PadMemory; readonly part: HeldPart | null } => {
  if (pad === null || pad.mapping !== 'standard') return { memory: 'must-be-neutral', part: null };
  const enabled = pad.buttons[ENABLE]?.pressed === true;
  const axis = (index: number): number => {
    const value = pad.axes[index] ?? 0;
    return Math.abs(value) <= 1 && Math.abs(value) >= DEAD_ZONE ? value : 0;
  };
  const [drive, right, down] = [axis(LEFT_Y), axis(RIGHT_X), axis(RIGHT_Y)];
  const neutral = !enabled && drive === 0 && right === 0 && down === 0;
  if (memory === 'must-be-neutral') return { memory: neutral ? 'ready' : memory, part: null };
  const asks = drive !== 0 || right !== 0 || down !== 0;
  if (!enabled || !asks) return { memory, part: null };
  return {
    memory,
    part: {
      motion: { kind: drive < 0 ? 'grow' : drive > 0 ? 'retract' : 'still' },
      steer: right === 0 && down === 0 ? null : { kind: 'bend', right, down },
    },
  };
};
