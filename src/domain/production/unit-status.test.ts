import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { StubFacts, UnitStage } from './stages';
import { nextStage, stubsOf, workStages } from './stages';
import type { DispatchFacts, NewestRun, UnitAnswer } from './unit-status';
import { unitCan } from './unit-status';

const reasons = (answer: UnitAnswer) => (answer.ok ? [] : answer.reasons);
const at = (stage: UnitStage, more: { holds?: number; openRework?: boolean } = {}) => ({
  stage,
  holds: 0,
  openRework: false,
  ...more,
});

describe('the stubs of the tag', () => {
  const facts: StubFacts = {
    stage: 'final_test',
    onHold: false,
    openRework: false,
    certificateMissing: true,
    balanceDue: true,
    finishedAt: { kit: new Date('2027-03-02T14:10:00Z') },
  };
  const shown = (change: Partial<StubFacts>) =>
    stubsOf({ ...facts, ...change }).map((s) => [s.label, s.state, s.reason]);

  it('are torn, present or waiting, each with its reason', () => {
    expect(shown({})).toEqual([
      ['Kit', 'torn', 'torn off'],
      ['Boards', 'torn', 'torn off'],
      ['Align', 'torn', 'torn off'],
      ['Final test', 'present', 'now'],
      ['Pack', 'waiting', 'waits for the certificate'],
      ['Ship', 'waiting', 'waits for the balance'],
    ]);
    expect(stubsOf(facts).map((stub) => stub.tornAt)).toEqual([
      facts.finishedAt.kit,
      null,
      null,
      null,
      null,
      null,
    ]);
  });

  it('name the stage before, a hold and a rework', () => {
    expect(
      shown({ stage: 'kit', certificateMissing: false, balanceDue: false }).map(([, , reason]) => reason),
    ).toEqual([
      'now',
      'waits for kit',
      'waits for boards',
      'waits for align',
      'waits for final test',
      'waits for pack',
    ]);
    expect(shown({ onHold: true })[3]).toEqual(['Final test', 'present', 'on hold']);
    expect(shown({ openRework: true })[3]).toEqual(['Final test', 'present', 'in rework']);
    expect(shown({ stage: 'pack' })[4]).toEqual(['Pack', 'present', 'waits for the certificate']);
  });

  it('are all torn from a unit that is gone, and at most one is present', () => {
    expect(shown({ stage: 'gone' }).every(([, state]) => state === 'torn')).toBe(true);
    for (const stage of workStages) {
      const states = stubsOf({ ...facts, stage }).map((stub) => stub.state);
      expect(states.filter((state) => state === 'present')).toHaveLength(1);
      expect([...states].sort((a, b) => 'tpw'.indexOf(a.charAt(0)) - 'tpw'.indexOf(b.charAt(0)))).toEqual(
        states,
      );
    }
  });

  it('follow one another until the unit is gone', () => {
    expect(workStages.map(nextStage)).toEqual(['boards', 'align', 'final_test', 'pack', 'ship', 'gone']);
  });
});

describe('picking', () => {
  it.each([
    [at('kit'), []],
    [at('boards'), ['Its kit is finished; put it into rework to take another part.']],
    [at('final_test', { openRework: true }), []],
    [at('kit', { holds: 1 }), ['One hold is on it.']],
    [at('gone'), ['It has left the works.']],
  ])('%j', (unit, expected) => expect(reasons(unitCan.pick(unit))).toEqual(expected));
});

describe('ticking a step', () => {
  it.each([
    [at('boards'), 'boards', []],
    [at('boards'), 'align', ['Align waits: the unit is at boards.']],
    [at('align'), 'kit', ['Kit is torn off; put the unit into rework to do a step again.']],
    [at('final_test', { openRework: true }), 'boards', []],
    [at('kit', { openRework: true }), 'boards', ['Boards waits: the unit is at kit.']],
    [at('boards', { holds: 2 }), 'boards', ['2 holds are on it.']],
    [at('gone'), 'kit', ['It has left the works.']],
  ] as const)('%j, %s', (unit, stage, expected) =>
    expect(reasons(unitCan.tick(unit, stage))).toEqual(expected),
  );
});

describe('opening a run', () => {
  const ready = { ...at('final_test'), openSteps: 0, runOpen: false };
  it.each([
    [{}, []],
    [{ stage: 'pack' as const }, []],
    [{ holds: 1 }, ['One hold is on it.']],
    [{ openRework: true }, ['It is in rework.']],
    [{ stage: 'align' as const, openSteps: 2 }, ['2 build steps are not done.']],
    [{ stage: 'align' as const }, ['It is still at align.']],
    [{ openSteps: 1 }, ['One build step is not done.']],
    [{ runOpen: true }, ['A run is open already.']],
    [{ stage: 'gone' as const }, ['It has left the works.']],
  ])('with %j', (change, expected) =>
    expect(reasons(unitCan.openRun({ ...ready, ...change }))).toEqual(expected),
  );
});

