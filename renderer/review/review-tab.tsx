import { useCallback, useEffect, useState } from 'react';
import type { Answer, MissionOnDisk } from '../../shared-model/contract/request.ts';
import { consoleApi } from '../connection/console-api.ts';
import { fixed, megabytes } from '../parts/format.ts';

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
  if (found.length === 0)
    return <p>{missions.length === 0 ? 'There are none yet.' : 'None fits the search.'}</p>;
  return (
    <table>
      <thead>
        <tr>
          <th>Place</th>
          <th>Started</th>
          <th>State</th>
          <th>Longest</th>
          <th>Branch points</th>
          <th>Waypoints</th>
          <th>Alarms</th>
          <th>Size</th>
          <th>Folder</th>
        </tr>
      </thead>
      <tbody>
        {found.map((one) => (
          <tr key={one.folder}>
            <td>
              {one.place} {one.simulated ? '(simulated)' : ''}
            </td>
            <td>{one.started === '' ? '–' : new Date(one.started).toLocaleString()}</td>
            <td>{one.trouble ?? (one.ended === null ? 'not closed' : 'finished')}</td>
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
