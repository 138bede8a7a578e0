import { useState } from 'react';
import { consoleApi } from '../connection/console-api.ts';
import { report } from '../parts/notice.ts';
import { useConsole } from '../store/console-store.ts';
import { ConfirmDialog } from './confirm-dialog.tsx';

/** After a suspected fold: what is safe, and the way out once a person has looked. */
export const FoldSuspected = () => {
  const remedy = useConsole(({ frame }) => frame?.foldSuspected?.remedy ?? '');
  const [asking, setAsking] = useState(false);
  if (remedy === '') return null;
  const clear = async (): Promise<void> =>
    report(
      await consoleApi.request({ kind: 'clear-fold', confirmed: true }),
      'Said and recorded; pulling is judged again.',
    );
  return (
    <div className="fold-suspected">
      <p>
        <strong>■ Fold suspected.</strong> {remedy}
      </p>
      <button type="button" onClick={() => setAsking(true)}>
        It lies as before…
      </button>
      <ConfirmDialog
        open={asking}
        title="Does the body lie as before?"
        text="Look at the picture: the tip must be where it was before the pull, and nothing of the body bent aside. If tail had been loose or slipped, that explains it. What you say is recorded, and pulling is permitted again where the verdict is clear."
        confirm="It lies as before"
        onConfirm={() => void clear()}
        onClose={() => setAsking(false)}
      />
    </div>
  );
};
