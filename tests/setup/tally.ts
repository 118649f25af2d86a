/** The outcome of one runner. */
export interface Tally {
  passed: number;
  failed: number;
  /** Name and reason of each test that was not run. */
  skipped: { name: string; reason: string }[];
}

interface PlaywrightSuite {
  title: string;
  suites?: PlaywrightSuite[];
  specs?: {
    title: string;
    tests: { status: string; annotations: { type: string; description?: string }[] }[];
  }[];
}

/** What Playwright's JSON reporter writes, as far as it is counted. */
export interface PlaywrightReport {
  suites: PlaywrightSuite[];
  /** Errors outside of tests. */
  errors: unknown[];
}

/** Counts a Playwright JSON report; errors outside of tests count as failed. */
export function tallyPlaywright(report: PlaywrightReport): Tally {
  const tally: Tally = { passed: 0, failed: report.errors.length, skipped: [] };
  const walk = (suite: PlaywrightSuite, path: string): void => {
    for (const spec of suite.specs ?? []) {
      for (const test of spec.tests) {
        if (test.status === 'expected') tally.passed += 1;
        else if (test.status === 'skipped') {
          const note = test.annotations.find(({ type }) => type === 'skip' || type === 'fixme');
          tally.skipped.push({
            name: `${path} ${spec.title}`,
            reason: note?.description ?? 'no reason given',
          });
        } else tally.failed += 1;
      }
    }
    for (const nested of suite.suites ?? []) walk(nested, `${path} ${nested.title}`);
  };
  for (const suite of report.suites) walk(suite, suite.title);
  return tally;
}

/** Adds up runners. */
export function sum(tallies: readonly Tally[]): Tally {
  return {
    passed: tallies.reduce((total, { passed }) => total + passed, 0),
    failed: tallies.reduce((total, { failed }) => total + failed, 0),
    skipped: tallies.flatMap(({ skipped }) => skipped),
  };
}
