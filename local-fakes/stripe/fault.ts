import { json, type Answer } from '../http';

interface FaultDetail {
  type: 'invalid_request_error' | 'idempotency_error' | 'card_error';
  message: string;
  code?: string;
  decline_code?: string;
  param?: string;
}

/** An error as the provider words it: `{ error: { type, code, message, param } }`. */
export class Fault extends Error {
  readonly status: number;
  readonly detail: FaultDetail;

  constructor(status: number, detail: FaultDetail) {
    super(detail.message);
    this.status = status;
    this.detail = detail;
  }

  answer(): Answer {
    return json(this.status, { error: this.detail });
  }
}

export function invalid(message: string, param?: string, code?: string): Fault {
  return new Fault(400, { type: 'invalid_request_error', message, param, code });
}

export function missing(kind: string, id: string, param = 'id'): Fault {
  return new Fault(404, {
    type: 'invalid_request_error',
    code: 'resource_missing',
    message: `No such ${kind}: '${id}'`,
    param,
  });
}
