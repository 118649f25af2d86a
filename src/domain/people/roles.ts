/** Roles of the people of the works; a buyer is whoever is signed in without one. */
export const staffRoles = ['owner', 'builder', 'tester', 'shipper', 'bookkeeper'] as const;

export type StaffRole = (typeof staffRoles)[number];

/** Whether people of these roles see prices, payments and balances. */
export function seesPrices(roles: readonly StaffRole[]): boolean {
  return roles.includes('owner') || roles.includes('bookkeeper');
}
