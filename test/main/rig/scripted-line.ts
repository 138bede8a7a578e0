import type { Clock } from '../../../main/clock.ts';
import type { LineError, SerialLine } from '../../../main/rig/serial-line.ts';

/** A line whose far end is a function: for each frame written, the byte strings that come back and when [s]. */
export interface ScriptedLine {
  readonly line: SerialLine;
  readonly written: Uint8Array[];
  lose(error: LineError): void;
}

export type Answerer = (
  frame: Uint8Array,
) => readonly { readonly after: number; readonly bytes: Uint8Array }[];

export const createScriptedLine = (clock: Clock, answer: Answerer): ScriptedLine => {
  const written: Uint8Array[] = [];
  const listeners = new Set<(bytes: Uint8Array) => void>();
  const losing = new Set<(error: LineError) => void>();
  return {
    written,
    line: {
      name: 'scripted',
      write: async (frame) => {
        written.push(frame);
        for (const { after, bytes } of answer(frame))
          clock.after(after, () => {
            for (const listener of listeners) listener(bytes);
          });
      },
      onData: (listener) => {
        listeners.add(listener);
        return () => listeners.delete(listener);
      },
      onLost: (listener) => {
        losing.add(listener);
        return () => losing.delete(listener);
      },
      close: async () => {},
    },
    lose: (error) => {
      for (const listener of losing) listener(error);
    },
  };
};
