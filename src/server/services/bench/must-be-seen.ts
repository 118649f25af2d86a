import { DomainError } from '~/server/errors';

/**
 * Two people may have the same form open: the second is told, instead of undoing what the first has done.
 *
 * @param seen newest revision when the form was filled in; undefined where that is not said
 * @throws DomainError `conflict`
 */
export function mustBeSeen(number: string, newest: number, seen: number | undefined): void {
  if (seen === undefined || seen === newest) return;
  throw new DomainError(
    'conflict',
    `Somebody has made revision ${newest} of ${number} since this page was opened. Look at it, then enter your change again.`,
  );
}
