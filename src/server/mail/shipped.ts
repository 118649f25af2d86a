import { setLetter, type Letter, type LetterSender } from './layout';

interface Shipped {
  sender: LetterSender;
  orderNumber: string;
  /** What is in this parcel; empty when it holds spares only. */
  units: readonly { serial: string; modelName: string }[];
  carrier: string;
  trackingNumber: string | null;
  /** The carrier's page for this parcel. */
  trackingUrl: string | null;
  /** How many parcels of the order are still to come. */
  parcelsToCome: number;
  orderUrl: string;
}

/** Goes out when a parcel has left, with the certificates of the units in it. */
export function shippedLetter(shipment: Shipped): Letter {
  const { units, trackingNumber, trackingUrl, parcelsToCome } = shipment;
  const attached =
    units.length === 0
      ? ''
      : units.length === 1
        ? ' The test certificate is attached, and a printed copy is in the parcel.'
        : ' The test certificates are attached, and printed copies are in the parcel.';
  const more =
    parcelsToCome === 0
      ? ''
      : parcelsToCome === 1
        ? ' One more parcel of this order follows.'
        : ` ${parcelsToCome} more parcels of this order follow.`;
  return setLetter({
    sender: shipment.sender,
    subject: `Order ${shipment.orderNumber} has been shipped`,
    heading: 'Your parcel is on its way',
    blocks: [
      ...units.map((unit) => ({ kind: 'tag', ...unit }) as const),
      { kind: 'paragraph', text: `It left with ${shipment.carrier}.${attached}${more}` },
      {
        kind: 'facts',
        rows: [
          ['Order', shipment.orderNumber],
          ['Carrier', shipment.carrier],
          ['Tracking number', trackingNumber ?? 'none for this parcel'],
        ],
      },
      trackingUrl === null
        ? { kind: 'button', words: 'See your order', url: shipment.orderUrl }
        : { kind: 'button', words: 'Follow the parcel', url: trackingUrl },
      ...(trackingUrl === null
        ? []
        : [{ kind: 'link', words: 'See your order', url: shipment.orderUrl } as const]),
      ...(units.length === 0
        ? []
        : [
            {
              kind: 'paragraph',
              text: 'Before you transmit: connect a matched antenna or a dummy load, and check the supply voltage and its polarity. The output transistors and their heat sink get hot, and RF at the antenna burns. What your licence and your local rules allow comes first.',
            } as const,
          ]),
    ],
  });
}
