import { type ConsoleRequest, STILL, type Wish } from '../../shared-model/contract/request.ts';

/** What one held control adds to the wish. */
export type HeldPart = Partial<Pick<Wish, 'motion' | 'steer' | 'pressure'>>;

/** The operator's hand: all held controls together are one press. */
export interface Hand {
  hold(control: string, part: HeldPart): void;
  /** Changes what a held control asks for; nothing if it is not held. */
  change(control: string, part: HeldPart): void;
  release(control: string): void;
  /** Blur, hidden page, dialog, tab change, lost gamepad: everything is let go and must be pressed afresh. */
  letGo(): void;
  /** The console says that this press is burnt. */
  burnt(press: number): void;
  isHeld(control: string): boolean;
  /** The press in the hand is burnt: nothing moves until all is let go. */
  isBurnt(): boolean;
}

/** A held control renews its lease this often [ms]; the console waits five times as long. */
export const RENEW_EVERY = 50;

export interface HandParts {
  readonly send: (request: ConsoleRequest) => void;
  readonly tipSpeed: () => number;
  /** Calls back again and again; returns how to stop. */
  readonly repeat: (run: () => void, every: number) => () => void;
  readonly changed: () => void;
}

export const createHand = ({ send, tipSpeed, repeat, changed }: HandParts): Hand => {
  const held = new Map<string, HeldPart>();
  let press = 0;
  let seq = 0;
  let stopRenewing: (() => void) | null = null;
  let isBurnt = false;

  const wish = (): Wish => {
    const whole: Wish = Object.assign({}, STILL, ...held.values());
    return { ...whole, tipSpeed: whole.motion.kind === 'still' ? 0 : tipSpeed() };
  };
  const renew = (): void => {
    if (!isBurnt) send({ kind: 'hold', press, seq: seq++, wish: wish() });
  };
  const begin = (): void => {
    press++;
    seq = 0;
    isBurnt = false;
    renew();
    stopRenewing = repeat(renew, RENEW_EVERY);
  };
  const end = (): void => {
    stopRenewing?.();
    stopRenewing = null;
    isBurnt = false;
    send({ kind: 'release', press });
  };

  return {
    hold: (control, part) => {
      const first = held.size === 0;
      held.set(control, part);
      if (first) begin();
      else renew();
      changed();
    },
    change: (control, part) => {
      if (held.has(control)) held.set(control, part);
    },
    release: (control) => {
      if (!held.delete(control)) return;
      if (held.size === 0) end();
      else renew();
      changed();
    },
    letGo: () => {
      if (held.size === 0) return;
      held.clear();
      end();
      changed();
    },
    burnt: (burntPress) => {
      if (burntPress !== press || held.size === 0 || isBurnt) return;
      isBurnt = true;
      changed();
    },
    isHeld: (control) => held.has(control),
    isBurnt: () => isBurnt,
  };
};
