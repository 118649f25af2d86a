/** Whether a run releases its unit: closed, and passed as the program computed it. */
export function runIsReleased(run: { state: string; result: string | null }): boolean {
  return run.state === 'closed' && (run.result === 'passed' || run.result === 'passed_by_concession');
}
