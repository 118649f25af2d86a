import { describe, expect, it } from 'vitest';
import { standingOf } from './standing';

const first = { id: 1, number: 'TC-2027-00001', letter: '', testRunId: 10, replacesId: null };
const amended = { id: 2, number: 'TC-2027-00001', letter: 'A', testRunId: 10, replacesId: 1 };
const twice = { id: 4, number: 'TC-2027-00001', letter: 'B', testRunId: 10, replacesId: 2 };
const again = { id: 3, number: 'TC-2027-00002', letter: '', testRunId: 11, replacesId: null };

describe('where a certificate stands', () => {
  it('is the one that counts while it is alone', () => {
    expect(standingOf(1, [first])).toEqual({ successor: null, newest: null, isTestedAgain: false });
  });

  it('names its immediate successor, and the letter that counts', () => {
    const issued = [first, amended, twice];
    expect(standingOf(1, issued)).toEqual({ successor: amended, newest: twice, isTestedAgain: false });
    expect(standingOf(2, issued)).toEqual({ successor: twice, newest: twice, isTestedAgain: false });
    expect(standingOf(4, issued)).toEqual({ successor: null, newest: null, isTestedAgain: false });
  });

  it('does not let an amendment of an older test, issued later, pass for the newest', () => {
    const issued = [first, amended, again, twice];
    expect(standingOf(3, issued).newest).toBeNull();
    expect(standingOf(4, issued)).toEqual({ successor: null, newest: again, isTestedAgain: true });
    expect(standingOf(1, issued)).toEqual({ successor: amended, newest: again, isTestedAgain: true });
  });
});
