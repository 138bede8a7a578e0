/** A byte line to the rig. The serial port and the built-in rig's in-process line are of equal rank behind it. */
export interface SerialLine {
  readonly name: string;
  /** Resolves when the bytes have been handed over and drained. Rejects with a `LineError`. */
  write(bytes: Uint8Array): Promise<void>;
  onData(listener: (bytes: Uint8Array) => void): () => void;
  /** Called once, when the line is gone for whatever reason but `close`. */
  onLost(listener: (error: LineError) => void): () => void;
  close(): Promise<void>;
}

/** Opens the line or rejects with a `LineError`. */
export type OpenLine = () => Promise<SerialLine>;

export type LineErrorCode = 'missing' | 'busy' | 'denied' | 'unplugged' | 'silent' | 'fault';

/** A line that cannot be used, with what to do about it. */
export class LineError extends Error {
  readonly code: LineErrorCode;
  readonly remedy: string;
  constructor(code: LineErrorCode, message: string, remedy: string) {
    super(message);
    this.name = 'LineError';
    this.code = code;
    this.remedy = remedy;
  }
}
