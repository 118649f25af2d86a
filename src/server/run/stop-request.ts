/**
 * Calls the task once when this process is asked to end: by SIGTERM, by its parent's end, or by Ctrl-C where
 * it has no parent of ours (else the parent asks, in its own order).
 */
export function onStopRequest(task: () => void): void {
  let isAsked = false;
  const once = (): void => {
    if (isAsked) return;
    isAsked = true;
    task();
  };
  process.on('SIGTERM', once);
  process.on('disconnect', once);
  process.on('SIGINT', () => {
    if (!process.connected) once();
  });
}
