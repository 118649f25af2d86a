import { mayWorkOnFloor } from '~/domain/people/may-see';
import type { StaffRole } from '~/domain/people/roles';
import { paths } from '~/lib/paths';
import type { UnitHistory } from '~/server/queries/production/get-unit-history';

/** What this person can do next on a unit: one button, or none where it waits for somebody else. */
export function nextDeed(
  { unit, runs, certificates }: UnitHistory,
  roles: readonly StaffRole[],
  postKey: string,
): { label: string; href: string; postKey?: string } | undefined {
  if (unit.holds.length > 0) return undefined;
  const tests = roles.includes('owner') || roles.includes('tester');
  const ships = roles.includes('owner') || roles.includes('shipper');
  const { serial } = unit;
  if (unit.openRework !== null) {
    return mayWorkOnFloor(roles) ? { label: 'Do the rework', href: '#rework' } : undefined;
  }
  const newest = runs.at(-1);
  switch (unit.stage) {
    case 'kit':
      return mayWorkOnFloor(roles) ? { label: 'Pick the kit', href: paths.unitKit(serial) } : undefined;
    case 'boards':
    case 'align':
      return mayWorkOnFloor(roles) ? { label: 'Go on building', href: paths.unitBuild(serial) } : undefined;
    case 'final_test':
      if (!tests) return undefined;
      return newest?.state === 'open'
        ? { label: 'Go on', href: paths.run(serial, newest.runNo) }
        : { label: `Open run ${(newest?.runNo ?? 0) + 1}`, href: paths.api.runs(serial), postKey };
    case 'pack':
      if (newest !== undefined && !certificates.some(({ testRunId }) => testRunId === newest.id)) {
        return tests ? { label: 'Issue the certificate', href: paths.run(serial, newest.runNo) } : undefined;
      }
      return ships && unit.orderNumber !== null
        ? { label: 'Pack it', href: paths.packOrder(unit.orderNumber) }
        : undefined;
    case 'ship':
      return ships && unit.orderNumber !== null
        ? { label: 'Ship it', href: paths.packOrder(unit.orderNumber) }
        : undefined;
    case 'gone':
      return undefined;
  }
}
