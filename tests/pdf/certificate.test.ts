import { describe, expect, it, vi } from 'vitest';
import { z } from 'zod';
import { buyerText, publicStatement, signedText } from '~/domain/certificates/canonical';
import { publicStatementSchema } from '~/schemas/certificate-statement';
import { digestBuyer, keyId, publicKeyOf, verifyText } from '~/server/keys/ed25519';
import { renderCertificate } from '~/server/pdf/certificate';
import { buildBandPoints, buildPoint, buildStatement } from './build-statement';
import { renderStatement, signatureOf, testKey } from './render-statement';
import { attachmentsOf, factsOf, fontsOf, syntaxCheck, textOf, wordsOf } from './tools';

// A file is written and read by other programs in every test.
vi.setConfig({ testTimeout: 60_000 });

const PAGE_WIDTH = 595.28;
const MARGIN = 40.5;
const publicKey = publicKeyOf(testKey);
const attachedSchema = z.object({
  statement: publicStatementSchema,
  buyer: z.object({ callSign: z.string(), orderNumber: z.string(), salt: z.string() }),
  signature: z.object({ publicKey: z.string(), value: z.string() }),
});

/** Blanks do not count: a line may break anywhere. */
const squeezed = (text: string) => text.replace(/\s+/gu, ' ');

