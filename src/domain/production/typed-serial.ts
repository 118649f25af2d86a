import { normaliseScan } from '~/lib/serials';

/**
 * A serial number as somebody types it for a unit that the books do not have yet.
 *
 * @returns it as it stands on labels and is scanned, or why it cannot be one
 */
export function readTypedSerial(text: string): { ok: true; serial: string } | { ok: false; reason: string } {
  const serial = normaliseScan(text);
  if (serial === '') return { ok: false, reason: 'Type the serial number as it stands on the unit.' };
  if (serial.length > 30) return { ok: false, reason: 'A serial number has at most 30 characters.' };
  if (!/^[A-Z0-9]+(?:[-.][A-Z0-9]+)*$/.test(serial)) {
    return {
      ok: false,
      reason: 'A serial number has letters and figures, with single hyphens or points between: H3-0147.',
    };
  }
  if (!/\d/.test(serial)) return { ok: false, reason: 'A serial number has a figure in it: H3-0147.' };
  return { ok: true, serial };
}
