import { createServer, type IncomingMessage } from 'node:http';
import { inspect } from 'node:util';
import { SMTPServer } from 'smtp-server';
import { isForeign, json, listen, send, stop, styleSheet, type Answer } from '../http';
import { htmlPart, listPage, mailPage, nothingHere } from './pages';
import { MailStore, type Mail } from './store';

interface MailboxOptions {
  /** 0 takes a free one. Both listen on 127.0.0.1 only. */
  smtpPort: number;
  httpPort: number;
  /** Keeps mail over a restart. */
  dataFolder?: string;
}

interface RunningMailbox {
  smtpUrl: string;
  /** Without a slash at the end. */
  url: string;
  close(): Promise<void>;
}

const MAX_MAIL_BYTES = 30 * 1024 * 1024;

function summary(mail: Mail): Record<string, unknown> {
  return {
    id: mail.id,
    messageId: mail.messageId,
    from: mail.from,
    to: mail.envelope.to,
    subject: mail.subject,
    count: mail.envelope.receivedAt.length,
    receivedAt: mail.envelope.receivedAt.map((at) => new Date(at).toISOString()),
    attachments: mail.attachments.map(({ filename, contentType, content }, n) => ({
      n,
      filename,
      contentType,
      size: content.length,
    })),
  };
}

function attachmentAnswer(mail: Mail, n: number): Answer {
  const file = mail.attachments[n];
  if (!file) return json(404, { error: 'No such attachment' });
  const plain = file.filename.replace(/[^\w.-]/g, '_');
  const encoded = encodeURIComponent(file.filename).replace(/['()*]/g, (sign) => {
    return `%${sign.charCodeAt(0).toString(16).toUpperCase()}`;
  });
  return {
    status: 200,
    body: file.content,
    headers: {
      'content-type': /^[\w.+-]+\/[\w.+-]+$/.test(file.contentType)
        ? file.contentType
        : 'application/octet-stream',
      'content-disposition': `attachment; filename="${plain}"; filename*=UTF-8''${encoded}`,
      'content-security-policy': "default-src 'none'; sandbox",
    },
  };
}

function answerApi(store: MailStore, url: URL): Answer {
  if (url.pathname === '/api/messages') {
    const to = url.searchParams.get('to');
    const mails = store.mails.filter((mail) => to === null || mail.envelope.to.includes(to));
    return json(200, { messages: mails.map(summary) });
  }
  const [, id = '', file, source] =
    /^\/api\/messages\/(\d+)(?:\/attachments\/(\d+)|\/(source))?$/.exec(url.pathname) ?? [];
  const mail = store.find(id);
  if (!mail) return json(404, { error: 'No such mail' });
  if (file !== undefined) return attachmentAnswer(mail, Number(file));
  if (source !== undefined) {
    return { status: 200, body: mail.source, headers: { 'content-type': 'text/plain; charset=utf-8' } };
  }
  return json(200, { ...summary(mail), text: mail.text, html: mail.html, headers: mail.headers });
}

function answer(store: MailStore, request: IncomingMessage, base: string): Answer {
  const url = new URL(request.url ?? '/', base);
  if (isForeign(request)) return json(403, { error: 'Asked from another site' });
  if (request.method !== 'GET' && request.method !== 'HEAD') return json(405, { error: 'Only reading' });
  if (url.pathname === '/') return listPage(store.mails);
  if (url.pathname === '/page.css') return styleSheet();
  if (url.pathname.startsWith('/api/')) return answerApi(store, url);
  const [, id = '', part] = /^\/messages\/(\d+)(\/html)?$/.exec(url.pathname) ?? [];
  const mail = store.find(id);
  if (!mail) return nothingHere();
  return part === undefined ? mailPage(mail) : htmlPart(mail);
}

async function listenSmtp(store: MailStore, port: number): Promise<{ url: string; close(): Promise<void> }> {
  const smtp = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS', 'AUTH'],
    disableReverseLookup: true,
    size: MAX_MAIL_BYTES,
    onData(stream, session, callback) {
      const chunks: Buffer[] = [];
      stream.on('data', (chunk: Buffer) => chunks.push(chunk));
      stream.on('end', () => {
        if (stream.sizeExceeded) {
          callback(Object.assign(new Error('The mail is too long'), { responseCode: 552 }));
          return;
        }
        const { mailFrom, rcptTo } = session.envelope;
        const from = mailFrom === false ? '' : mailFrom.address;
        store
          .receive(
            Buffer.concat(chunks),
            from,
            rcptTo.map((recipient) => recipient.address),
          )
          .then(
            () => {
              callback();
            },
            (error: unknown) => {
              callback(error instanceof Error ? error : new Error('The mail was not kept'));
            },
          );
      });
    },
  });
  await new Promise<void>((resolve, reject) => {
    smtp.once('error', reject);
    smtp.listen(port, '127.0.0.1', () => {
      smtp.off('error', reject);
      resolve();
    });
  });
  // A client that drops its connection is that client's trouble, not a reason to stop.
  smtp.on('error', () => undefined);
  const address = smtp.server.address();
  if (address === null || typeof address === 'string') throw new Error('The mail server has no port');
  return {
    url: `smtp://127.0.0.1:${address.port}`,
    close: () =>
      new Promise<void>((resolve) => {
        smtp.close(resolve);
      }),
  };
}

/** Starts a stand-in for the mail service: SMTP that takes everything, and a page that shows what it took. */
export async function startMailbox(options: MailboxOptions): Promise<RunningMailbox> {
  const store = new MailStore(options.dataFolder);
  await store.load();
  const smtp = await listenSmtp(store, options.smtpPort);
  let url = '';
  const server = createServer((request, response) => {
    try {
      send(response, answer(store, request, url));
    } catch (error) {
      process.stderr.write(`The mailbox failed: ${inspect(error)}\n`);
      send(response, json(500, { error: 'The mailbox failed' }));
    }
  });
  try {
    url = await listen(server, options.httpPort);
  } catch (error) {
    await smtp.close();
    throw error;
  }
  return {
    smtpUrl: smtp.url,
    url,
    async close() {
      await Promise.all([smtp.close(), stop(server)]);
    },
  };
}