describe('the certificate', () => {
  it('says everything on one page', async () => {
    const pdf = await renderStatement();
    const text = squeezed(textOf(pdf));
    for (const words of [
      'Thistledown Radio Works',
      '4 Ropewalk Yard, Selwick, Northshire NS4 1QA',
      'TC-2027-00412',
      'Final test certificate',
      'H3-0147',
      'Holm 3 · 40 / 30 / 20 m · narrow filter',
      'Built for Q0ABC',
      'order 1093, batch 12, BOM rev D',
      '9 March 2027, 15:10 UTC',
      'Ines Aldous',
      'H3 rev C',
      '1.4',
      '13.80 V',
      '50 Ω, 21 °C',
      '2, passed (run 1 stopped, reworked)',
      '9 March 2027 by Ines Aldous',
      '7.030 04',
      '3.12 W',
      '−54.7',
      '−61.0',
      '≤ −47.9',
      '612 mA',
      'mean of 3',
      '±100 Hz',
      '2.4 to 3.6 W',
      '≤ 700 mA',
      '±, k = 2',
      '0.9 dB',
      'Statement of conformity.',
      'ITU-R SM.329 category A, guarded (w = U).',
      'works’ own, as read (w = 0).',
      'Not assessed to EN 301 783.',
      'power meter PM-2 (accredited calibration, calibration due 14 November 2027)',
      'analyser SA-1 (checked against PM-2, calibration due 2 August 2027)',
      '40 dB tap T-1',
      'This is not a type approval',
      '7F3K-92QD-HM0V',
      'https://works.example/c/7F3K92QDHM0V',
      `Signed with the works’ key ${keyId(publicKey)} (Ed25519).`,
      'The results relate only to the unit tested. Not to be reproduced except in full.',
      'page 1 of 1',
    ]) {
      expect(text).toContain(words);
    }
    expect(text.match(/Pass/gu)).toHaveLength(3);
  });

  it('is a clean file with title, language, author and embedded subset fonts', async () => {
    const pdf = await renderStatement();
    expect(syntaxCheck(pdf)).toContain('No syntax or stream encoding errors found');
    const facts = factsOf(pdf);
    expect(facts).toMatch(/Title: +Final test certificate TC-2027-00412: Holm 3, H3-0147/u);
    expect(facts).toMatch(/Author: +Thistledown Radio Works/u);
    expect(facts).toMatch(/Creator: +Rigwright/u);
    expect(facts).toMatch(/CreationDate: +Tue Mar +9 00:00:00 2027|CreationDate: .*2027/u);
    expect(facts).toMatch(/Page size: +595\.28 x 841\.89 pts \(A4\)/u);
    const fonts = fontsOf(pdf);
    expect(fonts.length).toBeGreaterThan(3);
    for (const font of fonts) expect(font).toMatchObject({ embedded: true, subset: true });
  });

  it('comes out byte for byte the same, whatever was made in between', async () => {
    const first = await renderStatement();
    await renderStatement({ unit: { ...buildStatement().unit, serial: 'µη-Ж', model: 'Ω' } });
    const second = await renderStatement();
    expect(Buffer.from(second).equals(Buffer.from(first))).toBe(true);
    expect(Buffer.from(await renderStatement({ letter: 'A' })).equals(Buffer.from(first))).toBe(false);
  });

  it('carries its data, with which a stranger can check it', async () => {
    const statement = buildStatement();
    const files = attachmentsOf(await renderStatement());
    expect([...files.keys()]).toEqual(['TC-2027-00412.json']);
    const data: unknown = JSON.parse(files.get('TC-2027-00412.json') ?? '');
    const { statement: open, buyer, signature } = attachedSchema.parse(data);
    expect(open).toEqual(publicStatement(statement));
    expect(verifyText(signature.publicKey, signedText(open), signature.value)).toBe(true);
    expect(digestBuyer(buyer)).toBe(open.buyerDigest);
    expect(buyerText(buyer)).toContain('Q0ABC');
    expect(verifyText(signature.publicKey, signedText({ ...open, testedBy: 'X' }), signature.value)).toBe(
      false,
    );
  });

  // The words are those of ISO/IEC 17025:2017, 7.8.8.2.
  it('says which certificate an amendment replaces, and why', async () => {
    const replaces = { number: 'TC-2027-00412', reason: 'The band of the second row was misprinted.' };
    const text = squeezed(textOf(await renderStatement({ letter: 'A', replaces })));
    expect(text).toContain('TC-2027-00412A');
    expect(text).toContain(
      'Amendment to report, serial number TC-2027-00412. It replaces certificate TC-2027-00412. Why: The band of the second row was misprinted.',
    );
  });

  it('names no buyer where there is none', async () => {
    const text = textOf(await renderStatement({ buyer: null, buyerDigest: null }));
    expect(text).not.toContain('Built for');
    expect(text).not.toContain('Q0ABC');
  });

  it('prints verdicts as they are, and a concession with its reason', async () => {
    const points = [
      buildPoint({ verdict: 'fail', concession: 'Agreed with the buyer.', value: 2.3, text: '2.30 W' }),
      buildPoint({ band: '30 m', freqHz: 10_116_000, verdict: 'too_close' }),
      buildPoint({ band: '20 m', freqHz: 14_060_000, verdict: 'fail' }),
      buildPoint({ band: '17 m', freqHz: 18_080_000, verdict: 'not_run', limitText: '' }),
    ];
    const text = squeezed(textOf(await renderStatement({ points, result: 'passed by concession' })));
    expect(text).toMatch(/40 m .*Concession.*30 m .*Too close.*20 m .*Fail.*17 m .*No limit/u);
    expect(text).toContain('By concession of the owner: Power, 40 m, 2.30 W where 2.4 to 3.6 W is asked.');
    expect(text).toContain('Agreed with the buyer.');
    expect(text).not.toContain('Pass');
  });

  it('prints each k, and each uncertainty, where they differ', async () => {
    const wide = { value: 1.4, unit: 'dB', k: 2.13, low: 2, high: 4, text: '1.4 dB' };
    const points = [buildPoint(), buildPoint({ band: '30 m', freqHz: 10_116_000, uncertainty: wide })];
    const text = squeezed(textOf(await renderStatement({ points })));
    expect(text).toContain('5 %, k = 2');
    expect(text).toContain('1.4 dB, k = 2.13');
  });

  it('lists what is measured once for the whole unit', async () => {
    const points = [
      ...buildBandPoints(),
      buildPoint({
        label: 'Current, at rest',
        quantityKey: 'current_rest',
        band: null,
        freqHz: null,
        text: '61 mA',
      }),
      buildPoint({
        label: 'Case closed',
        quantityKey: 'check',
        band: null,
        freqHz: null,
        text: 'yes',
        uncertainty: null,
      }),
    ];
    const text = textOf(await renderStatement({ points }));
    expect(text).toMatch(/Current, at rest +61 mA/u);
    expect(text).toMatch(/Case closed +yes/u);
  });
});

