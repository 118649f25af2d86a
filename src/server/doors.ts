import { anyone, everyStaff, signedIn, staff } from './rules';
import type { Rule } from './rules';

/** Who may enter which page, by route pattern. A page that is not listed here is closed. */
export const pageRules: Readonly<Record<string, Rule>> = {
  '/404': anyone,
  '/500': anyone,
  '/closed': anyone,
  '/': anyone,
  '/rigs/[slug]': anyone,
  '/checkout': anyone,
  '/orders/[token]': anyone,
  '/orders/[token]/pay': anyone,
  '/my/orders': signedIn,
  '/my/orders/[number]': signedIn,
  '/certificates': anyone,
  '/certificates/[code]': anyone,
  '/certificates/keys': anyone,
  '/sign-in': anyone,
  '/sign-in/[token]': anyone,
  '/works': everyStaff,
  '/works/scan': everyStaff,
  '/works/orders': staff('bookkeeper'),
  '/works/orders/[number]': staff('bookkeeper'),
  '/works/batches': everyStaff,
  '/works/batches/[number]': everyStaff,
  '/works/models': everyStaff,
  '/works/models/new': staff(),
  '/works/models/[slug]': everyStaff,
  '/works/history': staff('tester'),
  '/works/quantities': everyStaff,
  '/works/limit-rules': everyStaff,
  '/works/models/[slug]/test-plans/[letter]': everyStaff,
  '/works/models/[slug]/bom-import': staff(),
  '/works/models/[slug]/frequency-plan': everyStaff,
  '/works/parts': everyStaff,
  '/works/parts/[number]': everyStaff,
  '/works/lots/receive': staff('builder'),
  '/works/lots/[number]': everyStaff,
  '/works/floor': staff('builder', 'tester', 'shipper'),
  '/works/units/[serial]': everyStaff,
  '/works/units/[serial]/kit': staff('builder', 'tester', 'shipper'),
  '/works/units/[serial]/build': staff('builder', 'tester', 'shipper'),
  '/works/units/[serial]/runs/compare': staff('builder', 'tester'),
  '/works/units/[serial]/runs/[run]': staff('builder', 'tester'),
  '/works/bench': staff('tester', 'builder'),
  '/works/bench/rig': staff('tester'),
  '/works/bench/equipment': staff('tester'),
  '/works/instruments': staff('tester', 'builder'),
  '/works/instruments/[number]': staff('tester', 'builder'),
  '/works/paths': staff('tester', 'builder'),
  '/works/paths/[number]': staff('tester', 'builder'),
  '/works/path-parts': staff('tester', 'builder'),
  '/works/path-parts/[number]': staff('tester', 'builder'),
  '/works/checks': staff('tester', 'builder'),
  '/works/certificates/[number]': staff('builder', 'tester', 'shipper'),
  '/works/certificates/[number]/amend': staff('tester'),
  '/works/dispatch': staff('shipper', 'bookkeeper'),
  '/works/dispatch/[number]': staff('shipper'),
  '/works/shipments/[number]': staff('shipper', 'bookkeeper'),
  '/works/tokens': everyStaff,
  '/works/people': staff(),
  '/works/office': staff(),
  '/works/keys': staff(),
  '/works/changes': staff(),
};

/** The router writes its patterns in small letters, the names of parameters too. */
const byRoutePattern = new Map(
  Object.entries(pageRules).map(([pattern, rule]) => [pattern.toLowerCase(), rule]),
);

/** Who may enter the page at a route pattern; undefined where it is closed to all. */
export function pageRuleAt(routePattern: string): Rule | undefined {
  return byRoutePattern.get(routePattern.toLowerCase());
}
