import { expect, test } from 'vitest';
import { sum, tallyPlaywright } from './tally';

test('a browser report counts nested tests, errors outside of tests, and the reasons of skipped ones', () => {
  const report = {
    errors: [{ message: 'a file that does not load' }],
    suites: [
      {
        title: 'path.e2e.ts',
        specs: [
          { title: 'a', tests: [{ status: 'expected', annotations: [] }] },
          { title: 'b', tests: [{ status: 'unexpected', annotations: [] }] },
        ],
        suites: [
          {
            title: 'inner',
            specs: [
              {
                title: 'c',
                tests: [{ status: 'skipped', annotations: [{ type: 'skip', description: 'why' }] }],
              },
              { title: 'd', tests: [{ status: 'flaky', annotations: [] }] },
            ],
          },
        ],
      },
    ],
  };
  expect(tallyPlaywright(report)).toEqual({
    passed: 1,
    failed: 3,
    skipped: [{ name: 'path.e2e.ts inner c', reason: 'why' }],
  });
});

test('runners add up', () => {
  const one = { passed: 2, failed: 1, skipped: [{ name: 'x', reason: 'y' }] };
  expect(sum([one, one])).toEqual({ passed: 4, failed: 2, skipped: [...one.skipped, ...one.skipped] });
});
