/** What a mission is, as it stands in its manifest and log from the start. */
export interface MissionFacts {
  readonly mission: string;
  readonly place: string;
  readonly rig: string;
  readonly simulated: boolean;
  readonly software: string;
}

/** Folder of a mission: UTC stamp, place, and the mark of a simulated rig. `part` counts folders of one mission from 1. */
export const folderName = (started: string, facts: MissionFacts, part: number): string => {
  const slug = facts.place
    .normalize('NFKD')
    .replace(/\p{M}/gu, '')
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, '-')
    .slice(0, 60)
    .replace(/^-|-$/g, '');
  const stamp = started.replaceAll(':', '-').replace(/\.\d+/, '');
  const words = [stamp, slug || 'mission', facts.mission.slice(0, 6).replace(/[^A-Za-z0-9]/g, '')];
  if (part > 1) words.push(`part-${part}`);
  if (facts.simulated) words.push('simulated');
  return words.filter((word) => word !== '').join('-');
};
