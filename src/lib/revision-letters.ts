import { invariant } from './invariant';

/** The letter after the last one of a revision: A … Z, AA … ZZ. */
export function nextLetter(last: string | null): string {
  if (last === null) return 'A';
  invariant(/^[A-Z]{1,2}$/.test(last), `"${last}" is a revision's letter`);
  const [first = '', second] = last;
  if (second === undefined) return first === 'Z' ? 'AA' : after(first);
  invariant(last !== 'ZZ', 'there are no letters after ZZ');
  return second === 'Z' ? `${after(first)}A` : `${first}${after(second)}`;
}

/** Orders revisions as they follow one another: Z before AA. */
export function compareLetters(a: string, b: string): number {
  return a.length - b.length || (a < b ? -1 : a > b ? 1 : 0);
}

function after(letter: string): string {
  return String.fromCharCode(letter.charCodeAt(0) + 1);
}
