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
  for (const one of found) {
    const state = one.trouble ?? (one.ended === null ? 'not closed' : 'finished');
    output.out(
      `${one.started}  ${one.place}${one.simulated ? ' (simulated)' : ''}  ${one.longest.toFixed(2)} m  ${one.branchPoints} branch points  ${one.waypoints} waypoints  ${one.alarms} alarms  ${state}\n  ${one.folder}`,
    );
  }
  return 0;
};
