import { Switch } from 'radix-ui';
import { useState } from 'react';
import type { ProcedureStep } from '../../shared-model/contract/frame.ts';
import { consoleApi } from '../connection/console-api.ts';
import { clockTime } from '../parts/format.ts';
import { report } from '../parts/notice.ts';
import { useConsole } from '../store/console-store.ts';
import { ConfirmDialog } from './confirm-dialog.tsx';

const STATES = {
  absent: 'not attached',
  engaging: 'engaging…',
  attached: 'grips the tail',
  releasing: 'releasing…',
  unknown: 'state unknown',
} as const;

/** Attaching and releasing the tip retractor, step by step, and on whose word the console relies. */
export const RetractorControl = () => {
  const has = useConsole(({ rig }) => rig?.tipRetractor ?? 'none');
  const state = useConsole(({ frame }) => frame?.tipRetractor.state ?? 'unknown');
  const [asking, setAsking] = useState<'none' | 'fitted' | 'rely' | 'released'>('none');
  const checked = state === 'attached' || state === 'engaging';
  const set = async (attached: boolean): Promise<void> =>
    report(
      await consoleApi.request({ kind: 'set-tip-retractor', attached, confirmed: true }),
      has === 'declared'
        ? 'Declared, and recorded.'
        : `Sent; ${attached ? 'it engages' : 'it releases'} when the rig says so.`,
    );
  const change = (attached: boolean): void =>
    has === 'declared' ? setAsking(attached ? 'fitted' : 'released') : void set(attached);
  const close = (): void => setAsking('none');
  return (
    <section className="panel" aria-label="Tip retractor controls">
      <Switch.Root
        className="switch"
        checked={checked}
        onCheckedChange={change}
        disabled={has === 'none'}
        aria-label="Tip retractor"
      >
        <span className="knob" aria-hidden="true" />
        Tip retractor
      </Switch.Root>
      {has === 'none' ? <p className="trace">This rig has none.</p> : <Progress />}
      <ConfirmDialog
        open={asking === 'fitted'}
        title="Step 1 of 2: is the tip retractor fitted?"
        text="This rig cannot sense it. Hold still, fit it at the tip, and see it grip the tail."
        confirm="I have seen it grip the tail"
        onConfirm={() => setAsking('rely')}
        onClose={() => setAsking((now) => (now === 'fitted' ? 'none' : now))}
      />
      <ConfirmDialog
        open={asking === 'rely'}
        title="Step 2 of 2: rely on your word?"
        text="From now on every pull relies on your word that it grips; a retractor that does not will fold the body. Your word is recorded with the time."
        confirm="It grips; rely on my word"
        onConfirm={() => void set(true)}
        onClose={close}
      />
      <ConfirmDialog
        open={asking === 'released'}
        title="Tip retractor released?"
        text="Confirm that it no longer grips the tail."
        confirm="It is released"
        onConfirm={() => void set(false)}
        onClose={close}
      />
    </section>
  );
};

/** The step that matters now, or the state and whose word it is. */
const Progress = () => {
  const text = useConsole(({ frame }) => {
    if (frame === null) return 'state unknown';
    const { state, source, since, steps } = frame.tipRetractor;
    const present = steps.find((step) => step.state === 'now' || step.state === 'failed');
    if (present !== undefined) return stepText(present, steps);
    const told = since === null ? '' : ` for ${clockTime(frame.at - since)}`;
    return `${STATES[state]}, ${source === 'sensed' ? 'sensed by the rig' : `on the operator’s word${told}`}`;
  });
  return (
    <p className="trace one-line" role="status" aria-label="Tip retractor state" title={text}>
      {text}
    </p>
  );
};

const stepText = (present: ProcedureStep, steps: readonly ProcedureStep[]): string =>
  `${present.state === 'failed' ? '▲ ' : ''}${steps.indexOf(present) + 1} of ${steps.length}: ${present.text}`;
