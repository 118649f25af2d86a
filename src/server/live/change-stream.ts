import type { LiveSubject } from '~/schemas/live';
import type { Reader } from '~/server/db/client';
import { log } from '~/server/log';
import { findLatestChange } from '~/server/queries/office/find-latest-change';
import type { Change, Tail } from './tail';

interface Options {
  tail: Tail;
  reader: Reader;
  subjects: readonly LiveSubject[];
  /** Whoever listens: their stream ends when their roles change, and they have to pass the door again. */
  userId: number | null;
}

/** Shorter than the minute after which proxies drop a silent connection. */
const beatMs = 20_000;
/** Then the browser asks again by itself, and is looked at again by the door. */
const lifeMs = 30 * 60_000;

/**
 * Server-sent events about some things: first `state` with the newest change there was (`id`, `at` as
 * milliseconds since 1970; null where nothing has happened yet), then a `change` for each that follows, with
 * its action and the types and ids of the things that were asked for.
 */
export function changeStream(options: Options): Response {
  let end: (() => void) | undefined;
  const body = new ReadableStream<Uint8Array>(
    {
      // Not in `start`: the answer to HEAD is never read, and must not listen.
      pull(controller) {
        end ??= begin(options, controller);
      },
      cancel: () => end?.(),
    },
    { highWaterMark: 0 },
  );
  return new Response(body, {
    headers: { 'content-type': 'text/event-stream', 'cache-control': 'no-store', 'x-accel-buffering': 'no' },
  });
}

function begin(
  { tail, reader, subjects, userId }: Options,
  controller: ReadableStreamDefaultController<Uint8Array>,
): () => void {
  const encoder = new TextEncoder();
  let isOpen = true;
  const send = (text: string) => {
    if (isOpen) controller.enqueue(encoder.encode(text));
  };
  const { started, stop } = tail.listen((change) => {
    const wanted = change.subjects.filter((one) => subjects.some((asked) => covers(asked, one)));
    if (wanted.length > 0) send(eventOf('change', { action: change.action, subjects: wanted }, change.id));
    if (isAbout(change, userId)) close();
  });
  const beat = setInterval(() => send(': still here\n\n'), beatMs);
  const life = setTimeout(close, lifeMs);
  function end() {
    isOpen = false;
    stop();
    clearInterval(beat);
    clearTimeout(life);
  }
  function close() {
    if (isOpen) controller.close();
    end();
  }
  started
    .then(() => findLatestChange(reader, subjects))
    .then((latest) => send(eventOf('state', latest && { id: latest.id, at: latest.at.getTime() })))
    .catch((error: unknown) => {
      log.error({ err: error }, 'a stream of changes could not begin');
      close();
    });
  return end;
}

function covers(asked: LiveSubject, { type, id }: Change['subjects'][number]): boolean {
  return asked.type === type && (asked.id === null || asked.id === id);
}

function isAbout({ subjects }: Change, userId: number | null): boolean {
  return subjects.some(({ type, id }) => type === 'user' && id === userId);
}

function eventOf(name: string, data: unknown, id?: number): string {
  return `${id === undefined ? '' : `id: ${id}\n`}event: ${name}\ndata: ${JSON.stringify(data)}\n\n`;
}
