import { eq, sql } from 'drizzle-orm';
import { modelIsForSale } from '~/domain/catalog/for-sale';
import { money } from '~/domain/money/money';
import { lineTotal, orderTotal, taxOf } from '~/domain/money/order-total';
import { addressGaps } from '~/domain/orders/address';
import { checkPlaces, holdEnd } from '~/domain/orders/checkout';
import { batchTakesOrders } from '~/domain/planning/batch-status';
import { checkConfiguration, priceOf } from '~/domain/planning/configuration';
import type { OptionGroup } from '~/domain/planning/configuration';
import type { OrderPlacing } from '~/schemas/order-placing';
import { linkToken, newToken, tokenHash } from '~/server/auth/tokens';
import type { Tx } from '~/server/db/client';
import { batches, contacts, models, orderLines, orders, placeHolds, userRoles } from '~/server/db/schema';
import { env } from '~/server/env';
import { DomainError } from '~/server/errors';
import { listOptionGroups } from '~/server/queries/catalog/list-option-groups';
import type { Ctx, WriteContext } from '~/server/write';
import { nextNumber, write } from '~/server/write';
import { addCheckout } from './add-checkout';

/** Until tax rates are kept as data, everything is sold without tax, and the order says so. */
const untaxed = { kind: 'zero_rated', ratePpm: 0, reason: 'The works charges no tax on this sale.' } as const;

/**
 * Places an order for rigs of one configuration: holds their places while the buyer pays, and wants a
 * checkout for what is due now. Carriage is in the price.
 *
 * @returns the checkout to open at the provider; the order's link follows from its id.
 * @throws DomainError `conflict` where the batch takes no orders, `taken` where too few places are free,
 * `invalid` where the options cannot be built or the address is incomplete
 */
export async function placeOrder(
  input: OrderPlacing,
  ctx: Ctx,
): Promise<{ orderId: number; number: number; checkoutId: number }> {
  const gaps = addressGaps(input);
  if (gaps.length > 0) throw incompleteAddress(gaps);
  return write(ctx, async (w) => {
    const batch = await lockBatchForSale(w.tx, input.batch);
    const groups = await listOptionGroups(w.tx, batch.modelId);
    const chosen = new Set(input.option);
    checkOptions(groups, chosen);
    const { places, placesTaken: taken, placesHeld: held } = batch;
    const answer = checkPlaces({ places, taken, held }, input.quantity);
    if (!answer.ok) throw new DomainError('taken', answer.reason, { quantity: answer.reason });

    const unitPrice = money(priceOf(batch.priceMinor, groups, chosen), batch.currency);
    const line = { unitPrice, quantity: input.quantity, taxPpm: untaxed.ratePpm };
    const { total } = orderTotal([line], batch.currency);
    const deposit = batch.depositMinor === null ? total.minor : batch.depositMinor * input.quantity;
    const dueNowMinor = input.pay === 'deposit' ? Math.min(deposit, total.minor) : total.minor;

    const contactId = await addContact(w, input);
    const number = await nextNumber(w.tx, 'order');
    const [{ insertId: orderId }] = await w.tx.insert(orders).values({
      number,
      linkHash: tokenHash(newToken()),
      buyerUserId: w.actor.kind === 'user' ? await buyerAmong(w.tx, w.actor.userId) : null,
      contactId,
      state: 'awaiting_payment',
      currency: batch.currency,
      totalMinor: total.minor,
      dueNowMinor,
      destinationCountry: input.country,
      tax: { ...untaxed, country: input.country },
      promisedOn: batch.estimatedOn,
      placedAt: w.now,
    });
    const linkHash = tokenHash(linkToken(env().secret, 'order', orderId));
    await w.tx.update(orders).set({ linkHash }).where(eq(orders.id, orderId));
    const [{ insertId: orderLineId }] = await w.tx.insert(orderLines).values({
      orderId,
      lineNo: 1,
      kind: 'rig',
      modelId: batch.modelId,
      batchId: batch.id,
      description: batch.modelName,
      options: groups
        .flatMap((group) => group.options)
        .filter(({ key }) => chosen.has(key))
        .map(({ key, label, priceMinor }) => ({ key, label, priceMinor })),
      quantity: input.quantity,
      unitPriceMinor: unitPrice.minor,
      taxMinor: taxOf(line).minor,
      totalMinor: lineTotal(line).minor + taxOf(line).minor,
    });
    await w.tx.insert(placeHolds).values({
      batchId: batch.id,
      orderLineId,
      quantity: input.quantity,
      state: 'held',
      heldUntil: holdEnd(w.now),
    });
    await w.tx
      .update(batches)
      .set({ placesHeld: sql`${batches.placesHeld} + ${input.quantity}` })
      .where(eq(batches.id, batch.id));
    const checkoutId = await addCheckout(w, { orderId, amountMinor: dueNowMinor, purpose: 'order' });
    await w.record({
      action: 'order.place',
      subjects: [
        { type: 'order', id: orderId },
        { type: 'batch', id: batch.id },
      ],
      details: {
        quantity: input.quantity,
        totalMinor: total.minor,
        dueNowMinor,
        currency: batch.currency,
        placesHeld: { from: held, to: held + input.quantity },
      },
    });
    return { orderId, number, checkoutId };
  });
}

async function lockBatchForSale(tx: Tx, number: number) {
  const [batch] = await tx.select().from(batches).where(eq(batches.number, number)).for('update');
  if (batch === undefined || !batchTakesOrders(batch.state)) {
    throw new DomainError('conflict', 'This batch takes no orders now. See the rig’s page for the next one.');
  }
  const [model] = await tx
    .select({ name: models.name, state: models.state })
    .from(models)
    .where(eq(models.id, batch.modelId));
  if (model === undefined || !modelIsForSale(model.state)) {
    throw new DomainError('conflict', 'This rig is not for sale now.');
  }
  return { ...batch, modelName: model.name };
}

function checkOptions(groups: readonly OptionGroup[], chosen: ReadonlySet<string>): void {
  const answer = checkConfiguration(groups, chosen);
  if (answer.ok) return;
  const sentences = answer.problems.map(({ reason }) => reason).join(' ');
  throw new DomainError('invalid', sentences, { option: sentences });
}

function incompleteAddress(gaps: string[]): DomainError {
  const fieldOf: Record<string, string> = {
    'the name': 'name',
    'the street': 'addressLines',
    'the town': 'city',
    'the country': 'country',
    'the state or province': 'region',
    'the postcode': 'postcode',
  };
  const fields = Object.fromEntries(
    gaps.map((gap) => [fieldOf[gap] ?? 'addressLines', `An address in this country needs ${gap}.`]),
  );
  return new DomainError('invalid', `The address lacks ${gaps.join(' and ')}.`, fields);
}

/** A signed-in buyer orders for themselves; people of the works place orders for others. */
async function buyerAmong(tx: Tx, userId: number): Promise<number | null> {
  const [role] = await tx
    .select({ role: userRoles.role })
    .from(userRoles)
    .where(eq(userRoles.userId, userId))
    .limit(1);
  return role === undefined ? userId : null;
}

async function addContact(w: WriteContext, input: OrderPlacing): Promise<number> {
  const { email, name, callSign, phone, addressLines, city, region, postcode, country } = input;
  const [{ insertId }] = await w.tx
    .insert(contacts)
    .values({ email, name, callSign, phone, addressLines, city, region, postcode, country });
  return insertId;
}
