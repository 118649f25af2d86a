import { describe, expect, it } from 'vitest';
import { checkAttached } from '~/domain/certificates/check-file';
import { firstAttachment } from '~/lib/pdf-attachment';
import { generateKeyPair, keyId, publicKeyOf } from '~/server/keys/ed25519';
import { renderPackingList } from '~/server/pdf/packing-list';
import { renderStatement, testKey } from './render-statement';
import { attachmentsOf } from './tools';

const publicKey = publicKeyOf(testKey);
const keys = [{ keyId: keyId(publicKey), publicKey }];
const attached = async () => firstAttachment(new Uint8Array(await renderStatement()));

describe('what a browser finds in a certificate', () => {
  it('is the attached file as other programs find it', async () => {
    const pdf = new Uint8Array(await renderStatement());
    expect(await firstAttachment(pdf)).toBe(attachmentsOf(pdf).get('TC-2027-00412.json'));
  }, 30_000);

  it('is nothing in a paper without one, in a torn file and in no PDF at all', async () => {
    const list = await renderPackingList({
      ...{ works: { name: 'W', addressLines: [] }, orderNumber: '1', packedOn: '2027-03-10', packedBy: 'P' },
      ...{ addressee: [], units: [], spares: [], customs: null, carrier: '', trackingNumber: '', parcels: 1 },
    });
    const pdf = await renderStatement();
    const at = Buffer.from(pdf).indexOf('/EmbeddedFile');
    expect(await firstAttachment(new Uint8Array(list))).toBeNull();
    expect(await firstAttachment(new Uint8Array(pdf.slice(0, at + 200)))).toBeNull();
    expect(await firstAttachment(new TextEncoder().encode('Good morning.'))).toBeNull();
  });
});

describe('its signature, checked by Web Cryptography', () => {
  it('holds under a key that the works publishes', async () => {
    expect(await checkAttached(await attached(), keys)).toEqual({
      ...{ state: 'holds', fullNumber: 'TC-2027-00412', keyId: keyId(publicKey) },
    });
  });

  it('does not hold over a changed reading, and not under another key of the same name', async () => {
    const text = await attached();
    const changed = text?.replace('"−54.7 dBc"', '"−64.7 dBc"') ?? '';
    expect(changed).not.toBe(text);
    expect(await checkAttached(changed, keys)).toMatchObject({ state: 'broken' });
    const other = generateKeyPair().publicKey;
    expect(await checkAttached(text, [{ keyId: keyId(publicKey), publicKey: other }])).toMatchObject({
      state: 'broken',
    });
  });

  it('is foreign where the works has not published its key, whatever the file says', async () => {
    const other = generateKeyPair().publicKey;
    expect(await checkAttached(await attached(), [{ keyId: keyId(other), publicKey: other }])).toEqual({
      state: 'foreign',
    });
  });

  it.each([[null], [''], ['{}'], ['[1]'], ['{"statement":{"number":1},"signature":null}']])(
    'is not found in %j',
    async (text) => {
      expect(await checkAttached(text, keys)).toEqual({ state: 'unreadable' });
    },
  );
});
