import type { BuildStage, UnitStage } from './stages';
import { isPast, stageLabels } from './stages';
import { listed } from '~/lib/listed';

export type UnitAnswer = { ok: true } | { ok: false; reasons: string[] };

export interface UnitFacts {
  stage: UnitStage;
  /** Open holds that apply: on the unit, its batch or its order, less those that the owner overruled in writing. */
  holds: number;
  openRework: boolean;
}

export interface OpenRunFacts extends UnitFacts {
  /** Build steps that are not ticked yet. */
  openSteps: number;
  /** A run of the unit is open already. */
  runOpen: boolean;
}

export interface NewestRun {
  id: number;
  state: 'open' | 'closed';
  result: 'passed' | 'passed_by_concession' | 'undecided' | 'failed' | null;
}

/** The unit's newest certificate, and for whom and where its run was judged. */
export interface CertificateFacts {
  testRunId: number;
  issued: boolean;
  buyerContactId: number | null;
  destination: string | null;
  pdfReady: boolean;
}

export interface PackFacts extends UnitFacts {
  newestRun: NewestRun | null;
  certificate: CertificateFacts | null;
}

export interface DispatchFacts extends PackFacts {
  /** Null where the unit is meant for no order. */
  order: { paidInFull: boolean; contactId: number; destination: string } | null;
  /** What the address lacks, in words. */
  addressGaps: string[];
}

/**
 * What may be done with a unit, and everything that stands against it. Asked by buttons and services alike; the
 * service asks again with the unit's row locked.
 */
export const unitCan = {
  /** Put a part from a lot into it: while it is kitted, and in rework. */
  pick: (unit: UnitFacts): UnitAnswer =>
    answer([
      ...standing(unit),
      ...(unit.stage === 'kit' || unit.stage === 'gone' || unit.openRework
        ? []
        : ['Its kit is finished; put it into rework to take another part.']),
    ]),

  /** Tick a build step of a stage: where the unit is, or again in rework. */
  tick: (unit: UnitFacts, stage: BuildStage): UnitAnswer =>
    answer([...standing(unit), ...(unit.stage === 'gone' ? [] : tickReasons(unit, stage))]),

  /** Open a final test. */
  openRun: (unit: OpenRunFacts): UnitAnswer =>
    answer([
      ...standing(unit),
      ...(unit.openRework ? ['It is in rework.'] : []),
      ...(unit.openSteps > 0
        ? [count(unit.openSteps, 'build step is', 'build steps are') + ' not done.']
        : []),
      ...(unit.runOpen ? ['A run is open already.'] : []),
      ...(unit.stage !== 'gone' && !isPast('align', unit.stage) && unit.openSteps === 0
        ? [`It is still at ${stageLabels[unit.stage].toLowerCase()}.`]
        : []),
    ]),

  /** Put it into rework, from any stage after its kit. */
  rework: (unit: UnitFacts): UnitAnswer =>
    answer([
      ...(unit.stage === 'gone' ? ['It has left the works.'] : []),
      ...(unit.stage === 'kit' ? ['Its kit is not finished; change the kit instead.'] : []),
      ...(unit.openRework ? ['It is in rework already.'] : []),
    ]),

  /** Pack it with its printed test sheet. */
  pack: (unit: PackFacts): UnitAnswer => answer([...standing(unit), ...proofReasons(unit)]),

  /**
   * Send it: its newest run is closed and passed, that run's certificate is issued for this buyer and destination, no
   * hold is on it, its order is paid in full and the address is complete.
   */
  dispatch: (unit: DispatchFacts): UnitAnswer =>
    answer([...standing(unit), ...proofReasons(unit), ...buyerReasons(unit)]),
};

function answer(reasons: string[]): UnitAnswer {
  return reasons.length === 0 ? { ok: true } : { ok: false, reasons };
}

function standing({ stage, holds }: UnitFacts): string[] {
  return [
    ...(stage === 'gone' ? ['It has left the works.'] : []),
    ...(holds > 0 ? [`${count(holds, 'hold is', 'holds are')} on it.`] : []),
  ];
}

function tickReasons(unit: UnitFacts, stage: BuildStage): string[] {
  if (unit.stage === stage) return [];
  const label = stageLabels[stage];
  if (!isPast(stage, unit.stage)) {
    const at = unit.stage === 'gone' ? 'gone' : stageLabels[unit.stage].toLowerCase();
    return [`${label} waits: the unit is at ${at}.`];
  }
  return unit.openRework ? [] : [`${label} is torn off; put the unit into rework to do a step again.`];
}

function proofReasons({ newestRun: run, certificate, openRework }: PackFacts): string[] {
  const rework = openRework ? ['It is in rework.'] : [];
  if (!run) return [...rework, 'It has no final test.'];
  if (run.state !== 'closed') return [...rework, 'Its newest run is not closed.'];
  if (run.result !== 'passed' && run.result !== 'passed_by_concession') {
    return [
      ...rework,
      run.result === 'undecided' ? 'Its newest run is undecided.' : 'Its newest run did not pass.',
    ];
  }
  if (!certificate?.issued || certificate.testRunId !== run.id) {
    return [...rework, 'The certificate of its newest run is not issued.'];
  }
  return certificate.pdfReady ? rework : [...rework, 'The certificate is still being printed.'];
}

function buyerReasons({ order, certificate, addressGaps }: DispatchFacts): string[] {
  if (!order) return ['It is meant for no order.'];
  const issued = certificate?.issued ? certificate : null;
  return [
    ...(issued && issued.buyerContactId !== order.contactId
      ? ['Its certificate is made out to another buyer.']
      : []),
    ...(issued && issued.destination !== order.destination
      ? ['Its certificate was judged for another destination.']
      : []),
    ...(order.paidInFull ? [] : ['The order waits for the balance.']),
    ...(addressGaps.length > 0 ? [`The address lacks ${listed(addressGaps)}.`] : []),
  ];
}

function count(n: number, one: string, many: string): string {
  return n === 1 ? `One ${one}` : `${n} ${many}`;
}
