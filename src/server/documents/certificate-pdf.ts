import { Worker } from 'node:worker_threads';
import type { Reader } from '~/server/db/client';
import { readSignedCertificate } from '~/server/queries/certificates/read-signed-certificate';
import type { RenderAnswer, RenderRequest } from './certificate-thread';

interface Waiting {
  resolve: (bytes: Uint8Array) => void;
  reject: (error: Error) => void;
}

let thread: Worker | undefined;
let nextId = 1;
const waiting = new Map<number, Waiting>();

/**
 * Makes the PDF of an issued certificate, in a thread of its own: a page takes tens of milliseconds of
 * unbroken work. The same certificate gives the same bytes.
 *
 * @returns null where there is no such certificate
 */
export async function makeCertificatePdf(reader: Reader, certificateId: number): Promise<Uint8Array | null> {
  const certificate = await readSignedCertificate(reader, { id: certificateId });
  if (certificate === null) return null;
  const { statement, buyer, signature } = certificate;
  return render({ ...statement, buyer }, signature);
}

/** Ends the thread; what is under way fails. */
export async function stopCertificateThread(): Promise<void> {
  await thread?.terminate();
}

function render(
  statement: RenderRequest['statement'],
  signature: RenderRequest['signature'],
): Promise<Uint8Array> {
  thread ??= startThread();
  const id = nextId++;
  const request: RenderRequest = { id, statement, signature };
  return new Promise((resolve, reject) => {
    waiting.set(id, { resolve, reject });
    thread?.postMessage(request);
  });
}

function startThread(): Worker {
  const started = new Worker(new URL('./start-thread.mjs', import.meta.url));
  started.unref();
  started.on('message', (answer: RenderAnswer) => {
    const asked = waiting.get(answer.id);
    waiting.delete(answer.id);
    if ('bytes' in answer) asked?.resolve(answer.bytes);
    else asked?.reject(new Error(answer.error));
  });
  const fail = (error: Error) => {
    if (thread === started) thread = undefined;
    for (const { reject } of waiting.values()) reject(error);
    waiting.clear();
  };
  started.on('error', fail);
  started.on('exit', () => {
    fail(new Error('The thread that makes PDFs has ended.'));
  });
  return started;
}
