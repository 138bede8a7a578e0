import { useCallback, useEffect, useState } from 'react';
import type { TrialStanding } from '../../shared-model/trials/apply-trials.ts';
import type { TrialKind, TrialRecord } from '../../shared-model/trials/trial.ts';
import { consoleApi } from '../connection/console-api.ts';
import { chooseSpeed } from '../drive/use-hand.ts';
import { dateAndTime, fixed } from '../parts/format.ts';
import { useConsole } from '../store/console-store.ts';
import { openTrial, useOpenTrial } from './drafts.ts';
import { TRIAL_GUIDES, VALUE_NAMES } from './trial-guide.ts';
import { TrialPanel } from './trial-panel.tsx';
import { ValuesBehind } from './values-behind.tsx';

/** The trials of this machine: how they stand, one of them step by step, and all that was ever measured. */
export const BenchTab = () => {
  const rig = useConsole((state) => state.rig);
  const open = useOpenTrial();
  const [records, reload] = useRecords();
  if (rig === null) return <p className="page">Waiting for the console.</p>;
  const guide = TRIAL_GUIDES.find((one) => one.kind === open);
  const choose = (kind: TrialKind): void => {
    // Trials pull slowly: what is measured is the force at rest.
    chooseSpeed('fine');
    openTrial(open === kind ? null : kind);
  };
  return (
    <div className="page bench">
      <section className="panel">
        <h2>Trials</h2>
        {rig.companionTrouble === null ? null : (
          <p className="verdict-asks">▲ {rig.companionTrouble} Nothing is pulled until it can be read.</p>
        )}
        <div className="trial-list">
          {TRIAL_GUIDES.map(({ kind, title, gives }) => (
            <button
              key={kind}
              type="button"
              className="trial-choice"
              aria-pressed={open === kind}
              onClick={() => choose(kind)}
            >
              <strong>{title}</strong>
              <span className="trace">gives {gives}</span>
              <span>
                {standingText(
                  rig.trials.find((one) => one.kind === kind),
                  records,
                  kind,
                )}
              </span>
            </button>
          ))}
        </div>
        <p className="trace">
          Kept in {rig.companion}; a saved trial is in force from the console’s next start.
        </p>
      </section>
      {guide === undefined ? null : <TrialPanel key={guide.kind} guide={guide} onSaved={reload} />}
      <ValuesBehind />
      <History records={records} />
    </div>
  );
};

const useRecords = (): readonly [readonly TrialRecord[], () => void] => {
  const [records, setRecords] = useState<readonly TrialRecord[]>([]);
  const reload = useCallback(() => {
    void consoleApi
      .request({ kind: 'bench-list' })
      .then((answer) => setRecords(answer.ok ? (answer.value as TrialRecord[]) : []));
  }, []);
  useEffect(reload, [reload]);
  return [records, reload];
};

const standingText = (
  standing: TrialStanding | undefined,
  records: readonly TrialRecord[],
  kind: TrialKind,
): string => {
  const newest = records.findLast((one) => one.trial.kind === kind);
  const record = standing?.record ?? null;
  if (newest !== undefined && newest.date !== record?.date)
    return `◐ saved by ${newest.initials}, in force from the next start`;
  if (record === null)
    return kind === 'inversion' || kind === 'transition' ? '◐ none yet: rig file’s values' : '◐ none yet';
  const who = `${record.initials}, ${dateAndTime(record.date).slice(0, 10)}`;
  return standing?.state === 'expired'
    ? `▲ expired ${dateAndTime(record.expires).slice(0, 10)} (${who})`
    : `● measured, ${who}, until ${dateAndTime(record.expires).slice(0, 10)}`;
};

/** Every trial ever kept, newest first. */
const History = ({ records }: { readonly records: readonly TrialRecord[] }) =>
  records.length === 0 ? null : (
    <section className="panel">
      <h2>All trials of this machine</h2>
      <table>
        <thead>
          <tr>
            <th>Trial</th>
            <th>Date</th>
            <th>By</th>
            <th className="number">Points</th>
            <th>Gave</th>
            <th>Expires</th>
          </tr>
        </thead>
        <tbody>
          {[...records].reverse().map((record) => (
            <tr key={`${record.trial.kind} ${record.date}`}>
              <td>{TRIAL_GUIDES.find((one) => one.kind === record.trial.kind)?.title}</td>
              <td>{dateAndTime(record.date)}</td>
              <td>{record.initials}</td>
              <td className="number">{record.trial.points.length}</td>
              <td>{record.values.map(valueText).join('; ')}</td>
              <td>{dateAndTime(record.expires).slice(0, 10)}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </section>
  );

const valueText = ({ name, value, halfWidth }: TrialRecord['values'][number]): string => {
  const { name: words, unit, factor, places } = VALUE_NAMES[name];
  const band = halfWidth > 0 ? ` ± ${fixed(halfWidth / factor, places)}` : '';
  return `${words.toLowerCase()} ${fixed(value / factor, places)}${band} ${unit}`.trim();
};
