/** What the server says to a request that it refuses (RFC 9457). */
export interface Refusal {
  status: number;
  detail: string;
  fields: Record<string, string>;
}

/** Thrown where the server answered with a refusal; anything else thrown means that it did not answer. */
export class Refused extends Error {
  constructor(readonly refusal: Refusal) {
    super(refusal.detail);
    this.name = 'Refused';
  }
}

/**
 * Sends one request with its idempotency key and gives the answer.
 *
 * @throws Refused where the server says no; another error where it did not answer or failed
 */
export async function send(url: string, body: unknown, key: string): Promise<unknown> {
  const isForm = body instanceof FormData;
  const response = await fetch(url, {
    method: 'POST',
    headers: {
      accept: 'application/json',
      'idempotency-key': key,
      ...(isForm ? {} : { 'content-type': 'application/json' }),
    },
    body: isForm ? body : JSON.stringify(body ?? {}),
  });
  if (response.ok) return response.json();
  if (response.status >= 500) throw new Error('The server could not do it.');
  throw new Refused(await refusalOf(response));
}

async function refusalOf(response: Response): Promise<Refusal> {
  const problem: unknown = await response.json().catch(() => null);
  const detail =
    typeof problem === 'object' && problem !== null && 'detail' in problem ? String(problem.detail) : '';
  const fields: Record<string, string> = {};
  if (typeof problem === 'object' && problem !== null && 'fields' in problem) {
    for (const [name, text] of Object.entries(problem.fields ?? {})) fields[name] = String(text);
  }
  return { status: response.status, detail: detail === '' ? 'It was refused.' : detail, fields };
}
