/** `npm run bench`: figures as ratios within one run, into bench-results.json; `npm run bench -- faults N`: the campaign. */
import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { faultCampaign } from './faults.ts';
import { lineFigures } from './line.ts';
import { outlookFigures } from './outlook.ts';
import { recordFigures } from './record.ts';

const printFigures = async (): Promise<void> => {
  const figures = [...outlookFigures(), ...(await lineFigures()), ...(await recordFigures())];
  for (const { name, milliseconds, ratio, of } of figures)
    process.stdout.write(
      `${name.padEnd(76)} ${milliseconds.toFixed(2).padStart(10)} ms  ${(100 * ratio).toFixed(1).padStart(6)} % ${of}\n`,
    );
  writeFileSync(
    join(import.meta.dirname, '../../bench-results.json'),
    `${JSON.stringify(figures, null, 2)}\n`,
  );
};

const [what, count] = process.argv.slice(2);
if (what === undefined) await printFigures();
else if (what === 'faults' && Number(count ?? 1000) > 0) await faultCampaign(Number(count ?? 1000));
else {
  process.stderr.write('Usage: npm run bench, or npm run bench -- faults [number of runs]\n');
  process.exitCode = 2;
}
