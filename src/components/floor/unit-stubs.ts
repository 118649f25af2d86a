import type { ComponentProps } from 'react';
import type { TagStubs } from '~/components/ui/TagStubs';
import { BAND_KEYS, bandLabel } from '~/domain/bench/bands';
import { formatValue } from '~/domain/bench/format';
import { buildStages, stubsOf } from '~/domain/production/stages';
import type { WorkStage } from '~/domain/production/stages';
import { formatDayOf } from '~/lib/dates';
import type { UnitHistory } from '~/server/queries/production/get-unit-history';

type Stubs = ComponentProps<typeof TagStubs>['stubs'];
type Happening = Stubs[number]['happenings'][number];
type Dated = Happening & { at: Date };

/** The stubs of a unit's tag with what happened under each, and, at the present one, what is to be done next. */
export function unitStubs(history: UnitHistory, timeZone: string, next: Stubs[number]['action']): Stubs {
  const { unit } = history;
  const happened = happeningsOf(history, timeZone);
  const newest = history.runs.at(-1);
  const stubs = stubsOf({
    stage: unit.stage,
    onHold: unit.holds.length > 0,
    openRework: unit.openRework !== null,
    certificateMissing: !history.certificates.some(({ testRunId }) => testRunId === newest?.id),
    balanceDue: unit.balanceDue,
    finishedAt: finishedAt(history),
  });
  return stubs.map(({ stage, label, state, tornAt, reason }) => ({
    key: stage,
    label,
    state,
    note:
      tornAt !== null
        ? `torn off ${formatDayOf(tornAt, timeZone)}`
        : isBuilt(stage) && unit.buildSheetRevisionId === null
          ? 'not in the books'
          : reason,
    action: state === 'present' ? next : undefined,
    happenings: happened[stage].sort((a, b) => a.at.getTime() - b.at.getTime()),
  }));
}

const isBuilt = (stage: WorkStage): boolean => buildStages.some((each) => each === stage);

function finishedAt(history: UnitHistory): Partial<Record<WorkStage, Date>> {
  const last = (stage: 'boards' | 'align') =>
    history.steps
      .filter((step) => step.stage === stage)
      .flatMap((step) => step.records.slice(0, 1).map(({ doneAt }) => doneAt))
      .sort((a, b) => b.getTime() - a.getTime())[0];
  const found: [WorkStage, Date | null | undefined][] = [
    ['kit', history.kitFinishedAt?.at],
    ['boards', last('boards')],
    ['align', last('align')],
    ['final_test', history.runs.at(-1)?.closedAt],
    ['pack', history.shipment?.packedAt],
    ['ship', history.shipment?.shippedAt],
  ];
  return Object.fromEntries(found.filter(([, at]) => at !== null && at !== undefined));
}

function happeningsOf(history: UnitHistory, timeZone: string): Record<WorkStage, Dated[]> {
  const meta = (at: Date, by: string | null, minutes?: number | null) =>
    [formatDayOf(at, timeZone), by, minutes === null || minutes === undefined ? null : `${minutes} min`]
      .filter((text) => text !== null)
      .join(' · ');
  const stepsAt = (stage: 'kit' | 'boards' | 'align'): Dated[] =>
    history.steps
      .filter((step) => step.stage === stage)
      .flatMap((step) =>
        step.records.map((record) => ({
          at: record.doneAt,
          text: record.entry === null ? step.title : `${step.title}: ${record.entry}`,
          meta: meta(record.doneAt, record.byName, record.minutes),
        })),
      );
  const { shipment, kitFinishedAt } = history;
  return {
    kit: [
      ...(kitFinishedAt === null
        ? []
        : [
            {
              at: kitFinishedAt.at,
              text: kitText(history),
              meta: meta(kitFinishedAt.at, kitFinishedAt.by, kitFinishedAt.minutes),
            },
          ]),
    ],
    boards: stepsAt('boards'),
    align: stepsAt('align'),
    final_test: [
      ...runHappenings(history, meta),
      ...reworkHappenings(history, meta),
      ...certified(history, meta),
    ],
    pack:
      shipment === null
        ? []
        : [{ at: shipment.packedAt, text: 'Packed', meta: meta(shipment.packedAt, null) }],
    ship:
      shipment === null || shipment.shippedAt === null
        ? []
        : [
            {
              at: shipment.shippedAt,
              text: ['Sent', shipment.carrier, shipment.trackingNumber].filter((text) => text).join(', '),
              meta: meta(shipment.shippedAt, null),
            },
          ],
  };
}

