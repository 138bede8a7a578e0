/** How often the parent is looked for [ms]. */
const EVERY = 500;

/**
 * Calls back once when the shell that npm started this program in has gone. npm passes a signal on to that shell only,
 * which ends without telling its child: the program would run on, unseen, with its port and its serial line taken.
 */
export const onParentGone = (run: () => void): void => {
  if (process.env.npm_lifecycle_event === undefined) return;
  const parent = process.ppid;
  const timer = setInterval(() => {
    if (process.ppid === parent && isRunning(parent)) return;
    clearInterval(timer);
    run();
  }, EVERY);
  timer.unref();
};

const isRunning = (id: number): boolean => {
  try {
    // Signal 0 asks whether the process is there and sends nothing.
    return process.kill(id, 0);
  } catch (error) {
    return (error as NodeJS.ErrnoException).code === 'EPERM';
  }
};
