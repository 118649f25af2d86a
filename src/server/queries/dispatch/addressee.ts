import type { PostalAddress } from '~/domain/orders/address';
import { countryName } from '~/lib/countries';

/** Name and address as they stand on a parcel, a line each, the country last and in capitals. */
export function addresseeOf(contact: PostalAddress & { callSign: string | null }): string[] {
  const place = [contact.postcode, contact.city].filter((text) => text !== '').join(' ');
  return [
    contact.callSign === null ? contact.name : `${contact.name}, ${contact.callSign}`,
    ...contact.addressLines,
    place,
    contact.region,
    countryName(contact.country).toUpperCase(),
  ].filter((text) => text.trim() !== '');
}
