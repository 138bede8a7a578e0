import { useEffect } from 'react';
import { createStore, useStore } from 'zustand';
import { consoleApi } from '../connection/console-api.ts';
import { consoleStore } from '../store/console-store.ts';
import { type PadMemory, readPad } from './gamepad.ts';
import { createHand, type HeldPart } from './hand.ts';

/** Fractions of the rig's highest tip speed. */
export const SPEEDS = { fine: 0.2, coarse: 1 } as const;
export type Speed = keyof typeof SPEEDS;

interface HandState {
  readonly speed: Speed;
  /** Rises whenever what is held changes, so that buttons draw their state. */
  readonly version: number;
}
export const handStore = createStore<HandState>(() => ({ speed: 'coarse', version: 0 }));

/** The one hand of this window. */
export const hand = createHand({
  send: (request) => void consoleApi.request(request),
  tipSpeed: () => SPEEDS[handStore.getState().speed] * (consoleStore.getState().rig?.limits.tipSpeed ?? 0),
  repeat: (run, every) => {
    const timer = setInterval(run, every);
    return () => clearInterval(timer);
  },
  changed: () => handStore.setState(({ version }) => ({ version: version + 1 })),
});

/** Whether a control is held, and whether that still asks for anything. */
export const useHeld = (control: string): 'free' | 'held' | 'burnt' =>
  useStore(handStore, () => (hand.isHeld(control) ? (hand.isBurnt() ? 'burnt' : 'held') : 'free'));
export const useSpeed = (): Speed => useStore(handStore, (state) => state.speed);
export const chooseSpeed = (speed: Speed): void => handStore.setState({ speed });

/** Stop, from any window and in any state. */
export const stopEverything = (): void => {
  hand.letGo();
  void consoleApi.request({ kind: 'stop' });
};

const KEYS: Readonly<Record<string, { control: string; part: HeldPart }>> = {
  KeyG: { control: 'key-grow', part: { motion: { kind: 'grow' } } },
  KeyR: { control: 'key-retract', part: { motion: { kind: 'retract' } } },
  ArrowLeft: { control: 'key-left', part: { steer: { kind: 'bend', right: -1, down: 0 } } },
  ArrowRight: { control: 'key-right', part: { steer: { kind: 'bend', right: 1, down: 0 } } },
  ArrowUp: { control: 'key-up', part: { steer: { kind: 'bend', right: 0, down: -1 } } },
  ArrowDown: { control: 'key-down', part: { steer: { kind: 'bend', right: 0, down: 1 } } },
};

/** Everything that lets the hand go, and Stop by keyboard; once, at the top of the page. */
export const useHandSafety = (): void => {
  useEffect(() => {
    const letGo = (): void => hand.letGo();
    const whenHidden = (): void => {
      if (document.visibilityState !== 'visible') hand.letGo();
    };
    const stopKey = (event: KeyboardEvent): void => {
      if (event.code === 'Escape' && document.querySelector('[role="dialog"]') === null) stopEverything();
    };
    const unsubscribe = consoleStore.subscribe(({ frame, connected }) => {
      if (!connected) hand.letGo();
      else if (frame?.hold.state === 'burnt') hand.burnt(frame.hold.press);
    });
    window.addEventListener('blur', letGo);
    window.addEventListener('pagehide', letGo);
    document.addEventListener('visibilitychange', whenHidden);
    window.addEventListener('keydown', stopKey);
    return () => {
      unsubscribe();
      window.removeEventListener('blur', letGo);
      window.removeEventListener('pagehide', letGo);
      document.removeEventListener('visibilitychange', whenHidden);
      window.removeEventListener('keydown', stopKey);
      hand.letGo();
    };
  }, []);
};

/** Drive keys and gamepad; only while Drive is shown. */
export const useDriveInputs = (): void => {
  useEffect(() => {
    const typing = (event: KeyboardEvent): boolean =>
      event.target instanceof HTMLInputElement ||
      event.target instanceof HTMLTextAreaElement ||
      document.querySelector('[role="dialog"]') !== null;
    const down = (event: KeyboardEvent): void => {
      const key = KEYS[event.code];
      if (
        key === undefined ||
        event.repeat ||
        event.ctrlKey ||
        event.metaKey ||
        event.altKey ||
        typing(event)
      )
        return;
      event.preventDefault();
      hand.hold(key.control, key.part);
    };
    const up = (event: KeyboardEvent): void => {
      const key = KEYS[event.code];
      if (key !== undefined) hand.release(key.control);
    };
    let memory: PadMemory = 'must-be-neutral';
    const poll = setInterval(() => {
      const pad = navigator.getGamepads?.().find((one) => one !== null) ?? null;
      const read = readPad(document.hasFocus() ? memory : 'must-be-neutral', pad);
      memory = read.memory;
      if (read.part === null) hand.release('gamepad');
      else if (hand.isHeld('gamepad')) hand.change('gamepad', read.part);
      else hand.hold('gamepad', read.part);
    }, 25);
    window.addEventListener('keydown', down);
    window.addEventListener('keyup', up);
    return () => {
      clearInterval(poll);
      window.removeEventListener('keydown', down);
      window.removeEventListener('keyup', up);
      hand.letGo();
    };
  }, []);
};
