import { startApplication, type Application } from './application';
import { lifetime } from './lifetime';
import { sayFailure, step } from './step.mjs';

function describe({ baseUrl, works, paymentsPage, mailboxPage, logFolder }: Application): string {
  const lines = [
    '',
    'Rigwright runs.',
    '',
    `  Shop              ${baseUrl.origin}/`,
    `  Works             ${baseUrl.origin}/works`,
  ];
  if (mailboxPage) lines.push(`  Mailbox (fake)    ${mailboxPage}/`);
  if (paymentsPage) lines.push(`  Payments (fake)   ${paymentsPage}/`);
  if (logFolder) lines.push(`  Logs              ${logFolder}`);
  if (works.firstOwnerLink) {
    lines.push(
      '',
      'The works is empty. Become its owner with this link; it works once:',
      `  ${works.firstOwnerLink}`,
    );
  }
  if (works.signIns.length > 0) {
    lines.push('', 'Sign in to the demo works as');
    for (const { role, email, password } of works.signIns) {
      lines.push(`  ${role.padEnd(12)}${email.padEnd(36)}${password}`);
    }
  }
  lines.push('', 'Ctrl-C ends it.', '');
  return lines.join('\n');
}

const life = lifetime(60_000, () => step('Stopping'));
try {
  const application = await startApplication({
    variables: { ...process.env },
    signal: life.signal,
    onStop: life.onStop,
    onFatal: (error) => {
      sayFailure(error);
      void life.end(1);
    },
  });
  process.stdout.write(`${describe(application)}\n`);
} catch (error) {
  if (!life.signal.aborted) {
    sayFailure(error);
    await life.end(1);
  }
}
