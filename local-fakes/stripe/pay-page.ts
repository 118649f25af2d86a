import { escapeHtml, page, type Answer } from '../http';
import { formatMinor, formatTime } from './format';
import { totalOf, type Session } from './state';

const NOTICE = 'Stand-in for the payment provider. No money moves. Do not type a real card number.';

interface Trouble {
  message: string;
  number: string;
}

function originsOf(session: Session): string[] {
  const urls = [session.successUrl, session.cancelUrl].filter((url) => url !== null);
  return [...new Set(urls.map((url) => new URL(url).origin))];
}

function orderTable(session: Session): string {
  const rows = session.lines.map(
    (line) => `<tr><td>${escapeHtml(line.name)}</td><td class="number">${line.quantity}</td>
<td class="number">${escapeHtml(formatMinor(line.unitAmount * line.quantity, session.currency))}</td></tr>`,
  );
  return `<table>
<thead><tr><th scope="col">Item</th><th scope="col" class="number">Quantity</th><th scope="col" class="number">Amount</th></tr></thead>
<tbody>
${rows.join('\n')}
</tbody>
<tfoot><tr><th scope="row" colspan="2">Total</th><td class="number">${escapeHtml(formatMinor(totalOf(session), session.currency))}</td></tr></tfoot>
</table>`;
}

/** The page on which the buyer pays, or is told why the card was refused. */
export function payPage(session: Session, trouble: Trouble | null): Answer {
  const error = trouble
    ? `<p class="error" id="card-error" role="alert">${escapeHtml(trouble.message)}</p>`
    : '';
  const invalid = trouble ? ' aria-invalid="true"' : '';
  const cancel = session.cancelUrl
    ? '<button name="action" value="cancel" formnovalidate>Cancel and go back</button>'
    : '';
  const main = `<div class="narrow">
<h1>Pay ${escapeHtml(formatMinor(totalOf(session), session.currency))}</h1>
<p class="quiet">${session.customerEmail ? `For ${escapeHtml(session.customerEmail)}. ` : ''}This page is open until ${formatTime(session.expiresAt * 1000)}.</p>
<div class="scroll">${orderTable(session)}</div>
<form method="post">
<fieldset>
<legend>How you pay</legend>
<label class="choice"><input type="radio" name="method" value="card" checked> Card</label>
<label class="choice"><input type="radio" name="method" value="debit"> Bank debit, settled later</label>
<label for="number">Card number</label>
<input id="number" name="number" type="text" inputmode="numeric" autocomplete="off" maxlength="24" value="${escapeHtml(trouble?.number ?? '')}" aria-describedby="${trouble ? 'card-error ' : ''}test-numbers"${invalid}>
${error}
<div id="test-numbers" class="quiet">
<p>Test card numbers:</p>
<ul class="numbers">
<li><code>4242 4242 4242 4242</code> pays</li>
<li><code>4000 0000 0000 0002</code> is declined</li>
<li><code>4000 0000 0000 9995</code> has insufficient funds</li>
</ul>
</div>
</fieldset>
<div class="buttons">
<button class="main" name="action" value="pay">Pay ${escapeHtml(formatMinor(totalOf(session), session.currency))}</button>
${cancel}
</div>
</form>
</div>`;
  return page({
    title: 'Pay (stand-in for the payment provider)',
    notice: NOTICE,
    main,
    // The answer to the form leads back to the application, which browsers count as the form's target too.
    policy: [`form-action ${["'self'", ...originsOf(session)].join(' ')}`],
    status: trouble ? 402 : 200,
  });
}

/** Shown in place of the form once a session is paid or over. */
export function closedPage(session: Session): Answer {
  const paid = session.status === 'complete';
  const back = paid ? session.successUrl.replaceAll('{CHECKOUT_SESSION_ID}', session.id) : session.cancelUrl;
  const main = `<div class="narrow">
<h1>${paid ? 'This is already paid' : 'This payment page is no longer open'}</h1>
<p>${paid ? 'Nothing more is to be done here.' : 'Its time is over. Nothing was charged. Begin again from the shop.'}</p>
${back === null ? '' : `<p><a href="${escapeHtml(back)}">Go back to the shop</a></p>`}
</div>`;
  return page({ title: 'Payment page closed', notice: NOTICE, main, status: paid ? 200 : 410 });
}

export function nothingHere(): Answer {
  return page({
    title: 'Nothing here',
    notice: NOTICE,
    main: '<h1>Nothing here</h1><p>No payment page has this address. <a href="/control">See all payments</a>.</p>',
    status: 404,
  });
}
