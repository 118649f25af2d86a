const LEFT_OUT =
  /^(dnp|dnf|dni|dns|do not (populate|place|fit|install)|not (fitted|placed|populated)|no ?fit|no ?pop|excluded from bom)$/i;
const MAYBE_LEFT_OUT = /(^|[^a-z0-9])(dnp|dnf|dni|n\.?c\.?|not fitted|no ?pop)($|[^a-z0-9])/i;
const YES = /^(x|y|yes|true|1|oui|ja|si|[✓✔☑✅])$/i;
const NO = /^(n|no|false|0|non|nein|[✗✘☐])$/i;

/** A cell that by itself says that the part is left out (`DNP`). */
export function isLeftOutMark(cell: string): boolean {
  return LEFT_OUT.test(cell.trim());
}

/** A text that hints at a part left out without saying so outright (`C (nc)`). */
export function hintsAtLeftOut(text: string): boolean {
  return !isLeftOutMark(text) && MAYBE_LEFT_OUT.test(text);
}

/** A tick, or a word for yes. */
export function isYes(cell: string): boolean {
  return YES.test(cell.trim());
}

/** A cross, or a word for no. */
export function isNo(cell: string): boolean {
  return NO.test(cell.trim());
}
