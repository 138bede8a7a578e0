import { homedir } from 'node:os';
import { join, resolve } from 'node:path';
import { createInterface } from 'node:readline';
import { Command, InvalidArgumentError } from 'commander';
import { defaultMargin } from '../shared-model/retraction/judge.ts';
import { checkRig, type Output } from './commands/check-rig.ts';
import { missions } from './commands/missions.ts';
import { outlookForRig, runOutlook } from './commands/outlook.ts';
import { simulate } from './commands/simulate.ts';
import { onParentGone } from './parent-watch.ts';
import { BUILT_IN_RIG_FILE, loadRigFile } from './rig/rig-file.ts';
import { withTrials } from './rig/trials.ts';
import { FAULTS, type Fault } from './simulator/built-in-rig.ts';

// `foldback check-rig | head` has read enough: that is no error.
process.stdout.on('error', (error: NodeJS.ErrnoException) => {
  if (error.code !== 'EPIPE') throw error;
  process.exit(0);
});

const output: Output = {
  out: (line) => process.stdout.write(`${line}\n`),
  error: (line) => process.stderr.write(`${line}\n`),
};

const number =
  (low: number, high: number) =>
  (text: string): number => {
    const value = Number(text);
    if (text.trim() === '' || !(value >= low && value <= high))
      throw new InvalidArgumentError(`Allowed is a number from ${low} to ${high}.`);
    return value;
  };

const faultAt = (text: string, before: readonly { name: Fault; after: number }[]) => {
  const [name, after = '0'] = text.split('@');
  if (!FAULTS.includes(name as Fault)) throw new InvalidArgumentError(`Allowed are ${FAULTS.join(', ')}.`);
  return [...before, { name: name as Fault, after: number(0, 1e6)(after) }];
};

const program = new Command('foldback').description(
  "Foldback's command line: planning, checking and simulating.",
);

program
  .command('outlook')
  .description(
    'Reads one JSON case a line on standard input and prints one JSON result a line; or judges a rig with --rig.',
  )
  .option('--rig <file>', 'judge this rig instead; "built-in" for the built-in one')
  .option('--length <m>', 'body length [m]', number(0, 1000))
  .option('--pressure <kPa>', 'body pressure [kPa gauge]', number(0.001, 1000))
  .option('--bend <rad>', 'total bend, spread evenly [rad]', number(0, 100), 0)
  .option('--tip-retractor', 'with a tip retractor', false)
  .addHelpText(
    'after',
    `
A case, all SI; only body, pressure and segments are required:
  {"id","body":{"radius","wall","E","G"},"pressure","inversion":{"yield","rateCoefficient","rateExponent"},"tipSpeed",
   "friction","tailWeight","segments":[{"length","curvature","plane"}],"payout","margin","collapseFraction",
   "eccentricityFloor","guideSetback","tipRetractor","heldTension","retractTo",
   "gravity":{"weight","payload","direction","support"}}
For fabrics give membrane stiffnesses as E and G [N/m] with wall 1. Defaults: margin 1.25, collapseFraction 0.8,
eccentricityFloor 0.1, payout twice the length, all else 0. support: metres from the base that ground carries, "ground"
for all or "none"; without gravity nothing hangs. With tipRetractor, baseTension is the heldTension.
A result's ratio is null where nothing pulls or no body is out. verdict: invert, buckle, or refuse for bad input.`,
  )
  .action(
    async (options: {
      rig?: string;
      length?: number;
      pressure?: number;
      bend: number;
      tipRetractor: boolean;
    }) => {
      if (options.rig === undefined) {
        await runOutlook(
          createInterface({ input: process.stdin, crlfDelay: Number.POSITIVE_INFINITY }),
          output.out,
        );
        return;
      }
      const loaded = loadRigFile(options.rig === 'built-in' ? BUILT_IN_RIG_FILE : options.rig);
      if (!loaded.ok) return failWith(loaded.errors);
      if (options.length === undefined) return failWith(['--rig needs --length, the body length in metres.']);
      // What was measured on the machine counts for the plan too.
      const { rig, trouble } = withTrials(loaded.rig, null, new Date().toISOString());
      if (trouble !== null) return failWith([trouble]);
      const pressure =
        (options.pressure ?? (rig.limits.bodyPressureMin + rig.limits.bodyPressureMax) / 2000) * 1000;
      const plan = {
        length: options.length,
        pressure,
        bend: options.bend,
        margin: defaultMargin(rig.body),
        tipRetractor: options.tipRetractor,
      };
      output.out(JSON.stringify(outlookForRig(rig, plan)));
    },
  );

program
  .command('check-rig [file]')
  .description("Checks a rig file, the built-in rig's when none is given.")
  .option('--json', 'print the signals as JSON', false)
  .option('--live', 'read every signal once over the line and print value, unit and quality', false)
  .option('--serial <path>', 'serial port instead of the one in the rig file')
  .action(async (file: string | undefined, options: { json: boolean; live: boolean; serial?: string }) => {
    process.exitCode = await checkRig({ file, ...options }, output);
  });

program
  .command('simulate')
  .description('Serves the built-in rig on a serial device or pseudo-terminal until it is stopped.')
  .requiredOption('--port <path>', 'serial device')
  .option('--rig <file>', 'rig file whose register map is served')
  .option('--seed <number>', 'seed of the true parameters', number(0, 2 ** 31), 1)
  .option(
    '--fault <name@seconds>',
    `simulate a fault; may be given more than once (${FAULTS.join(', ')})`,
    faultAt,
    [],
  )
  .action(
    async (options: {
      port: string;
      rig?: string;
      seed: number;
      fault: { name: Fault; after: number }[];
    }) => {
      const stop = new AbortController();
      for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) process.on(signal, () => stop.abort());
      onParentGone(() => stop.abort());
      process.exitCode = await simulate(
        { port: options.port, rigFile: options.rig, seed: options.seed, faults: options.fault },
        output,
        stop.signal,
      );
      process.exit();
    },
  );

program
  .command('missions [folder]')
  .description('Lists the missions on disk.')
  .option('--json', 'as JSON', false)
  .action(async (folder: string | undefined, options: { json: boolean }) => {
    process.exitCode = await missions(
      resolve(folder ?? join(homedir(), 'foldback-missions')),
      options.json,
      output,
    );
  });

const failWith = (lines: readonly string[]): void => {
  for (const line of lines) output.error(line);
  process.exitCode = 1;
};

await program.parseAsync();
