import { createServer } from 'node:http';
import { listen, readBody, stop } from '../../../local-fakes/http';

interface Received {
  body: string;
  signature: string | null;
}

interface Receiver {
  url: string;
  received: Received[];
  /** Statuses for the next requests, in order; 200 when they run out. */
  answers: number[];
  /** Resolves when `count` requests have come in all. */
  waitFor(count: number): Promise<Received[]>;
  close(): Promise<void>;
}

/** An endpoint for webhook events that only writes down what arrives. */
export async function startReceiver(): Promise<Receiver> {
  const received: Received[] = [];
  const answers: number[] = [];
  const waiting = new Set<() => void>();
  const server = createServer((request, response) => {
    void readBody(request).then((body) => {
      const signature = request.headers['stripe-signature'];
      received.push({ body, signature: typeof signature === 'string' ? signature : null });
      response.writeHead(answers.shift() ?? 200).end();
      for (const check of waiting) check();
    });
  });
  const base = await listen(server, 0);
  return {
    url: `${base}/webhook`,
    received,
    answers,
    waitFor: (count) =>
      new Promise((resolve) => {
        const check = () => {
          if (received.length < count) return;
          waiting.delete(check);
          resolve(received);
        };
        waiting.add(check);
        check();
      }),
    close: () => stop(server),
  };
}
