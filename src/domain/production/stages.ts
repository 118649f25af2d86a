/** The stubs of a unit's tag, in the order in which they are torn off. */
export const workStages = ['kit', 'boards', 'align', 'final_test', 'pack', 'ship'] as const;
export type WorkStage = (typeof workStages)[number];

/** Where a unit is: at one of its stubs, or gone. */
export const unitStages = [...workStages, 'gone'] as const;
export type UnitStage = (typeof unitStages)[number];

/** Stages whose build steps are ticked one by one; the others are torn off by a run, a parcel, a shipment. */
export const buildStages = ['kit', 'boards', 'align'] as const satisfies readonly WorkStage[];
export type BuildStage = (typeof buildStages)[number];

/** What stands on the stub. */
export const stageLabels: Record<WorkStage, string> = {
  kit: 'Kit',
  boards: 'Boards',
  align: 'Align',
  final_test: 'Final test',
  pack: 'Pack',
  ship: 'Ship',
};

/** The stage after one that is finished. */
export function nextStage(stage: WorkStage): UnitStage {
  return workStages[workStages.indexOf(stage) + 1] ?? 'gone';
}

/** Whether a stage lies before where the unit is. */
export function isPast(stage: WorkStage, at: UnitStage): boolean {
  return at === 'gone' || workStages.indexOf(stage) < workStages.indexOf(at);
}

export interface StubFacts {
  stage: UnitStage;
  onHold: boolean;
  openRework: boolean;
  /** The newest run has no certificate that was issued. */
  certificateMissing: boolean;
  /** Something is still to be paid. */
  balanceDue: boolean;
  /** When stubs were torn off, as far as it is recorded. */
  finishedAt: Partial<Record<WorkStage, Date>>;
}

export interface Stub {
  stage: WorkStage;
  label: string;
  state: 'torn' | 'present' | 'waiting';
  /** Set on a torn stub whose time is recorded. */
  tornAt: Date | null;
  /** What stands under the label: `torn off`, `in rework`, `waits for the certificate`. */
  reason: string;
}

/** The six stubs of a unit's tag with their state and what each waits for. */
export function stubsOf(unit: StubFacts): Stub[] {
  return workStages.map((stage) => {
    const state = isPast(stage, unit.stage) ? 'torn' : stage === unit.stage ? 'present' : 'waiting';
    return {
      stage,
      label: stageLabels[stage],
      state,
      tornAt: state === 'torn' ? (unit.finishedAt[stage] ?? null) : null,
      reason: reasonOf(stage, state, unit),
    };
  });
}

function reasonOf(stage: WorkStage, state: Stub['state'], unit: StubFacts): string {
  if (state === 'torn') return 'torn off';
  if (state === 'present' && unit.onHold) return 'on hold';
  if (state === 'present' && unit.openRework) return 'in rework';
  if (stage === 'pack' && unit.certificateMissing) return 'waits for the certificate';
  if (stage === 'ship' && unit.balanceDue) return 'waits for the balance';
  if (state === 'present') return 'now';
  const before = workStages[workStages.indexOf(stage) - 1];
  return before ? `waits for ${stageLabels[before].toLowerCase()}` : 'waits';
}
