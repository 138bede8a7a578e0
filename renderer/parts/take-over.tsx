import { consoleApi } from '../connection/console-api.ts';
import { useConsole } from '../store/console-store.ts';
import { report } from './notice.ts';

/** Shown to a window that watches: one may drive, any may stop. */
export const TakeOver = () => {
  const watching = useConsole(({ role, rig }) => rig !== null && role === 'watcher');
  if (!watching) return null;
  const take = async (): Promise<void> =>
    report(await consoleApi.request({ kind: 'take-over' }), 'This window drives now.');
  return (
    <>
      <span>This window watches.</span>
      <button type="button" onClick={() => void take()}>
        Take over driving
      </button>
    </>
  );
};
