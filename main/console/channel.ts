import type { ConsoleMessage } from '../../shared-model/contract/frame.ts';
import type { Answer } from '../../shared-model/contract/request.ts';
import type { ConsoleOptions } from './start.ts';

/** Shell to console process. */
export type ToConsole =
  | { readonly kind: 'start'; readonly options: ConsoleOptions }
  | { readonly kind: 'request'; readonly id: number; readonly client: string; readonly request: unknown }
  | { readonly kind: 'join'; readonly client: string }
  | { readonly kind: 'leave'; readonly client: string }
  | { readonly kind: 'close' };

/** Console process to shell. */
export type FromConsole =
  | { readonly kind: 'started'; readonly missionFolder: string }
  | { readonly kind: 'failed'; readonly text: string }
  | { readonly kind: 'answer'; readonly id: number; readonly answer: Answer; readonly missionFolder: string }
  | { readonly kind: 'message'; readonly client: string; readonly message: ConsoleMessage }
  | { readonly kind: 'closed' };

/** One side of the pipe between a shell and the console process, whatever carries it. */
export interface Channel<Out, In> {
  send(message: Out): void;
  onMessage(listener: (message: In) => void): void;
  /** The other side is gone. */
  onGone(listener: () => void): void;
}
