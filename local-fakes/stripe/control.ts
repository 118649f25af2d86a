import { z } from 'zod';
import { json, redirect, type Answer } from '../http';
import { controlPage } from './control-page';
import type { Courier } from './deliver';
import { Fault, invalid, missing } from './fault';
import { find, type Session, type Store, type StoredEvent } from './state';
import type { Till } from './till';

const emptyIsNone = z.literal('').transform(() => undefined);

const controlSchema = z.object({
  action: z.enum([
    'resend',
    'reverse',
    'unknown',
    'expire',
    'settle',
    'fail',
    'refund',
    'dispute',
    'hold',
    'release',
  ]),
  session: z.string().default(''),
  event: z.string().default(''),
  times: z.coerce.number().int().min(1).max(50).default(1),
  delay: z.coerce.number().int().min(0).max(3600).default(0),
  amount: emptyIsNone.or(z.coerce.number().int().min(1)).optional(),
  order: z.enum(['oldest', 'newest']).default('oldest'),
});

interface Context {
  store: Store;
  till: Till;
  courier: Courier;
}

async function act({ store, till, courier }: Context, form: z.infer<typeof controlSchema>): Promise<void> {
  const session = (): Session => {
    const found = find(store.state.sessions, form.session);
    if (!found) throw missing('checkout.session', form.session, 'session');
    return found;
  };
  const event = (): StoredEvent => {
    const found = find(store.state.events, form.event);
    if (!found) throw missing('event', form.event, 'event');
    return found;
  };
  switch (form.action) {
    case 'resend':
      return courier.sendAgain(event(), form.times, form.delay);
    case 'reverse':
      return courier.sendInOrder(store.eventsOf(session().id).reverse());
    case 'unknown':
      return till.sendUnknown(session());
    case 'expire':
      return till.expire(session());
    case 'settle':
      return till.settleDebit(session(), true);
    case 'fail':
      return till.settleDebit(session(), false);
    case 'refund':
      return till.refundSession(session(), form.amount ?? null);
    case 'dispute':
      return till.dispute(session());
    case 'hold':
      store.state.hold = true;
      store.save();
      return;
    case 'release': {
      store.state.hold = false;
      store.save();
      const held = Object.values(store.state.events).filter((item) => item.state === 'held');
      return courier.sendInOrder(form.order === 'newest' ? held.reverse() : held);
    }
  }
}

/** What tests ask: sessions and events without the bodies. */
export function controlJson(store: Store): Answer {
  return json(200, {
    hold: store.state.hold,
    sessions: Object.values(store.state.sessions),
    events: Object.values(store.state.events).map((event) => ({ ...event, body: undefined })),
  });
}

/**
 * Does what a form of the control page asks and answers after the first sending; scripts that accept JSON get
 * JSON. `session` or `event` names what it is done to.
 */
export async function answerControl(context: Context, body: string, wantsJson: boolean): Promise<Answer> {
  try {
    const parsed = controlSchema.safeParse(Object.fromEntries(new URLSearchParams(body)));
    if (!parsed.success) {
      const issue = parsed.error.issues[0];
      throw invalid(`${issue?.path.join('.') ?? ''}: ${issue?.message ?? 'not understood'}`);
    }
    await act(context, parsed.data);
  } catch (error) {
    if (!(error instanceof Fault)) throw error;
    return wantsJson ? error.answer() : controlPage(context.store, error.message);
  }
  return wantsJson ? controlJson(context.store) : redirect('/control');
}
