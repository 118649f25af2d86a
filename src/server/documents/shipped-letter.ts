import { z } from 'zod';
import { paths } from '~/lib/paths';
import { linkToken } from '~/server/auth/tokens';
import { env } from '~/server/env';
import { shippedLetter } from '~/server/mail/shipped';
import { readShipment } from '~/server/queries/dispatch/read-shipment';
import { readFile } from '~/server/queries/files/read-file';
import { fullUrl, readSender } from './letter';
import type { LetterWriter } from './letter';

const payloadSchema = z.object({ shipmentId: z.number().int() });

/** The letter that a parcel has left, with the certificates of the units in it. */
export const writeShipped: LetterWriter = async (reader, payload) => {
  const shipment = await readShipment(reader, { id: payloadSchema.parse(payload).shipmentId });
  if (shipment === null || shipment.isErased) return null;
  const attachments = [];
  for (const { certificate } of shipment.units) {
    if (certificate.fileId === null) throw new Error(`Certificate ${certificate.number} has no PDF yet.`);
    const { bytes, mediaType } = await readFile(reader, certificate.fileId);
    attachments.push({ filename: `${certificate.number}.pdf`, contentType: mediaType, content: bytes });
  }
  const letter = shippedLetter({
    sender: await readSender(reader),
    orderNumber: String(shipment.orderNumber),
    units: shipment.units.map(({ serial, modelName }) => ({ serial, modelName })),
    carrier: shipment.carrier,
    trackingNumber: shipment.trackingNumber,
    // Carriers' own pages are not kept as data yet.
    trackingUrl: null,
    parcelsToCome: shipment.parcelsToCome,
    orderUrl: fullUrl(paths.orderByLink(linkToken(env().secret, 'order', shipment.orderId))),
  });
  return { ...letter, to: shipment.email, attachments };
};
