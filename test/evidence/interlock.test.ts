import { describe, expect, it } from 'vitest';
import { judgeWayBack } from '../../shared-model/retraction/judge.ts';
import { builtInRig } from '../main/rig/built-in-rig.ts';
import { randomState, trueRatio } from './random-state.ts';

const STATES = 10_000;

// The bar of design/quality.md. The plant is the built-in rig's: its own formulas, its own parameters for every state.
describe('the interlock against a plant that shares neither its formulas nor its parameters', () => {
  it(`permits no pull that folds the body in ${STATES} random states, which a margin of 1 would`, () => {
    const rig = builtInRig();
    const permitted = { safe: 0, folded: [] as number[] };
    const refused = { safe: 0, folds: 0 };
    let foldedWithoutMargin = 0;
    let closest = Number.POSITIVE_INFINITY;
    for (let seed = 1; seed <= STATES; seed++) {
      const state = randomState(rig, seed);
      const ratio = trueRatio(state);
      const folds = ratio < 1;
      const { kind } = judgeWayBack(state.input);
      if (kind === 'clear') closest = Math.min(closest, ratio);
      if (kind === 'clear' && folds) permitted.folded.push(seed);
      else if (kind === 'clear') permitted.safe++;
      else refused[folds ? 'folds' : 'safe']++;
      if (folds && judgeWayBack({ ...state.input, margin: 1 }).kind === 'clear') foldedWithoutMargin++;
    }
    const safe = permitted.safe + refused.safe;
    process.stdout.write(
      `${STATES} random states: ${permitted.safe} pulls permitted, none of which folds; ${refused.folds} refused that would fold; ` +
        `${refused.safe} refused needlessly, ${((100 * refused.safe) / safe).toFixed(1)} % of the safe ones. ` +
        `The closest permitted pull left the true body ${closest.toFixed(2)} times its load; without a margin ${foldedWithoutMargin} would have folded.\n`,
    );
    expect(permitted.folded).toEqual([]);
    // The campaign looks where it matters: many states on both sides, and some that only the margin catches.
    expect(permitted.safe).toBeGreaterThan(STATES / 10);
    expect(refused.folds).toBeGreaterThan(STATES / 10);
    expect(foldedWithoutMargin).toBeGreaterThan(0);
  });
});
