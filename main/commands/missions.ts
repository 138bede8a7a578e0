import type { MissionOnDisk } from '../../shared-model/contract/request.ts';
import { listMissions } from '../record/mission-folder.ts';
import type { Output } from './check-rig.ts';

/** Lists the missions on disk, newest first; returns the exit code. */
export const missions = async (folder: string, json: boolean, output: Output): Promise<number> => {
  const found = await listMissions(folder).catch((error: Error) => error);
  if (found instanceof Error) {
    output.error(
      `${folder} cannot be read (${found.message}). Give the folder that missions are recorded in.`,
    );
    return 1;
  }
  if (json) {
    output.out(JSON.stringify(found, null, 2));
    return 0;
  }
  if (found.length === 0) output.out(`There are no missions in ${folder}.`);
  for (const one of found) for (const line of linesOf(one)) output.out(line);
  return 0;
};

const linesOf = (one: MissionOnDisk): string[] => [
  [
    one.started || 'time unknown',
    `${one.place || 'place unknown'}${one.simulated ? ' (simulated)' : ''}`,
    `${one.longest.toFixed(2)} m`,
    counted(one.branchPoints, 'branch point'),
    counted(one.waypoints, 'waypoint'),
    counted(one.alarms, 'alarm'),
    one.trouble ?? 'finished',
  ].join('  '),
  `  ${one.folder}`,
];

const counted = (count: number, what: string): string => `${count} ${what}${count === 1 ? '' : 's'}`;
