import { DomainError } from './errors';

/**
 * Reads a request's body, refusing it before it is read where it says it is larger, and on the way where
 * it does not say.
 *
 * @throws DomainError `too_large`
 */
export async function readBody(request: Request, maxBytes: number): Promise<Uint8Array<ArrayBuffer>> {
  const tooLarge = () =>
    new DomainError('too_large', `At most ${maxBytes.toLocaleString('en')} bytes can be taken here.`);
  const announced = request.headers.get('content-length');
  if (announced !== null && Number(announced) > maxBytes) throw tooLarge();
  if (request.body === null) return new Uint8Array();
  const reader = request.body.getReader();
  const pieces: Uint8Array[] = [];
  let size = 0;
  for (;;) {
    const { done, value } = await reader.read();
    if (done) break;
    size += value.byteLength;
    if (size > maxBytes) {
      await reader.cancel();
      throw tooLarge();
    }
    pieces.push(value);
  }
  const whole = new Uint8Array(size);
  let offset = 0;
  for (const piece of pieces) {
    whole.set(piece, offset);
    offset += piece.byteLength;
  }
  return whole;
}

/** The fields of a form as an object: a name that comes more than once, or ends in `[]`, is a list. */
export function formFields(form: FormData): Record<string, unknown> {
  const fields: Record<string, unknown> = {};
  for (const name of new Set(form.keys())) {
    const values = form.getAll(name);
    if (name.endsWith('[]')) fields[name.slice(0, -2)] = values;
    else fields[name] = values.length === 1 ? values[0] : values;
  }
  return fields;
}
