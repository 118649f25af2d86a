import { formatDay } from '~/lib/dates';
import { drawFacts, drawHead, drawParagraph, drawShortHead, drawTitle } from './blocks';
import { COLOURS } from './colours';
import { drawFeet, finish } from './document';
import { Flow } from './flow';
import { drawTable } from './table';
import { layOutTag } from './tag';
import { lineHeight, style, wrapText } from './text-layout';

export type PackingList = {
  works: { name: string; addressLines: string[] };
  orderNumber: string;
  /** Day of packing, `YYYY-MM-DD`. */
  packedOn: string;
  packedBy: string;
  /** Name and address, a line each. */
  addressee: string[];
  units: { serial: string; model: string; options: string; certificateNumber: string }[];
  /** Loose parts that go with the units; quantities in pieces. */
  spares: { name: string; partNumber: string; quantity: number }[];
  /** What customs asks for, as printed; null where the parcel stays in the country. */
  customs: {
    lines: {
      description: string;
      quantity: number;
      hsCode: string;
      origin: string;
      netWeight: string;
      value: string;
    }[];
    netWeight: string;
    value: string;
  } | null;
  carrier: string;
  /** Empty while there is none. */
  trackingNumber: string;
  parcels: number;
};

const ADDRESS = style('text', 12);
const HEADING = style('heading', 12.5);

/** The packing list as a PDF file of A4 pages. The same model gives the same bytes. */
export async function renderPackingList(model: PackingList): Promise<Uint8Array> {
  const title = `Packing list, order ${model.orderNumber}`;
  const flow = new Flow(1, (next) => drawShortHead(next, model.works.name, title));
  drawHead(flow, model.works, 'Order', model.orderNumber);
  const count = model.units.length;
  drawTitle(
    flow,
    'Packing list',
    `What is in ${model.parcels === 1 ? 'this parcel' : `these ${model.parcels} parcels`}.`,
  );

  for (const addressLine of model.addressee) {
    const part = flow.sheet.element('P');
    for (const line of wrapText(addressLine, ADDRESS, flow.sheet.contentWidth)) {
      flow.need(lineHeight(ADDRESS));
      flow.y = flow.sheet.into(part, () => flow.sheet.lines([line], flow.sheet.margin, flow.y));
    }
  }
  flow.y += 10;
  drawFacts(flow, [
    ['Packed', `${formatDay(model.packedOn)} by ${model.packedBy}`],
    ['Carrier', model.carrier],
    ['Parcels', String(model.parcels)],
    ['Tracking', model.trackingNumber],
  ]);

  drawHeading(flow, count === 1 ? 'One unit' : `${count} units`);
  for (const unit of model.units) {
    const tag = layOutTag(
      {
        serial: unit.serial,
        about: [unit.model, unit.options].filter((text) => text !== '').join(' · '),
        right: [{ text: `Certificate ${unit.certificateNumber}`, quiet: false }],
      },
      flow.sheet.margin,
      flow.sheet.contentWidth,
    );
    flow.need(tag.height);
    tag.draw(flow.sheet, flow.y);
    flow.y += tag.height + 6;
  }

  if (model.spares.length > 0) {
    drawHeading(flow, 'Spares');
    drawTable(flow, {
      columns: [
        { heading: 'Part', align: 'start', prose: true },
        { heading: 'Part number', align: 'start', prose: false },
        { heading: 'Pieces', align: 'end', prose: false },
      ],
      rows: model.spares.map(({ name, partNumber, quantity }) => ({
        quiet: false,
        cells: [{ text: name }, { text: partNumber }, { text: String(quantity) }],
      })),
    });
  }
  if (model.customs !== null) drawCustoms(flow, model.customs);
  flow.y += 14;
  drawParagraph(
    flow,
    {
      text: 'Is something missing or broken? Keep the wrapping and write to the works with the serial number.',
      style: style('text', 9.6, COLOURS.quiet),
    },
    0,
  );
  drawFeet(flow, title);
  return finish(flow, {
    title,
    author: model.works.name,
    subject: `Contents of the shipment for order ${model.orderNumber}`,
    keywords: model.units.map(({ serial }) => serial),
    madeAt: new Date(`${model.packedOn}T00:00:00Z`),
    attachment: null,
  });
}

function drawCustoms(flow: Flow, customs: NonNullable<PackingList['customs']>): void {
  drawHeading(flow, 'For customs');
  drawTable(flow, {
    columns: [
      { heading: 'Contents', align: 'start', prose: true },
      { heading: 'Pieces', align: 'end', prose: false },
      { heading: 'HS code', align: 'start', prose: false },
      { heading: 'Origin', align: 'start', prose: true },
      { heading: 'Net weight', align: 'end', prose: false },
      { heading: 'Value', align: 'end', prose: false },
    ],
    rows: [
      ...customs.lines.map(({ description, quantity, hsCode, origin, netWeight, value }) => ({
        quiet: false,
        cells: [
          { text: description },
          { text: String(quantity) },
          { text: hsCode },
          { text: origin },
          { text: netWeight },
          { text: value },
        ],
      })),
      {
        quiet: true,
        cells: [{ text: 'In all' }, null, null, null, { text: customs.netWeight }, { text: customs.value }],
      },
    ],
  });
}

function drawHeading(flow: Flow, text: string): void {
  flow.y += 12;
  // A heading stays with what it is the heading of.
  flow.need(lineHeight(HEADING) + 64);
  const { sheet } = flow;
  flow.y =
    sheet.as('H2', () => sheet.lines(wrapText(text, HEADING, sheet.contentWidth), sheet.margin, flow.y)) + 4;
}
