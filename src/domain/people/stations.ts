import { paths } from '~/lib/paths';
import type { StaffRole } from './roles';
import { listed } from '~/lib/listed';

/** A room of the works: a group of pages in the strip on top. */
export interface Station {
  key: 'counter' | 'plan' | 'stores' | 'floor' | 'bench' | 'dispatch' | 'office';
  label: string;
  href: string;
}

/** What the books hold already, as far as it says which stations are used. */
export interface WorksUse {
  hasPart: boolean;
  hasBatch: boolean;
  hasOrder: boolean;
}

interface KnownStation extends Station {
  roles: readonly StaffRole[];
  /** What a station is for, and with what it is first used; null for one that shows from the first day on. */
  begins: { isUsed: (use: WorksUse) => boolean; with: string } | null;
}

const withParts = { isUsed: ({ hasPart, hasBatch }: WorksUse) => hasPart || hasBatch };
const withBatches = { isUsed: ({ hasBatch }: WorksUse) => hasBatch };
const withOrders = { isUsed: ({ hasBatch, hasOrder }: WorksUse) => hasBatch || hasOrder };

const stations: readonly KnownStation[] = [
  {
    ...{ key: 'counter', label: 'Counter', href: paths.counter(), roles: ['owner', 'bookkeeper'] },
    begins: { ...withOrders, with: 'Orders; it shows once a batch is open for them.' },
  },
  {
    ...{ key: 'plan', label: 'Plan', href: paths.plan(), roles: ['owner', 'bookkeeper', 'builder'] },
    begins: { ...withParts, with: 'Batches and bills of materials; it shows with the first part or batch.' },
  },
  {
    ...{ key: 'stores', label: 'Stores', href: paths.stores(), roles: ['owner', 'builder'] },
    begins: { ...withParts, with: 'Parts and lots; it shows with the first part.' },
  },
  {
    ...{ key: 'floor', label: 'Floor', href: paths.floor(), roles: ['owner', 'builder', 'tester'] },
    begins: { ...withBatches, with: 'Kits and building; it shows with the first batch.' },
  },
  {
    ...{ key: 'bench', label: 'Bench', href: paths.bench(), roles: ['owner', 'tester'] },
    begins: null,
  },
  {
    ...{ key: 'dispatch', label: 'Dispatch', href: paths.dispatch(), roles: ['owner', 'shipper'] },
    begins: { ...withOrders, with: 'Packing and shipping; it shows once a batch is open for orders.' },
  },
  {
    ...{ key: 'office', label: 'Office', href: paths.office(), roles: ['owner'] },
    begins: null,
  },
];

/** The stations that a person of these roles works at and that the works uses, in the order of the strip. */
export function stationsOf(roles: readonly StaffRole[], use: WorksUse): Station[] {
  return stations
    .filter((station) => station.roles.some((role) => roles.includes(role)))
    .filter(({ begins }) => begins === null || begins.isUsed(use))
    .map(({ key, label, href }) => ({ key, label, href }));
}

/** The stations that a works does not use yet, each with what it is for and what it begins with. */
export function unusedStations(use: WorksUse): (Station & { begins: string })[] {
  return stations.flatMap(({ key, label, href, begins }) =>
    begins === null || begins.isUsed(use) ? [] : [{ key, label, href, begins: begins.with }],
  );
}

/** How a person's roles are said beside their name: `tester`, `builder and shipper`. */
export function rolesInWords(roles: readonly StaffRole[]): string {
  if (roles.includes('owner')) return 'owner';
  return roles.length === 0 ? 'buyer' : listed(roles);
}
