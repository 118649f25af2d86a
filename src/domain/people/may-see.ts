import type { UnitStage } from '~/domain/production/stages';
import type { StaffRole } from './roles';

/** Who sees a buyer's call sign on a unit; a shipper only on what is to ship. */
export function maySeeCallSign(roles: readonly StaffRole[], stage: UnitStage): boolean {
  const always: readonly StaffRole[] = ['owner', 'bookkeeper', 'builder', 'tester'];
  if (roles.some((role) => always.includes(role))) return true;
  return roles.includes('shipper') && (stage === 'pack' || stage === 'ship');
}

/** Who sees what stock has cost. */
export function maySeeStockValue(roles: readonly StaffRole[]): boolean {
  return roles.includes('owner') || roles.includes('bookkeeper');
}

/** Who receives, counts, kits and builds; the others read. */
export function mayWorkOnFloor(roles: readonly StaffRole[]): boolean {
  return roles.includes('owner') || roles.includes('builder');
}

/** Who enters and revises the bench's instruments and paths, and does the daily checks; the others read. */
export function mayKeepEquipment(roles: readonly StaffRole[]): boolean {
  return roles.includes('owner') || roles.includes('tester');
}
