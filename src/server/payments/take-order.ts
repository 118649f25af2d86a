import type { OrderPlacing } from '~/schemas/order-placing';
import { placeOrder } from '~/server/services/orders/place-order';
import { wantCheckout } from '~/server/services/orders/want-checkout';
import type { CallContext } from '~/server/write';
import { startCheckout } from './start-checkout';

/** Places an order and opens its payment page. @throws DomainError as {@link placeOrder} does */
export async function takeOrder(input: OrderPlacing, ctx: CallContext) {
  const { number, checkoutId } = await placeOrder(input, ctx);
  const { orderUrl, payUrl, providerUrl } = await startCheckout(checkoutId, ctx);
  return { number, orderUrl, payUrl, providerUrl };
}

/** Opens a payment page for what an order has to pay now. @throws DomainError as {@link wantCheckout} does */
export async function takePayment(input: { orderId: number }, ctx: CallContext) {
  const { checkoutId } = await wantCheckout(input, ctx);
  const { orderNumber, payUrl, providerUrl } = await startCheckout(checkoutId, ctx);
  return { number: orderNumber, payUrl, providerUrl };
}
