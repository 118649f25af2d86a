import { paths } from '~/lib/paths';
import type { StaffRole } from './roles';
import { listed } from '~/lib/listed';

/** A room of the works: a group of pages in the strip on top. */
export interface Station {
  key: 'counter' | 'plan' | 'stores' | 'floor' | 'bench' | 'dispatch' | 'office';
  label: string;
  href: string;
}

const stations: readonly (Station & { roles: readonly StaffRole[] })[] = [
  { key: 'counter', label: 'Counter', href: paths.counter(), roles: ['owner', 'bookkeeper'] },
  { key: 'plan', label: 'Plan', href: paths.plan(), roles: ['owner', 'bookkeeper', 'builder'] },
  { key: 'stores', label: 'Stores', href: paths.stores(), roles: ['owner', 'builder'] },
  { key: 'floor', label: 'Floor', href: paths.floor(), roles: ['owner', 'builder', 'tester'] },
  { key: 'bench', label: 'Bench', href: paths.bench(), roles: ['owner', 'tester'] },
  { key: 'dispatch', label: 'Dispatch', href: paths.dispatch(), roles: ['owner', 'shipper'] },
  { key: 'office', label: 'Office', href: paths.office(), roles: ['owner'] },
];

/** The stations that a person of these roles works at, in the order of the strip. */
export function stationsOf(roles: readonly StaffRole[]): Station[] {
  return stations
    .filter((station) => station.roles.some((role) => roles.includes(role)))
    .map(({ key, label, href }) => ({ key, label, href }));
}

/** How a person's roles are said beside their name: `tester`, `builder and shipper`. */
export function rolesInWords(roles: readonly StaffRole[]): string {
  if (roles.includes('owner')) return 'owner';
  return roles.length === 0 ? 'buyer' : listed(roles);
}
