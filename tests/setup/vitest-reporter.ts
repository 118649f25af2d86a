import { writeFileSync } from 'node:fs';
import type { SerializedError, TestModule } from 'vitest/node';
import type { Tally } from './tally';

/** Writes the outcome to the file of RIGWRIGHT_TALLY: Vitest's own JSON leaves out why a test was skipped. */
export default class TallyReporter {
  onTestRunEnd(modules: readonly TestModule[], unhandled: readonly SerializedError[]): void {
    const tally: Tally = { passed: 0, failed: unhandled.length, skipped: [] };
    for (const module of modules) {
      // A file that does not load, or a hook that fails, is a failure even when no test ran.
      tally.failed += module.errors().length;
      for (const suite of module.children.allSuites()) tally.failed += suite.errors().length;
      for (const test of module.children.allTests()) {
        const result = test.result();
        if (result.state === 'passed') tally.passed += 1;
        else if (result.state === 'skipped') {
          const isTodo = test.options.mode === 'todo';
          tally.skipped.push({
            name: `${module.relativeModuleId} ${test.fullName}`,
            reason: result.note ?? (isTodo ? 'todo' : 'no reason given'),
          });
        } else tally.failed += 1;
      }
    }
    const file = process.env['RIGWRIGHT_TALLY'];
    if (file) writeFileSync(file, JSON.stringify(tally));
  }
}
