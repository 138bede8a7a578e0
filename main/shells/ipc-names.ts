/** What passes between the window's preload and Electron's main process. */
export const IPC = {
  /** Window to main: it listens from now on. */
  join: 'console-join',
  /** Window to main, answered. */
  request: 'console-request',
  /** Main to window. */
  message: 'console-message',
  /** Main to window: the console process has ended. */
  gone: 'console-gone',
} as const;