describe('rework', () => {
  it.each([
    [at('final_test'), []],
    [at('ship', { holds: 1 }), []],
    [at('kit'), ['Its kit is not finished; change the kit instead.']],
    [at('pack', { openRework: true }), ['It is in rework already.']],
    [at('gone'), ['It has left the works.']],
  ])('%j', (unit, expected) => expect(reasons(unitCan.rework(unit))).toEqual(expected));
});

describe('a unit is dispatched only', () => {
  const run: NewestRun = { id: 7, state: 'closed', result: 'passed' };
  const certificate = { testRunId: 7, issued: true, buyerContactId: 3, destination: 'DE', pdfReady: true };
  const order = { paidInFull: true, contactId: 3, destination: 'DE' };
  const ready: DispatchFacts = { ...at('ship'), newestRun: run, certificate, order, addressGaps: [] };

  it('when all of the rule holds', () => {
    expect(unitCan.dispatch(ready)).toEqual({ ok: true });
    expect(unitCan.dispatch({ ...ready, newestRun: { ...run, result: 'passed_by_concession' } })).toEqual({
      ok: true,
    });
  });

  const broken: [string, Partial<DispatchFacts>, string[]][] = [
    ['no run', { newestRun: null }, ['It has no final test.']],
    [
      'an open run',
      { newestRun: { ...run, state: 'open', result: null } },
      ['Its newest run is not closed.'],
    ],
    ['a failed run', { newestRun: { ...run, result: 'failed' } }, ['Its newest run did not pass.']],
    ['an undecided run', { newestRun: { ...run, result: 'undecided' } }, ['Its newest run is undecided.']],
    ['no certificate', { certificate: null }, ['The certificate of its newest run is not issued.']],
    [
      'a certificate not issued',
      { certificate: { ...certificate, issued: false } },
      ['The certificate of its newest run is not issued.'],
    ],
    [
      'the certificate of an older run',
      { newestRun: { ...run, id: 8 } },
      ['The certificate of its newest run is not issued.'],
    ],
    [
      'no PDF yet',
      { certificate: { ...certificate, pdfReady: false } },
      ['The certificate is still being printed.'],
    ],
    [
      'another buyer',
      { certificate: { ...certificate, buyerContactId: 4 } },
      ['Its certificate is made out to another buyer.'],
    ],
    [
      'another destination',
      { order: { ...order, destination: 'US' } },
      ['Its certificate was judged for another destination.'],
    ],
    ['a hold', { holds: 1 }, ['One hold is on it.']],
    ['open rework', { openRework: true }, ['It is in rework.']],
    ['a balance', { order: { ...order, paidInFull: false } }, ['The order waits for the balance.']],
    ['no order', { order: null }, ['It is meant for no order.']],
    [
      'gaps in the address',
      { addressGaps: ['the street', 'the town', 'the postcode'] },
      ['The address lacks the street, the town and the postcode.'],
    ],
    ['nothing left to send', { stage: 'gone' }, ['It has left the works.']],
  ];

  it.each(broken)('never with %s', (_name, change, expected) => {
    expect(reasons(unitCan.dispatch({ ...ready, ...change }))).toEqual(expected);
  });

  it('and every reason is given at once', () => {
    expect(
      reasons(
        unitCan.dispatch({
          ...ready,
          holds: 2,
          certificate: { ...certificate, buyerContactId: 9 },
          order: { ...order, paidInFull: false },
          addressGaps: ['the street'],
        }),
      ),
    ).toEqual([
      '2 holds are on it.',
      'Its certificate is made out to another buyer.',
      'The order waits for the balance.',
      'The address lacks the street.',
    ]);
  });

  it('whatever else is true beside one broken part of the rule', () => {
    fc.assert(
      fc.property(fc.subarray(broken, { minLength: 1 }), (chosen) => {
        const facts = chosen.reduce<DispatchFacts>((all, [, change]) => ({ ...all, ...change }), ready);
        expect(unitCan.dispatch(facts).ok).toBe(false);
      }),
    );
  });

  it('and packed without regard to payment or address', () => {
    expect(unitCan.pack({ ...at('pack'), newestRun: run, certificate })).toEqual({ ok: true });
    expect(reasons(unitCan.pack({ ...at('pack'), newestRun: run, certificate: null }))).toEqual([
      'The certificate of its newest run is not issued.',
    ]);
  });
});
