/**
 * Reads a number as people type it, with a decimal point or comma. Marks between thousands are refused with a
 * sentence: `1,234` can mean two things.
 * @returns the number and whether a sign was typed
 */
export function parseDecimal(
  text: string,
): { ok: true; value: number; signed: boolean } | { ok: false; reason: string } {
  const compact = text.trim().replace(/^([+-])\s+/, '$1');
  if (/[\s'’]/u.test(compact)) {
    return { ok: false, reason: `“${text.trim()}” has a mark or blank inside the number: type it without.` };
  }
  const match = /^([+-]?)(\d*)((?:[.,]\d*)*)(e[+-]?\d+)?$/i.exec(compact);
  const whole = match?.[2] ?? '';
  const rest = match?.[3] ?? '';
  if (match === null || (whole === '' && !/\d/.test(rest))) {
    return { ok: false, reason: `“${text.trim()}” is not a number.` };
  }
  const marks = rest.replace(/\d/g, '');
  if (marks.length > 1) {
    return { ok: false, reason: `“${text.trim()}” has marks between thousands: type it without them.` };
  }
  if (marks === ',' && /^,\d{3}$/.test(rest) && /^[1-9]\d{0,2}$/.test(whole)) {
    return {
      ok: false,
      reason: `Does “${text.trim()}” mean ${whole}.${rest.slice(1)} or ${whole}${rest.slice(1)}? Type it with a point, or without the comma.`,
    };
  }
  const value = Number(`${match[1] ?? ''}${whole}${rest.replace(',', '.')}${match[4] ?? ''}`);
  if (!Number.isFinite(value)) return { ok: false, reason: `“${text.trim()}” is too large.` };
  return { ok: true, value, signed: match[1] !== '' };
}