type Meta = (at: Date, by: string | null, minutes?: number | null) => string;

function kitText({ kit }: UnitHistory): string {
  const pieces = kit.reduce((sum, line) => sum + (line.part.partUnit === 'piece' ? line.quantity : 1), 0);
  const alternates = kit
    .flatMap((line) => line.picks)
    .filter((pick) => pick.alternateReason !== null)
    .flatMap((pick) => pick.designators);
  if (alternates.length === 0) return `${pieces} parts`;
  const word = alternates.length === 1 ? 'one alternate' : `${alternates.length} alternates`;
  return `${pieces} parts, ${word}: ${alternates.join(' ')}`;
}

function runHappenings({ runs }: UnitHistory, meta: Meta): Dated[] {
  return runs.map((run): Dated => {
    const name = `Run ${run.runNo}`;
    if (run.state === 'open' || run.closedAt === null) {
      return { at: run.openedAt, text: `${name} opened`, meta: meta(run.openedAt, run.tester) };
    }
    const common = { at: run.closedAt, meta: meta(run.closedAt, run.tester) };
    if (run.result === 'passed') return { ...common, mark: 'pass', title: `${name} passed` };
    if (run.result === 'passed_by_concession') {
      return { ...common, mark: 'pass', title: `${name} passed by concession` };
    }
    if (run.result === 'undecided')
      return { ...common, mark: 'too_close', title: `${name} too close to call` };
    const title = run.stoppedEarly ? `${name} stopped` : `${name} failed`;
    return { ...common, mark: 'fail', title, text: run.failed.slice(0, 2).map(failureText).join('; ') };
  });
}

function failureText(point: UnitHistory['runs'][number]['failed'][number]): string {
  const { quantity } = point;
  const key = BAND_KEYS.find((one) => one === point.band);
  const band = key === undefined ? '' : `${bandLabel(key)}, `;
  const read = point.value === null ? 'not read' : formatValue(point.value, quantity);
  const limit = point.upper ?? point.lower;
  const needs = limit === null ? '' : `, limit ${formatValue(limit, quantity)}`;
  return `${band}${quantity.label.toLowerCase()} ${read}${needs}`;
}

function reworkHappenings({ reworks }: UnitHistory, meta: Meta): Dated[] {
  return reworks.map((rework): Dated => {
    const at = rework.closedAt ?? rework.openedAt;
    const done = rework.closedAt !== null;
    return {
      at,
      mark: 'too_close',
      title: done ? 'Rework' : 'In rework',
      text: done ? mendedText(rework) : (rework.foundCause ?? rework.cause),
      meta: meta(at, done ? rework.closedBy : rework.openedBy, rework.minutes),
    };
  });
}

/** `Low-pass coil turns: L302 rewound to 12. Run 2 showed that it held.` */
function mendedText(rework: UnitHistory['reworks'][number]): string {
  const { cause, foundCause, remedy, confirmedByRunNo } = rework;
  const mended = [foundCause, remedy].filter((text) => text !== null).join(': ');
  const held = confirmedByRunNo === null ? '' : ` Run ${confirmedByRunNo} showed that it held.`;
  return `${(mended === '' ? cause : mended).replace(/\.$/, '')}.${held}`;
}

function certified({ certificates }: UnitHistory, meta: Meta): Dated[] {
  return certificates.map((certificate) => ({
    at: certificate.issuedAt,
    text: `Certificate ${certificate.number}${certificate.letter} issued`,
    meta: meta(certificate.issuedAt, certificate.issuedBy),
  }));
}
