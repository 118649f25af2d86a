/** How long a burst of changes is waited for before the page is shown anew. */
const settleMs = 400;
/** A form or link that is under way must not be overtaken by a reload. */
const leavingMs = 10_000;

interface State {
  id: number;
  at: number;
}

/**
 * Keeps the page of a `LiveReload` up to date: shows it anew by itself where nobody is at work on it, and
 * otherwise says that it has changed. Follows changes while the page is in sight only, because a browser
 * keeps few connections to one server.
 */
export function keepUpToDate(notice: HTMLElement): void {
  const { live: address, renderedAt = '', typed } = notice.dataset;
  if (address === undefined) return;
  let lastId: number | null | undefined;
  let isEdited = typed !== undefined;
  let leavingUntil = 0;
  let timer: ReturnType<typeof setTimeout> | undefined;
  let source: EventSource | undefined;
  const openedAtFirst = countOpened();

  function isAtWork(): boolean {
    const focused = document.activeElement;
    return (
      isEdited ||
      (focused !== null && focused !== document.body) ||
      document.querySelector('dialog[open]') !== null ||
      countOpened() !== openedAtFirst ||
      document.getSelection()?.isCollapsed === false
    );
  }

  function show() {
    const waitMs = leavingUntil - performance.now();
    if (waitMs > 0) timer = setTimeout(show, waitMs);
    else if (isAtWork()) notice.hidden = false;
    else location.reload();
  }

  function changed() {
    clearTimeout(timer);
    timer = setTimeout(show, settleMs);
  }

  function follow(url: string) {
    source = new EventSource(url);
    source.addEventListener('state', ({ data }: MessageEvent<string>) => {
      const latest = readState(data);
      const isNew =
        lastId === undefined
          ? latest !== null && latest.at > Number(renderedAt)
          : lastId !== (latest?.id ?? null);
      lastId = latest?.id ?? null;
      if (isNew) changed();
    });
    source.addEventListener('change', ({ lastEventId }) => {
      lastId = Number(lastEventId);
      changed();
    });
  }

  function followWhileSeen() {
    source?.close();
    if (address !== undefined && document.visibilityState === 'visible') follow(address);
  }

  document.addEventListener('input', () => (isEdited = true));
  window.addEventListener('beforeunload', () => (leavingUntil = performance.now() + leavingMs));
  window.addEventListener('pagehide', () => source?.close());
  document.addEventListener('visibilitychange', followWhileSeen);
  notice.querySelector('button')?.addEventListener('click', () => location.reload());
  followWhileSeen();
}

function countOpened(): number {
  return document.querySelectorAll('details[open]').length;
}

function readState(data: string): State | null {
  const state: unknown = JSON.parse(data);
  if (typeof state !== 'object' || state === null || !('id' in state) || !('at' in state)) return null;
  return { id: Number(state.id), at: Number(state.at) };
}
