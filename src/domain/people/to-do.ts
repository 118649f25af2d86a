import { paths } from '~/lib/paths';
import type { UnitStage } from '~/domain/production/stages';
import type { StaffRole } from './roles';

/** A unit that waits for somebody's hands, as far as the list of what to do needs to know it. */
export interface WaitingUnit {
  serial: string;
  modelName: string;
  stage: UnitStage;
  onHold: boolean;
  openRework: boolean;
  /** Number of the run that is open on it, if one is. */
  openRunNo: number | null;
  /** The newest run has passed and its certificate is issued. */
  certified: boolean;
  /** Result of the newest closed run. */
  newestResult: string | null;
  orderNumber: number | null;
}

export interface Task {
  /** What to do, as a button would say it. */
  what: string;
  href: string;
  /** Whose hands it waits for. */
  role: StaffRole;
}

/** What is to be done next on a unit, and by whom; null while it is on hold or has left. */
export function nextTask(unit: WaitingUnit): Task | null {
  if (unit.onHold || unit.stage === 'gone') return null;
  if (unit.openRework) return { what: 'Mend it', href: paths.unit(unit.serial), role: 'builder' };
  switch (unit.stage) {
    case 'kit':
      return { what: 'Pick the kit', href: paths.unitKit(unit.serial), role: 'builder' };
    case 'boards':
      return { what: 'Build it', href: paths.unitBuild(unit.serial), role: 'builder' };
    case 'align':
      return { what: 'Align it', href: paths.unitBuild(unit.serial), role: 'builder' };
    case 'final_test':
      return unit.openRunNo === null
        ? { what: 'Test it', href: paths.unit(unit.serial), role: 'tester' }
        : { what: 'Go on testing', href: paths.run(unit.serial, unit.openRunNo), role: 'tester' };
    case 'pack':
      // One without an order is kept, or handed over as it is: nobody packs it.
      if (unit.certified) return unit.orderNumber === null ? null : packTask(unit);
      return { what: 'Issue the certificate', href: paths.unit(unit.serial), role: 'tester' };
    case 'ship':
      return packTask(unit);
  }
}

function packTask({ orderNumber, serial, stage }: WaitingUnit): Task {
  return {
    what: stage === 'ship' ? 'Ship it' : 'Pack it',
    href: orderNumber === null ? paths.unit(serial) : paths.packOrder(orderNumber),
    role: 'shipper',
  };
}
