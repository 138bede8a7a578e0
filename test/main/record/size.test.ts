import { expect, it } from 'vitest';
import { freshFolder, LEAT } from './a-mission.ts';
import { bytesAnHour } from './moving-machine.ts';

// The bar of design/quality.md: at most 12 MB an hour at full rate, path events included.
it('takes at most 12 MB an hour of a machine that moves and steers without a pause', async () => {
  expect(await bytesAnHour(await freshFolder(), LEAT, 4)).toBeLessThanOrEqual(12e6);
});
