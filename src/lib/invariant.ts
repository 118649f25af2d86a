/**
 * Stops with an error where something that must hold does not. For programming errors only: a person's
 * mistake is answered with a reason, never thrown from here.
 */
export function invariant(condition: unknown, message: string): asserts condition {
  if (!condition) throw new Error(`Invariant broken: ${message}`);
}