describe('what does not fit', () => {
  const bands = ['160 m', '80 m', '60 m', '40 m', '30 m', '20 m', '17 m', '15 m', '12 m', '10 m'].map(
    (band, at) => ({
      band,
      freqHz: 1_820_000 + at * 2_900_000,
      powerW: 3,
      second: -55 - at,
      third: -62,
      allowed: -47.8 - at / 10,
      currentA: 0.6,
    }),
  );

  it('goes on a second page, which says so', async () => {
    const more = bands.flatMap(({ band, freqHz }) =>
      [4, 5, 6, 7, 8, 9, 10].map((order) =>
        buildPoint({
          band,
          freqHz,
          label: `${order}th harmonic`,
          quantityKey: `harmonic_${order}`,
          value: -60 - order,
          unit: 'dBc',
          text: `−${60 + order}.0 dBc`,
          lower: null,
          upper: -47.9,
          limitText: '≤ −47.9 dBc',
          decision: 'guarded',
        }),
      ),
    );
    const pdf = await renderStatement({ points: [...buildBandPoints(bands), ...more] });
    const text = textOf(pdf);
    expect(text).toContain('page 1 of 2');
    expect(text).toContain('page 2 of 2');
    expect(text).toContain('TC-2027-00412, continued');
    for (const { band } of bands) expect(squeezed(text)).toContain(band);
    expect(text).toContain('10th');
    expectInside(pdf);
  });

  it('keeps five bands with their harmonics on one page', async () => {
    const pdf = await renderStatement({ points: buildBandPoints(bands.slice(0, 5)) });
    expect(textOf(pdf)).toContain('page 1 of 1');
    expectInside(pdf);
  });

  it('keeps five bands on one page also where each reading has its own uncertainty', async () => {
    const points = buildBandPoints(bands.slice(0, 5)).map((point, at) => ({
      ...point,
      uncertainty: { value: 1, unit: 'dB', k: 2, low: 0, high: 1, text: `${(1 + at / 10).toFixed(1)} dB` },
    }));
    const pdf = await renderStatement({ points });
    expect(textOf(pdf)).toContain('page 1 of 1');
    expectInside(pdf);
  });

  it.each([
    ['long without a blank', 'W'.repeat(300)],
    ['long in words', 'coupled output stage '.repeat(15).trim()],
    ['turned round', '\u202eabc\u202c \u2066def\u2069 \u200f\u0000\u0007'],
    ['right to left', 'שלום עולם 12 مرحبا بالعالم'],
    ['signs of many scripts', 'Ω − ± µ μ η Ж Ελληνικά ≤ ≥ √ ① ✓ fi ffi'],
    ['marks upon marks', 'Z\u0351\u036b\u0343\u036aa\u0305\u0336l\u0489go'],
    ['a script without a font here', '中村 さくら 👩‍🚀 무선'],
  ])('survives text that is %s', async (_, hostile) => {
    const plain = buildStatement();
    const statement = {
      ...plain,
      works: { name: hostile, addressLines: [hostile, hostile] },
      unit: {
        ...plain.unit,
        serial: hostile.slice(0, 60),
        model: hostile,
        options: hostile,
        firmware: hostile,
      },
      buyer: { callSign: hostile, orderNumber: hostile, salt: '0'.repeat(32) },
      testedBy: hostile,
      issuedBy: hostile,
      points: [buildPoint({ label: hostile, text: hostile.slice(0, 40) }), ...buildBandPoints()],
      instruments: [
        { name: hostile, grade: 'unchecked' as const, gradeNote: hostile, calibrationDueOn: null },
      ],
      conformity: [hostile, hostile],
    };
    const pdf = await renderCertificate(statement, signatureOf(statement));
    expect(syntaxCheck(pdf)).toContain('No syntax or stream encoding errors found');
    expectInside(pdf);
  });

  it('is refused where it holds half a character, which no text file can carry', () => {
    expect(() => signatureOf(buildStatement({ testedBy: 'a\ud800b' }))).toThrow(TypeError);
  });

  it('finds signs of other scripts in a wider font and spells out those that no font has', async () => {
    const pdf = await renderStatement({ testedBy: 'Ω − ± µ η Ж Ελλ 村', path: '\u202eabc' });
    const text = textOf(pdf).normalize('NFKC');
    for (const sign of ['Ω', '−', '±', 'η', 'Ж', 'Ελλ']) expect(text).toContain(sign);
    expect(text).toContain('µ'.normalize('NFKC'));
    expect(text).toContain('[U+6751]');
    expect(text).toContain('By way of abc.');
    expect(fontsOf(pdf).map(({ name }) => name)).toContain('RWRIGT+DejaVuSans');
    expect(fontsOf(await renderStatement()).map(({ name }) => name)).not.toContain('RWRIGT+DejaVuSans');
  });
});

/** No word leaves the margins (half a point of grace for rounding) or the page. */
function expectInside(pdf: Uint8Array): void {
  const words = wordsOf(pdf);
  expect(words.length).toBeGreaterThan(50);
  const outside = words.filter(
    ({ left, right, bottom }) =>
      left < MARGIN - 0.5 || right > PAGE_WIDTH - MARGIN + 0.5 || bottom > 841.89 - 20,
  );
  expect(outside).toEqual([]);
}
