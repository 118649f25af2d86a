import { parentPort } from 'node:worker_threads';
import type { CertificateStatement, StatementSignature } from '~/domain/certificates/statement';
import { renderCertificate } from '~/server/pdf/certificate';

/** What the thread is asked for, and what it answers; `id` pairs the two. */
export interface RenderRequest {
  id: number;
  statement: CertificateStatement;
  signature: StatementSignature;
}

export type RenderAnswer = { id: number; bytes: Uint8Array } | { id: number; error: string };

parentPort?.on('message', (request: RenderRequest) => {
  const { id, statement, signature } = request;
  renderCertificate(statement, signature).then(
    (bytes) => parentPort?.postMessage({ id, bytes } satisfies RenderAnswer),
    (error: unknown) => parentPort?.postMessage({ id, error: String(error) } satisfies RenderAnswer),
  );
});
