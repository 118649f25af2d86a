import { createTransport, type Transporter } from 'nodemailer';

const loopbackHosts = new Set(['127.0.0.1', 'localhost', '[::1]']);

/** A way to send mail, made once for a process and closed with it. */
export type MailTransport = Transporter;

/**
 * Opens the way to the mail server named by `smtp://` or `smtps://` with user and password where it asks.
 * Anything but this machine is spoken to over TLS only; files and addresses named inside a mail are never
 * fetched.
 */
export function mailTransport(smtpUrl: string): MailTransport {
  const url = new URL(smtpUrl);
  const isSecure = url.protocol === 'smtps:';
  if (!isSecure && url.protocol !== 'smtp:') {
    throw new RangeError(`A mail server's address begins with smtp:// or smtps://, not ${url.protocol}//`);
  }
  // Some schemes other than http are not normalised by URL, so the name is compared as it stands.
  const isLocal = loopbackHosts.has(url.hostname.toLowerCase());
  return createTransport({
    host: url.hostname.replace(/^\[|\]$/g, ''),
    port: url.port ? Number(url.port) : isSecure ? 465 : 587,
    secure: isSecure,
    ignoreTLS: isLocal && !isSecure,
    requireTLS: !isLocal && !isSecure,
    auth: url.username
      ? { user: decodeURIComponent(url.username), pass: decodeURIComponent(url.password) }
      : undefined,
    connectionTimeout: 10_000,
    greetingTimeout: 10_000,
    socketTimeout: 60_000,
    disableFileAccess: true,
    disableUrlAccess: true,
  });
}
