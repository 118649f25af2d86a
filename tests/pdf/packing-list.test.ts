import { describe, expect, it, vi } from 'vitest';
import { renderPackingList } from '~/server/pdf/packing-list';
import type { PackingList } from '~/server/pdf/packing-list';
import { syntaxCheck, textOf } from './tools';

// A file is written and read by other programs in every test.
vi.setConfig({ testTimeout: 60_000 });

const model: PackingList = {
  works: { name: 'Thistledown Radio Works', addressLines: ['4 Ropewalk Yard', 'Selwick'] },
  orderNumber: '1093',
  packedOn: '2027-03-10',
  packedBy: 'Tam Ruddock',
  addressee: ['Q0ABC', 'Ana Example', '12 Quay Street', 'Port Example'],
  units: [
    { serial: 'H3-0147', model: 'Holm 3', options: '40 / 30 / 20 m', certificateNumber: 'TC-2027-00412' },
    { serial: 'H3-0148', model: 'Holm 3', options: '', certificateNumber: 'TC-2027-00413A' },
  ],
  spares: [{ name: 'Output transistor', partNumber: 'Q-0012', quantity: 2 }],
  customs: null,
  carrier: 'Parcel post',
  trackingNumber: 'PP 123 456',
  parcels: 2,
};

describe('the packing list', () => {
  it('says what goes where', async () => {
    const pdf = await renderPackingList(model);
    const text = textOf(pdf).replace(/\s+/gu, ' ');
    for (const words of [
      'Packing list',
      'these 2 parcels',
      'Ana Example',
      '12 Quay Street',
      '10 March 2027 by Tam Ruddock',
      'Parcel post',
      'PP 123 456',
      '2 units',
      'H3-0147',
      'Holm 3 · 40 / 30 / 20 m',
      'Certificate TC-2027-00412',
      'Certificate TC-2027-00413A',
      'Output transistor Q-0012 2',
      'page 1 of 1',
    ]) {
      expect(text).toContain(words);
    }
    expect(syntaxCheck(pdf)).toContain('No syntax or stream encoding errors found');
  });

  it('says what customs asks for, with the sums, only where there is a border', async () => {
    const customs = {
      lines: [
        {
          description: 'Amateur radio transceiver',
          quantity: 2,
          hsCode: '8525.60',
          origin: 'Ireland',
          netWeight: '1.24 kg',
          value: '€ 874.00',
        },
      ],
      netWeight: '1.24 kg',
      value: '€ 874.00',
    };
    const text = textOf(await renderPackingList({ ...model, customs })).replace(/\s+/gu, ' ');
    expect(text).toContain('For customs');
    expect(text).toContain('Amateur radio transceiver 2 8525.60 Ireland 1.24 kg € 874.00');
    expect(text).toContain('In all 1.24 kg € 874.00');
    expect(textOf(await renderPackingList(model))).not.toContain('For customs');
  });

  it('comes out the same twice', async () => {
    const [first, second] = [await renderPackingList(model), await renderPackingList(model)];
    expect(Buffer.from(second).equals(Buffer.from(first))).toBe(true);
  });

  it('goes on to further pages with a unit whole on each', async () => {
    const units = Array.from({ length: 30 }, (_, at) => ({
      serial: `H3-0${100 + at}`,
      model: 'Holm 3',
      options: 'three bands',
      certificateNumber: `TC-2027-00${100 + at}`,
    }));
    const text = textOf(await renderPackingList({ ...model, units, spares: [], parcels: 1 }));
    for (const { serial, certificateNumber } of units) {
      expect(text).toContain(serial);
      expect(text).toContain(certificateNumber);
    }
    expect(text).toContain('page 4 of 4');
    expect(text).toContain('this parcel');
    expect(text).not.toContain('Spares');
  });
});
