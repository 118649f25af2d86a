import type { StaffRole } from '~/domain/people/roles';

/** Who may pass a door. The owner may pass every door of the works. */
export type Rule =
  { kind: 'anyone' } | { kind: 'signed_in' } | { kind: 'staff'; roles: readonly StaffRole[] };

export const anyone: Rule = { kind: 'anyone' };
export const signedIn: Rule = { kind: 'signed_in' };

/** The owner and people with one of these roles. */
export function staff(...roles: StaffRole[]): Rule {
  return { kind: 'staff', roles: ['owner', ...roles] };
}

export const everyStaff: Rule = staff('builder', 'tester', 'shipper', 'bookkeeper');

/**
 * Whether a person passes: `unsigned` where signing in might help, `forbidden` for people of the works
 * at a door of other roles, `hidden` for a buyer, who may not know what the works' doors are.
 */
export function passes(
  rule: Rule,
  person: { roles: readonly StaffRole[] } | null,
): 'yes' | 'unsigned' | 'forbidden' | 'hidden' {
  if (rule.kind === 'anyone') return 'yes';
  if (person === null) return 'unsigned';
  if (rule.kind === 'signed_in') return 'yes';
  if (rule.roles.some((role) => person.roles.includes(role))) return 'yes';
  return person.roles.length === 0 ? 'hidden' : 'forbidden';
}
