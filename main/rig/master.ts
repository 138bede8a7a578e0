import type { Clock } from '../clock.ts';
import { answerLength, encodeQuestion, parseAnswer, type Question } from './frames.ts';
import type { SerialLine } from './serial-line.ts';

/** How one transaction ended. */
export type Reply =
  | { readonly outcome: 'answer'; readonly values: readonly number[] }
  | { readonly outcome: 'exception'; readonly code: number }
  | { readonly outcome: 'timeout' }
  | { readonly outcome: 'bad-frame'; readonly why: string }
  /** Never sent: overtaken by a stop, or the line is gone. */
  | { readonly outcome: 'dropped'; readonly why: string };

export interface LineTiming {
  readonly baudRate: number;
  /** Start, data, parity and stop bits of one character. */
  readonly bitsPerCharacter: number;
  readonly replyTimeout: number;
}

/** The only master on one line: one question at a time. */
export interface Master {
  /** Asks, or waits its turn. Never rejects. */
  ask(question: Question): Promise<Reply>;
  /** Drops all that waits and asks these next. */
  overtake(questions: readonly Question[]): Promise<Reply[]>;
  /** Valid frames and failed transactions so far, and when the last valid frame came [s]. */
  counts(): { readonly frames: number; readonly errors: number; readonly lastFrameAt: number };
  close(): void;
}

interface Waiting {
  readonly question: Question;
  readonly done: (reply: Reply) => void;
}

/** A timer this much late rang behind a stall of the process [s]. */
const STALL = 0.01;

/** Silence that ends a frame [s]: 3.5 characters, 1.75 ms above 19,200 baud (MODBUS over Serial Line V1.02, 2.5.1.1). */
export const frameGap = (timing: LineTiming): number =>
  timing.baudRate > 19_200 ? 0.00175 : (3.5 * timing.bitsPerCharacter) / timing.baudRate;

/**
 * After a timeout or a bad frame the line is quarantined for the longest reply and a gap, and what arrives meanwhile is
 * thrown away, so that a late reply can never answer a newer question.
 */
export const createMaster = (line: SerialLine, timing: LineTiming, clock: Clock): Master => {
  const queue: Waiting[] = [];
  let current: (Waiting & { received: Uint8Array; cancel: () => void; sent: boolean }) | null = null;
  let quarantinedUntil = Number.NEGATIVE_INFINITY;
  let lastByteAt = Number.NEGATIVE_INFINITY;
  let wake: (() => void) | null = null;
  let closed = false;
  const counts = { frames: 0, errors: 0, lastFrameAt: Number.NEGATIVE_INFINITY };
  const gap = frameGap(timing);
  const characterTime = timing.bitsPerCharacter / timing.baudRate;

  const finish = (reply: Reply): void => {
    const ended = current;
    if (ended === null) return;
    current = null;
    ended.cancel();
    if (reply.outcome === 'answer' || reply.outcome === 'exception') {
      counts.frames++;
      counts.lastFrameAt = clock.now();
    } else {
      counts.errors++;
      quarantinedUntil = clock.now() + timing.replyTimeout + gap;
    }
    ended.done(reply);
    next();
  };

  const next = (): void => {
    if (current !== null || queue.length === 0 || wake !== null || closed) return;
    const wait = Math.max(quarantinedUntil, lastByteAt + gap) - clock.now();
    // Less than a nanosecond is rounding, and a timer for it would never end.
    if (wait > 1e-9) {
      wake = clock.after(wait, () => {
        wake = null;
        next();
      });
      return;
    }
    void send(queue.shift()!);
  };

  const send = async (waiting: Waiting): Promise<void> => {
    const mine = { ...waiting, received: new Uint8Array(0), cancel: () => {}, sent: false };
    current = mine;
    const bytes = encodeQuestion(waiting.question);
    const onWire = (bytes.length + answerLength(waiting.question)) * characterTime;
    giveUpAfter(mine, onWire + timing.replyTimeout);
    try {
      await line.write(bytes);
      mine.sent = true;
    } catch (error) {
      if (current === mine)
        finish({ outcome: 'dropped', why: error instanceof Error ? error.message : String(error) });
    }
  };

  /**
   * A timer that rings late says that this process stood still, not that the unit is silent: its answer may lie unread.
   * It is given the time once more; no other question is asked meanwhile, so the answer can only be to this one.
   */
  const giveUpAfter = (waiting: NonNullable<typeof current>, wait: number, again = false): void => {
    const due = clock.now() + wait;
    waiting.cancel = clock.after(wait, () => {
      if (current !== waiting) return;
      if (!again && clock.now() - due > STALL) giveUpAfter(waiting, timing.replyTimeout, true);
      else finish({ outcome: 'timeout' });
    });
  };

  const stopListening = line.onData((bytes) => {
    lastByteAt = clock.now();
    if (current === null || lastByteAt < quarantinedUntil) return;
    current.received = joined(current.received, bytes);
    const parsed = parseAnswer(current.question, current.received);
    if (parsed.is === 'answer') finish({ outcome: 'answer', values: parsed.values });
    else if (parsed.is === 'exception') finish({ outcome: 'exception', code: parsed.code });
    else if (parsed.is === 'wrong') finish({ outcome: 'bad-frame', why: parsed.why });
  });

  const dropAll = (why: string): void => {
    for (const waiting of queue.splice(0)) waiting.done({ outcome: 'dropped', why });
  };

  return {
    ask: (question) =>
      new Promise((done) => {
        if (closed) done({ outcome: 'dropped', why: 'the line is closed' });
        else queue.push({ question, done });
        next();
      }),
    overtake: (questions) => {
      dropAll('overtaken by a stop');
      const replies = questions.map(
        (question) =>
          new Promise<Reply>((done) => {
            if (closed) done({ outcome: 'dropped', why: 'the line is closed' });
            else queue.push({ question, done });
          }),
      );
      next();
      return Promise.all(replies);
    },
    counts: () => counts,
    close: () => {
      closed = true;
      stopListening();
      wake?.();
      dropAll('the line is closed');
      if (current !== null) finish({ outcome: 'dropped', why: 'the line is closed' });
    },
  };
};

const joined = (a: Uint8Array, b: Uint8Array): Uint8Array => {
  if (a.length === 0) return b;
  const both = new Uint8Array(a.length + b.length);
  both.set(a);
  both.set(b, a.length);
  return both;
};
