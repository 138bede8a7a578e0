/** `npm run bench`: figures as ratios within one run; writes bench-results.json. */
import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { lineFigures } from './line.ts';
import { outlookFigures } from './outlook.ts';
import { recordFigures } from './record.ts';

const figures = [...outlookFigures(), ...(await lineFigures()), ...(await recordFigures())];
for (const { name, milliseconds, ratio, of } of figures)
  process.stdout.write(
    `${name.padEnd(76)} ${milliseconds.toFixed(2).padStart(10)} ms  ${(100 * ratio).toFixed(1).padStart(6)} % ${of}\n`,
  );
writeFileSync(join(import.meta.dirname, '../../bench-results.json'), `${JSON.stringify(figures, null, 2)}\n`);
