/** `npm test`: fetches what is missing, then lint, types, unit and end-to-end tests; the last line gives the totals. */
import { spawnSync } from 'node:child_process';
import { existsSync, mkdirSync, readFileSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { fetchPrograms } from './peers/fetch-programs.ts';
import { endToEndTotals, NOTHING, skipsAreFailures, sum, type Totals, unitTotals } from './totals.ts';

const PROJECT = join(import.meta.dirname, '..');
const RESULTS = join(PROJECT, 'test-results');
const UNIT = join(RESULTS, 'unit.json');
const END_TO_END = join(RESULTS, 'e2e.json');

const say = (line: string): void => void process.stdout.write(`${line}\n`);

const npmRun = (script: string, ...args: readonly string[]): boolean => {
  say(`\n== ${script}`);
  const windows = process.platform === 'win32';
  const all = ['run', '--silent', script, ...(args.length > 0 ? ['--', ...args] : [])];
  return spawnSync('npm', all, { cwd: PROJECT, stdio: 'inherit', shell: windows }).status === 0;
};

/** A check without tests of its own: silent when it passes, one failure when it does not. */
const check = (script: string): Totals =>
  npmRun(script) ? NOTHING : { ...NOTHING, failed: [`npm run ${script}`] };

/** A run of tests, counted from its own report; that it failed without a failed test is a failure too. */
const tests = (
  script: string,
  args: readonly string[],
  report: string,
  totalsOf: (r: unknown) => Totals,
): Totals => {
  const succeeded = npmRun(script, ...args);
  const totals = existsSync(report) ? totalsOf(JSON.parse(readFileSync(report, 'utf8'))) : NOTHING;
  const unexplained = !succeeded && totals.failed.length === 0;
  return unexplained ? { ...totals, failed: [`npm run ${script} ended with an error`] } : totals;
};

mkdirSync(RESULTS, { recursive: true });
for (const report of [UNIT, END_TO_END]) rmSync(report, { force: true });
fetchPrograms();
const unitReporters = ['--reporter=default', '--reporter=json', `--outputFile.json=${UNIT}`];
const all = sum([
  check('lint'),
  check('types'),
  tests('test:unit', unitReporters, UNIT, unitTotals),
  tests('test:e2e', [], END_TO_END, endToEndTotals),
]);
const { passed, failed, skipped } = process.env.CI === undefined ? all : skipsAreFailures(all);

say('');
for (const name of skipped) say(`Skipped: ${name}`);
for (const name of failed) say(`Failed: ${name}`);
say(`${passed} passed, ${failed.length} failed`);
process.exitCode = failed.length > 0 || passed === 0 ? 1 : 0;
