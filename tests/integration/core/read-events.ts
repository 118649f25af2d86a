interface StreamEvent {
  event: string;
  data: unknown;
  id?: string;
}

/** The server-sent events of an answer, one by one; comments are left out. */
export async function* readEvents(response: Response): AsyncGenerator<StreamEvent, void, undefined> {
  if (response.body === null) throw new Error('The answer has no body.');
  let rest = '';
  for await (const text of response.body.pipeThrough(new TextDecoderStream())) {
    const blocks = (rest + text).split('\n\n');
    rest = blocks.pop() ?? '';
    for (const block of blocks) {
      const fields = new Map(
        block
          .split('\n')
          .filter((line) => !line.startsWith(':'))
          .map((line) => [line.slice(0, line.indexOf(':')), line.slice(line.indexOf(':') + 1).trimStart()]),
      );
      const event = fields.get('event');
      if (event === undefined) continue;
      const id = fields.get('id');
      yield { event, data: JSON.parse(fields.get('data') ?? 'null'), ...(id === undefined ? {} : { id }) };
    }
  }
}
