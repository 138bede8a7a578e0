import type { ConsoleMessage } from './frame.ts';
import type { Answer, ConsoleRequest } from './request.ts';

/** What both shells give the renderer, and all of it. */
export interface ConsoleApi {
  readonly shell: 'electron' | 'browser';
  /** Resolves with the console's answer; never rejects, a lost connection is an answer too (`code: 'disconnected'`). */
  request(request: ConsoleRequest): Promise<Answer>;
  /** Calls back with every message; returns how to stop. */
  subscribe(listener: (message: ConsoleMessage) => void): () => void;
  /** Calls back with whether the console can be reached. */
  onConnection(listener: (connected: boolean) => void): () => void;
}
