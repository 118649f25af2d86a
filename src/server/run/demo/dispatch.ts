import { eq } from 'drizzle-orm';
import { s10CheckDigit } from '~/domain/dispatch/tracking-number';
import { invariant } from '~/lib/invariant';
import { outbox } from '~/server/db/schema';
import { renderCertificate } from '~/server/pdf/certificate';
import { readSignedCertificate } from '~/server/queries/certificates/read-signed-certificate';
import { attachCertificatePdf } from '~/server/services/certificates/attach-certificate-pdf';
import { issueCertificate } from '~/server/services/certificates/issue-certificate';
import { packOrder } from '~/server/services/dispatch/pack-order';
import { shipShipment } from '~/server/services/dispatch/ship-shipment';
import type { WriteContext } from '~/server/write';
import type { DemoOrder, DemoUnit } from './orders';
import type { Cast } from './people';
import type { Scene } from './play';
import type { Random } from './random';

const minuteMs = 60_000;

/**
 * Issues the certificate of a unit's newest run. What is packed soon has its PDF a minute later; the others
 * are left to the worker, which mails them too.
 */
export function certificateScene(unit: DemoUnit, at: Date, isPackedSoon: boolean, cast: Cast): Scene {
  return {
    at,
    actor: cast.tester,
    play: async (w, then) => {
      const { certificateId } = await issueCertificate({ runId: unit.runId }, w);
      if (!isPackedSoon) return;
      then({
        at: new Date(at.getTime() + minuteMs),
        actor: { kind: 'system' },
        play: (inner) => printCertificate(inner, certificateId),
      });
    },
  };
}

async function printCertificate(w: WriteContext, certificateId: number): Promise<void> {
  const certificate = await readSignedCertificate(w.tx, { id: certificateId });
  invariant(certificate !== null, 'a certificate that was issued can be read');
  const { statement, buyer, signature } = certificate;
  const bytes = await renderCertificate({ ...statement, buyer }, signature);
  await attachCertificatePdf({ certificateId, bytes }, w);
  await w.tx
    .update(outbox)
    .set({ doneAt: w.now })
    .where(eq(outbox.key, `certificate-pdf:${certificateId}`));
}

/** Packs all units of an order into one parcel and, unless it waits for its carrier, ships it. */
export function parcelScene(
  order: DemoOrder,
  parcel: { packedAt: Date; shippedAt: Date | null; weightG: number },
  cast: Cast,
  random: Random,
): Scene {
  const serial = String(random.whole(10_000_000, 99_999_999));
  const { packedAt, shippedAt, weightG } = parcel;
  return {
    at: packedAt,
    actor: cast.shipper,
    play: async (w, then) => {
      const { shipmentNumber } = await packOrder(
        { orderNumber: order.number, serials: order.units.map((unit) => unit.serial), weightG },
        w,
      );
      if (shippedAt === null) return;
      then({
        at: shippedAt,
        actor: cast.shipper,
        play: (inner) =>
          shipShipment(
            {
              ...{ number: shipmentNumber, carrier: 'Post, signed for' },
              trackingNumber: `RR${serial}${s10CheckDigit(serial)}QQ`,
            },
            inner,
          ),
      });
    },
  };
}
