import { escapeHtml, page, type Answer } from '../http';
import type { Mail } from './store';

const NOTICE = 'Stand-in for the mail service. Nothing here has left this machine.';

function time(mail: Mail): string {
  const last = mail.envelope.receivedAt.at(-1) ?? 0;
  const iso = new Date(last).toISOString();
  return `<time datetime="${iso}">${iso.slice(0, 19).replace('T', ' ')} UTC</time>`;
}

function times(mail: Mail): string {
  const count = mail.envelope.receivedAt.length;
  return count === 1 ? '' : `sent ${count} times`;
}

/** Text with its web addresses made into links. */
function linked(text: string): string {
  return text
    .split(/(https?:\/\/[^\s<>"]+[^\s<>".,;:!?)])/)
    .map((piece, index) =>
      index % 2 === 1 ? `<a href="${escapeHtml(piece)}">${escapeHtml(piece)}</a>` : escapeHtml(piece),
    )
    .join('');
}

/** Newest first. */
export function listPage(mails: readonly Mail[]): Answer {
  const rows = [...mails].reverse().map(
    (mail) => `<tr><td>${escapeHtml(mail.to)}</td>
<td><a href="/messages/${mail.id}">${escapeHtml(mail.subject || '(no subject)')}</a>
${mail.attachments.length > 0 ? `<br><span class="quiet">${mail.attachments.length} attached</span>` : ''}
${times(mail) ? `<br><span class="quiet">${times(mail)}</span>` : ''}</td>
<td>${time(mail)}</td></tr>`,
  );
  const table = `<div class="scroll"><table>
<thead><tr><th scope="col">To</th><th scope="col">Subject</th><th scope="col">Sent</th></tr></thead>
<tbody>${rows.join('\n')}</tbody></table></div>`;
  return page({
    title: 'Mailbox (stand-in for the mail service)',
    notice: NOTICE,
    main: `<h1>Mailbox</h1>
${mails.length === 0 ? '<p>Nothing was sent yet. Mail that the application sends will be listed here.</p>' : table}`,
  });
}

export function mailPage(mail: Mail): Answer {
  const files = mail.attachments.map(
    (file, index) =>
      `<li><a href="/api/messages/${mail.id}/attachments/${index}">${escapeHtml(file.filename)}</a> <span class="quiet">${escapeHtml(file.contentType)}, ${file.content.length} bytes</span></li>`,
  );
  const html =
    mail.html === null
      ? ''
      : `<h2>As HTML</h2>
<iframe src="/messages/${mail.id}/html" title="The mail as HTML" sandbox="allow-popups allow-popups-to-escape-sandbox"></iframe>`;
  return page({
    title: `${mail.subject} (mailbox)`,
    notice: NOTICE,
    policy: ["form-action 'none'", "frame-src 'self'"],
    main: `<p><a href="/">All mail</a></p>
<h1>${escapeHtml(mail.subject || '(no subject)')}</h1>
<dl>
<dt>From</dt><dd>${escapeHtml(mail.from)}</dd>
<dt>To</dt><dd>${escapeHtml(mail.to)}</dd>
<dt>Sent</dt><dd>${time(mail)}${times(mail) ? `, ${times(mail)}` : ''}</dd>
<dt>Message-ID</dt><dd>${escapeHtml(mail.messageId)}</dd>
</dl>
${files.length === 0 ? '' : `<h2>Attached</h2><ul>${files.join('\n')}</ul>`}
<h2>As text</h2>
<pre>${linked(mail.text)}</pre>
${html}`,
  });
}

/** The HTML part by itself: no script runs in it, nothing is loaded from elsewhere, links open beside it. */
export function htmlPart(mail: Mail): Answer {
  return {
    status: 200,
    body: mail.html ?? '',
    headers: {
      'content-type': 'text/html; charset=utf-8',
      'content-security-policy':
        "default-src 'none'; style-src 'unsafe-inline'; img-src data:; base-uri 'none'; form-action 'none'; " +
        "frame-ancestors 'self'; sandbox allow-popups allow-popups-to-escape-sandbox",
    },
  };
}

export function nothingHere(): Answer {
  return page({
    title: 'Nothing here (mailbox)',
    notice: NOTICE,
    main: '<h1>Nothing here</h1><p>No mail has this address. <a href="/">All mail</a></p>',
    status: 404,
  });
}
