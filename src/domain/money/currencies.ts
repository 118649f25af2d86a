// ISO 4217 minor units, from memory. An own table, because the ICU of a runtime rounds some currencies to whole
// units (HUF, COP, IDR, IQD) where the standard has two or three digits.
const NONE = 'BIF CLP DJF GNF ISK JPY KMF KRW PYG RWF UGX UYI VND VUV XAF XOF XPF';
const TWO =
  'AED AFN ALL AMD ANG AOA ARS AUD AWG AZN BAM BBD BDT BGN BMD BND BOB BRL BSD BTN BWP BYN BZD CAD CDF CHF CNY ' +
  'COP CRC CUP CVE CZK DKK DOP DZD EGP ERN ETB EUR FJD FKP GBP GEL GHS GIP GMD GTQ GYD HKD HNL HTG HUF IDR ILS ' +
  'INR IRR JMD KES KGS KHR KPW KYD KZT LAK LBP LKR LRD LSL MAD MDL MGA MKD MMK MNT MOP MRU MUR MVR MWK MXN MYR ' +
  'MZN NAD NGN NIO NOK NPR NZD PAB PEN PGK PHP PKR PLN QAR RON RSD RUB SAR SBD SCR SDG SEK SGD SHP SLE SOS SRD ' +
  'SSP STN SVC SYP SZL THB TJS TMT TOP TRY TTD TWD TZS UAH USD UYU UZS VES WST XCD YER ZAR ZMW';
const THREE = 'BHD IQD JOD KWD LYD OMR TND';
const FOUR = 'CLF UYW';

const MINOR_DIGITS: ReadonlyMap<string, number> = new Map(
  [NONE, '', TWO, THREE, FOUR].flatMap((codes, index) =>
    codes
      .split(' ')
      .filter((code) => code !== '')
      .map((code) => [code, index === 0 ? 0 : index] as const),
  ),
);

/** Digits after the point in amounts of a currency (ISO 4217 code), or null for a code that is not known. */
export function minorDigitsOf(currency: string): number | null {
  return MINOR_DIGITS.get(currency) ?? null;
}
