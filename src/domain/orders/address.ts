export interface PostalAddress {
  name: string;
  addressLines: readonly string[];
  city: string;
  region: string;
  postcode: string;
  /** ISO 3166-1 alpha-2. */
  country: string;
}

// From memory of postal practice: countries that use no postcodes, and those whose addresses need a state or province.
const WITHOUT_POSTCODE = new Set(
  'AE AG AO AW BF BI BJ BO BS BW BZ CD CF CG CI CM DJ DM ER FJ GA GD GH GM GQ GY HK KI KM KN KP LC ML MO MR MW NR QA RW SB SC SL SR ST SY TD TG TK TL TO TV UG VU YE ZW'.split(
    ' ',
  ),
);
const WITH_REGION = new Set(['US', 'CA', 'AU', 'BR', 'MX', 'IN']);

/** What an address lacks before a parcel can be sent to it, in words (`the street`, `the postcode`); empty if nothing. */
export function addressGaps(address: PostalAddress): string[] {
  const blank = (text: string | undefined) => (text ?? '').trim() === '';
  const gaps: string[] = [];
  if (blank(address.name)) gaps.push('the name');
  if (address.addressLines.every(blank)) gaps.push('the street');
  if (blank(address.city)) gaps.push('the town');
  if (!/^[A-Z]{2}$/.test(address.country)) gaps.push('the country');
  else {
    if (WITH_REGION.has(address.country) && blank(address.region)) gaps.push('the state or province');
    if (!WITHOUT_POSTCODE.has(address.country) && blank(address.postcode)) gaps.push('the postcode');
  }
  return gaps;
}
