import { escapeHtml, page, type Answer } from '../http';
import { formatMinor, formatTime } from './format';
import { totalOf, type Session, type Store, type StoredEvent } from './state';

const NOTICE = 'Stand-in for the payment provider: controls for trying what a provider does.';

const states: Record<StoredEvent['state'], string> = {
  waiting: 'being sent',
  held: 'held back',
  delivered: 'delivered',
  given_up: 'given up until the next start',
};

function button(action: string, words: string, hidden: Record<string, string>): string {
  const fields = Object.entries(hidden).map(
    ([name, value]) => `<input type="hidden" name="${name}" value="${escapeHtml(value)}">`,
  );
  return `<form method="post" action="/control">${fields.join('')}<button name="action" value="${action}">${words}</button></form>`;
}

function stateOf(store: Store, session: Session): string {
  if (session.status !== 'complete') {
    return session.declines > 0 ? `${session.status}, ${session.declines} declined` : session.status;
  }
  const payment = session.paymentIntent === null ? undefined : store.state.payments[session.paymentIntent];
  if (payment?.status === 'processing') return 'waits for the bank debit';
  if (payment?.status === 'requires_payment_method') return 'the bank debit failed';
  const refunded = payment ? store.refundedOf(payment.id) : 0;
  const words = ['paid'];
  if (refunded > 0) words.push(`${formatMinor(refunded, session.currency)} refunded`);
  if (payment?.disputeId) words.push('disputed');
  return words.join(', ');
}

function actionsFor(store: Store, session: Session): string {
  const fields = { session: session.id };
  const actions = [];
  if (session.status === 'open') actions.push(button('expire', 'Expire it', fields));
  const payment = session.paymentIntent === null ? undefined : store.state.payments[session.paymentIntent];
  if (payment?.status === 'processing') {
    actions.push(button('settle', 'Settle the debit', fields), button('fail', 'Fail the debit', fields));
  }
  if (payment?.status === 'succeeded') {
    if (store.refundedOf(payment.id) < payment.amount) {
      actions.push(`<form method="post" action="/control"><input type="hidden" name="session" value="${session.id}">
<label>Refund, in minor units (empty: all)<input type="number" name="amount" min="1" step="1"></label>
<div class="buttons"><button name="action" value="refund">Refund</button></div></form>`);
    }
    if (payment.disputeId === null) actions.push(button('dispute', 'Dispute it', fields));
  }
  actions.push(button('reverse', 'Send its events again, newest first', fields));
  actions.push(button('unknown', 'Send an event of a type without use', fields));
  return `<div class="buttons">${actions.join('\n')}</div>`;
}

function eventRow(event: StoredEvent): string {
  const statuses = event.attempts.map((attempt) => attempt.status ?? 'no answer').join(', ');
  return `<tr><td>${escapeHtml(event.type)}<br><span class="quiet">${event.id}, ${formatTime(event.created * 1000)}</span></td>
<td>${states[event.state]}<br><span class="quiet">${statuses === '' ? 'not yet tried' : `answers: ${statuses}`}</span></td>
<td><form method="post" action="/control"><input type="hidden" name="event" value="${event.id}">
<label>Times<input type="number" name="times" value="1" min="1" max="50"></label>
<label>Seconds from now<input type="number" name="delay" value="0" min="0" max="3600"></label>
<div class="buttons"><button name="action" value="resend">Send again</button></div></form></td></tr>`;
}

function sessionPart(store: Store, session: Session): string {
  const order = session.metadata['order_number'] ?? session.id;
  const events = store.eventsOf(session.id);
  const table =
    events.length === 0
      ? '<p class="quiet">No events yet.</p>'
      : `<div class="scroll"><table class="wide"><thead><tr><th scope="col">Event</th><th scope="col">State</th><th scope="col">Send again</th></tr></thead>
<tbody>${events.map(eventRow).join('\n')}</tbody></table></div>`;
  return `<section>
<h2>${escapeHtml(order)}: ${escapeHtml(formatMinor(totalOf(session), session.currency))}, ${escapeHtml(stateOf(store, session))}</h2>
<p class="quiet">${session.id}${session.customerEmail ? `, ${escapeHtml(session.customerEmail)}` : ''}${session.status === 'open' ? `, <a href="/pay/${session.id}">pay page</a>` : ''}</p>
${actionsFor(store, session)}
${table}
</section>`;
}

/** All sessions, newest first, with what can be tried on each. `refusal` says why the last try was refused. */
export function controlPage(store: Store, refusal: string | null): Answer {
  const sessions = Object.values(store.state.sessions).reverse();
  const held = Object.values(store.state.events).filter((event) => event.state === 'held').length;
  const holding = store.state.hold
    ? `<p>New events are held back; ${held} held.</p><div class="buttons">${button('release', 'Send held events, oldest first', {})}
${button('release', 'Send held events, newest first', { order: 'newest' })}</div>`
    : `<p>New events are sent at once.</p>${button('hold', 'Hold back new events', {})}`;
  return page({
    title: 'Payments (stand-in for the payment provider)',
    notice: NOTICE,
    main: `<h1>Payments</h1>
${refusal === null ? '' : `<p class="error" role="alert">${escapeHtml(refusal)}</p>`}
${holding}
${sessions.length === 0 ? '<p>No payment was begun yet. Check out in the shop and it will be here.</p>' : sessions.map((session) => sessionPart(store, session)).join('\n')}`,
    status: refusal === null ? 200 : 400,
  });
}
