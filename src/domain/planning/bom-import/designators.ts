const DESIGNATOR = /^([A-Za-z_]{1,8})(\d{1,6})([A-Za-z]?)$/;
const RANGE = /^([A-Za-z_]{1,8})(\d{1,6})(?:-|–|—|\.{2,3})([A-Za-z_]{0,8})(\d{1,6})$/;
const MAX_SPAN = 1000;

/**
 * Reads a cell of reference designators: `R1, R4-R7`, `C1 C2 C3`, `R4-7`, `Q1;Q2`. Ranges are spelled out, the order is
 * kept, and a name given twice comes back twice, so that it can be asked about.
 */
export function parseDesignators(
  text: string,
): { ok: true; designators: string[] } | { ok: false; reason: string } {
  const tokens = text
    .replace(/\s*(–|—|-|\.{2,3})\s*/g, '$1')
    .split(/[\s,;/+&]+/)
    .filter((token) => token !== '');
  const designators: string[] = [];
  for (const token of tokens) {
    if (DESIGNATOR.test(token)) {
      designators.push(token);
      continue;
    }
    const range = spelledOut(token);
    if (!range.ok) return range;
    designators.push(...range.designators);
  }
  return { ok: true, designators };
}

/** The letters before the number: `R` of `R12`. */
export function prefixOf(designator: string): string {
  return DESIGNATOR.exec(designator)?.[1] ?? '';
}

function spelledOut(token: string): { ok: true; designators: string[] } | { ok: false; reason: string } {
  const match = RANGE.exec(token);
  if (!match)
    return { ok: false, reason: `“${token}” is not a designator such as R12 or a range such as R4-R7` };
  const [, prefix = '', first = '', prefixAgain = '', last = ''] = match;
  if (prefixAgain !== '' && prefixAgain !== prefix) {
    return { ok: false, reason: `“${token}” is a range from ${prefix} to ${prefixAgain}` };
  }
  const from = Number(first);
  const to = Number(last);
  if (to < from || to - from >= MAX_SPAN) {
    return { ok: false, reason: `“${token}” is not a range that can be spelled out` };
  }
  const designators = Array.from({ length: to - from + 1 }, (_, i) => `${prefix}${from + i}`);
  return { ok: true, designators };
}
