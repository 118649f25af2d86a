import { describe, expect, it } from 'vitest';
import { balanceDueLetter } from './balance-due';
import { certificateIssuedLetter } from './certificate-issued';
import { invitationLetter } from './invitation';
import { setLetter } from './layout';
import { orderReceivedLetter } from './order-received';
import { shippedLetter } from './shipped';
import { signInLinkLetter } from './sign-in-link';

const sender = { name: 'Thistledown Radio Works', addressLines: ['4 Fell Lane', 'Upper Thistle', 'Norland'] };
const orderUrl = 'https://works.example/orders/R-1042?key=a&b=c';
const unit = { serial: 'HOLM-0042', modelName: 'Holm 3' };

const order = {
  sender,
  orderNumber: 'R-1042',
  buyerName: 'Quirin Vale',
  lines: [
    { name: 'Holm 3', amount: 'EUR 389.00' },
    { name: 'Narrow filter', amount: 'EUR 48.00' },
  ],
  total: 'EUR 437.00',
  paid: 'EUR 100.00',
  balance: 'EUR 337.00',
  units: [unit],
  shipWindow: 'by 23 March 2027',
  orderUrl,
};
const shipment = {
  sender,
  orderNumber: 'R-1042',
  units: [unit],
  carrier: 'Norland Post',
  trackingNumber: 'QQ123456785NL',
  trackingUrl: 'https://post.example/QQ123456785NL',
  parcelsToCome: 0,
  orderUrl,
};

const letters = [
  {
    letter: orderReceivedLetter(order),
    url: orderUrl,
    words: ['R-1042', 'HOLM-0042', 'EUR 337.00', '23 March'],
  },
  {
    letter: signInLinkLetter({ sender, url: orderUrl, validMinutes: 15 }),
    url: orderUrl,
    words: ['15 minutes'],
  },
  {
    letter: invitationLetter({
      sender,
      invitedBy: 'Q0WNR',
      roles: ['builder', 'tester'],
      url: orderUrl,
      validUntil: '9 March 2027, 18:00 UTC',
    }),
    url: orderUrl,
    words: ['Q0WNR', 'builder and tester', '9 March 2027'],
  },
  {
    letter: certificateIssuedLetter({
      sender,
      orderNumber: 'R-1042',
      ...unit,
      certificateNumber: 'C-00317',
      issuedOn: '9 March 2027',
      checkUrl: 'https://works.example/certificates/C-00317',
      orderUrl,
      replaces: null,
    }),
    url: 'https://works.example/certificates/C-00317',
    words: ['C-00317', 'HOLM-0042', 'attached'],
  },
  {
    letter: certificateIssuedLetter({
      sender,
      orderNumber: 'R-1042',
      ...unit,
      certificateNumber: 'C-00317A',
      issuedOn: '9 March 2027',
      checkUrl: 'https://works.example/certificates/C-00317A',
      orderUrl,
      replaces: { number: 'C-00317', reason: 'The firmware was misread.' },
    }),
    url: 'https://works.example/certificates/C-00317A',
    words: ['C-00317A', 'takes the place of C-00317', 'The firmware was misread.'],
  },
  { letter: shippedLetter(shipment), url: shipment.trackingUrl, words: ['QQ123456785NL', 'dummy load'] },
  {
    letter: balanceDueLetter({ sender, orderNumber: 'R-1042', balance: 'EUR 337.00', payUrl: orderUrl }),
    url: orderUrl,
    words: ['EUR 337.00'],
  },
];

describe.each(letters)('$letter.subject', ({ letter, url, words }) => {
  it('says the same in text and in HTML, with its link and the works below', () => {
    for (const word of [...words, ...sender.addressLines, sender.name]) {
      expect(letter.text).toContain(word);
      expect(letter.html).toContain(word);
    }
    expect(letter.text).toContain(url);
    expect(letter.html).toContain(`href="${url.replaceAll('&', '&amp;')}"`);
  });

  it('is plain: no exclamation marks, no script, nothing loaded from elsewhere', () => {
    expect(letter.subject + letter.text).not.toContain('!');
    expect(letter.subject).not.toMatch(/[\r\n]/);
    expect(letter.html).not.toMatch(/<script|<img|src=|url\(|<link/);
  });
});

describe('a letter', () => {
  it('escapes whatever stands in its model', () => {
    const evil = '<b onclick="x">&\'';
    const { html, text } = orderReceivedLetter({
      ...order,
      orderNumber: evil,
      buyerName: evil,
      lines: [{ name: evil, amount: evil }],
      units: [{ serial: evil, modelName: evil }],
      shipWindow: evil,
      sender: { name: evil, addressLines: [evil] },
    });
    expect(html).not.toContain('<b ');
    expect(html).not.toContain('onclick="');
    expect(html.match(/&lt;b onclick=&quot;x&quot;&gt;&amp;&#39;/g)?.length).toBeGreaterThanOrEqual(9);
    expect(text).toContain(evil);
  });

  it.each(['javascript:alert(1)', 'data:text/html,x', 'file:///etc/passwd'])('does not link to %s', (url) => {
    expect(() => signInLinkLetter({ sender, url, validMinutes: 15 })).toThrow(RangeError);
  });

  it('keeps line breaks of a paragraph', () => {
    const { html } = setLetter({
      sender,
      subject: 's',
      heading: 'h',
      blocks: [{ kind: 'paragraph', text: 'one\ntwo' }],
    });
    expect(html).toContain('one<br>two');
  });
});

describe('what does not apply is left out', () => {
  it('the balance of an order that is paid in full', () => {
    expect(orderReceivedLetter({ ...order, balance: null }).text).not.toContain('To pay');
  });

  it('a promise where there is none, and serial numbers of spares', () => {
    const { text } = orderReceivedLetter({ ...order, units: [], shipWindow: null });
    expect(text).not.toMatch(/expect to ship|serial number/);
  });

  it('tracking of a parcel without it, and the caution with a parcel of spares', () => {
    const { text } = shippedLetter({ ...shipment, units: [], trackingNumber: null, trackingUrl: null });
    expect(text).toContain('none for this parcel');
    expect(text).not.toMatch(/Follow the parcel|certificate|transmit/);
  });

  it.each([
    [1, 'One more parcel'],
    [3, '3 more parcels'],
  ])('%d parcels to come are named', (parcelsToCome, words) => {
    expect(shippedLetter({ ...shipment, parcelsToCome }).text).toContain(words);
    expect(shippedLetter(shipment).text).not.toContain('more parcel');
  });
});
