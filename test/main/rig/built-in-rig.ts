import { BUILT_IN_RIG_FILE, loadRigFile } from '../../../main/rig/rig-file.ts';
import type { RigDescription } from '../../../main/rig/signal.ts';

/** The built-in rig as its own file describes it. */
export const builtInRig = (): RigDescription => {
  const result = loadRigFile(BUILT_IN_RIG_FILE);
  if (!result.ok) throw new Error(result.errors.join('\n'));
  return result.rig;
};
