import { useCallback, useEffect, useState } from 'react';
import type { Answer, MissionOnDisk } from '../../shared-model/contract/request.ts';
import { consoleApi } from '../connection/console-api.ts';
import { dateAndTime, fixed, megabytes } from '../parts/format.ts';
import { useConsole } from '../store/console-store.ts';

/** The missions on disk. */
export const ReviewTab = () => {
  const [answer, setAnswer] = useState<Answer | null>(null);
  const [search, setSearch] = useState('');
  const load = useCallback(() => {
    setAnswer(null);
    void consoleApi.request({ kind: 'list-missions' }).then(setAnswer);
  }, []);
  useEffect(load, [load]);
  return (
    <div className="page">
      <section className="panel">
        <div className="row" style={{ marginBottom: 12 }}>
          <h2 style={{ flex: 1 }}>Missions on disk</h2>
          <input
            aria-label="Search missions"
            placeholder="Search place or folder"
            style={{ width: 280 }}
            value={search}
            onChange={(event) => setSearch(event.target.value)}
          />
          <button type="button" onClick={load}>
            Read again
          </button>
        </div>
        {answer === null ? (
          <p>Reading the missions folder…</p>
        ) : answer.ok ? (
          <MissionTable missions={answer.value as MissionOnDisk[]} search={search} />
        ) : (
          <p>▲ {answer.text}</p>
        )}
      </section>
    </div>
  );
};

const MissionTable = ({
  missions,
  search,
}: {
  readonly missions: readonly MissionOnDisk[];
  readonly search: string;
}) => {
  const found = missions.filter((one) =>
    `${one.place} ${one.folder}`.toLowerCase().includes(search.toLowerCase()),
  );
  const recordingNow = useConsole(({ frame }) =>
    frame?.recording.state === 'recording' ? frame.recording.folder : null,
  );
  if (found.length === 0)
    return <p>{missions.length === 0 ? 'There are none yet.' : 'None fits the search.'}</p>;
  return (
    <table>
      <thead>
        <tr>
          <th>Place</th>
          <th>Started</th>
          <th>State</th>
          <th className="number">Longest</th>
          <th className="number">Branch points</th>
          <th className="number">Waypoints</th>
          <th className="number">Alarms</th>
          <th className="number">Size</th>
          <th>Folder</th>
        </tr>
      </thead>
      <tbody>
        {found.map((one) => (
          <tr key={one.folder}>
            <td>
              {one.place} {one.simulated ? '(simulated)' : ''}
            </td>
            <td>{one.started === '' ? '–' : dateAndTime(one.started)}</td>
            <td>{stateOf(one, recordingNow)}</td>
            <td className="number">{fixed(one.longest, 2)} m</td>
            <td className="number">{one.branchPoints}</td>
            <td className="number">{one.waypoints}</td>
            <td className="number">{one.alarms}</td>
            <td className="number">{megabytes(one.bytes)}</td>
            <td style={{ overflowWrap: 'anywhere' }}>{one.folder}</td>
          </tr>
        ))}
      </tbody>
    </table>
  );
};

const stateOf = (mission: MissionOnDisk, recordingNow: string | null): string => {
  if (mission.folder === recordingNow) return '● being recorded';
  return mission.trouble ?? (mission.ended === null ? 'not closed' : 'finished');
};
