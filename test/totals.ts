import { z } from 'zod';

/** What came out of one run of tests. */
export interface Totals {
  readonly passed: number;
  /** One sentence a failure. */
  readonly failed: readonly string[];
  /** Name and, where it was given, the reason. */
  readonly skipped: readonly string[];
}

export const NOTHING: Totals = { passed: 0, failed: [], skipped: [] };

export const sum = (totals: readonly Totals[]): Totals => ({
  passed: totals.reduce((count, one) => count + one.passed, 0),
  failed: totals.flatMap((one) => one.failed),
  skipped: totals.flatMap((one) => one.skipped),
});

const vitestReport = z.object({
  testResults: z.array(
    z.object({
      name: z.string(),
      status: z.string(),
      assertionResults: z.array(z.object({ status: z.string(), fullName: z.string() })),
    }),
  ),
});

/** Totals of vitest's JSON report. A file that could not even be loaded counts as one failure. */
export const unitTotals = (report: unknown): Totals =>
  sum(
    vitestReport.parse(report).testResults.map(({ name, status, assertionResults }) => {
      const named = (wanted: (status: string) => boolean): string[] =>
        assertionResults.filter((one) => wanted(one.status)).map((one) => one.fullName);
      const failed = named((one) => one === 'failed');
      return {
        passed: named((one) => one === 'passed').length,
        failed: status === 'failed' && failed.length === 0 ? [`${name} could not be run`] : failed,
        skipped: named((one) => one !== 'failed' && one !== 'passed'),
      };
    }),
  );

const playwrightSpec = z.object({
  title: z.string(),
  file: z.string(),
  tests: z.array(
    z.object({
      status: z.enum(['expected', 'unexpected', 'flaky', 'skipped']),
      annotations: z.array(z.object({ type: z.string(), description: z.string().optional() })),
    }),
  ),
});
interface PlaywrightSuite {
  readonly specs: z.output<typeof playwrightSpec>[];
  readonly suites?: PlaywrightSuite[] | undefined;
}
const playwrightSuite: z.ZodType<PlaywrightSuite> = z.object({
  specs: z.array(playwrightSpec),
  get suites() {
    return z.array(playwrightSuite).optional();
  },
});
const playwrightReport = z.object({
  suites: z.array(playwrightSuite),
  errors: z.array(z.object({ message: z.string().optional() })),
});

/** Totals of Playwright's JSON report. A test that passed only when it was tried again has failed. */
export const endToEndTotals = (report: unknown): Totals => {
  const { suites, errors } = playwrightReport.parse(report);
  const specs = suites.flatMap(specsOf);
  return sum([
    { ...NOTHING, failed: errors.map(({ message }) => message ?? 'Playwright met an error') },
    ...specs.flatMap(({ title, file, tests }) =>
      tests.map(({ status, annotations }): Totals => {
        const name = `${file} ${title}`;
        if (status === 'expected') return { ...NOTHING, passed: 1 };
        if (status !== 'skipped') return { ...NOTHING, failed: [name] };
        const why = annotations.find((one) => one.type === 'skip')?.description;
        return { ...NOTHING, skipped: [why === undefined ? name : `${name} (${why})`] };
      }),
    ),
  ]);
};

const specsOf = (suite: PlaywrightSuite): PlaywrightSuite['specs'] => [
  ...suite.specs,
  ...(suite.suites ?? []).flatMap(specsOf),
];

/** Where nothing may be skipped, every skipped test but those of Electron's window has failed. */
export const skipsAreFailures = ({ passed, failed, skipped }: Totals): Totals => {
  const excused = skipped.filter((name) => name.startsWith('electron.spec.ts '));
  const inexcusable = skipped.filter((name) => !excused.includes(name)).map((name) => `skipped: ${name}`);
  return { passed, failed: [...failed, ...inexcusable], skipped: excused };
};
