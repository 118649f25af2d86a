import { formatMoney } from '~/domain/money/format-money';

/** Entries of the ledger of changes in words; one that is missing here is shown by its own name. */
const words: Readonly<Record<string, string>> = {
  'person.ask_link': 'asked for a sign-in link',
  'person.use_link': 'signed in by a link',
  'person.invite': 'invited a person',
  'person.change': 'changed a person’s roles',
  'token.create': 'made an access token',
  'token.revoke': 'revoked an access token',
  'works.found': 'founded the works',
  'works.change': 'changed the works’ data',
  'key.add': 'made a new signing key',
  'part.create': 'entered a part',
  'lot.receive': 'received a lot',
  'lot.bar': 'barred the lot',
  'lot.set_state': 'changed the lot’s state',
  'lot.count': 'counted the lot',
  'lot.reverse_entry': 'reversed a store entry',
  'kit.pick': 'picked a part',
  'kit.undo_pick': 'put a part back',
  'kit.finish': 'finished the kit',
  'batch.issue': 'issued parts to the batch',
  'step.tick': 'ticked a build step',
  'hold.place': 'placed a hold',
  'hold.end': 'ended a hold',
  'rework.open': 'put it into rework',
  'rework.find_cause': 'wrote down what was behind the rework',
  'rework.close': 'closed the rework',
  'unit.spawn': 'made the unit',
  'unit.enter': 'entered the unit',
  'model.draw_up': 'drew up a model',
  'bench.equip': 'equipped the bench',
  'bom.upload': 'sent in a bill of materials',
  'bom.accept_upload': 'accepted a bill of materials',
  'bom.draft': 'drafted a BOM',
  'bom.change_line': 'changed a line of a draft BOM',
  'bom.release': 'released a BOM',
  'build_sheet.release': 'released a build sheet',
  'frequency_plan.revise': 'revised the frequency plan',
  'history.paste': 'sent in a table of old sheets',
  'history.keep': 'kept old sheets as history',
  'quantity.add': 'added a quantity',
  'quantity.revise': 'revised a quantity',
  'quantity.retire': 'took a quantity out of use',
  'limit_rule.add': 'added an emission rule',
  'limit_rule.revise': 'revised an emission rule',
  'limit_rule.retire': 'took an emission rule out of use',
  'test_plan.draft': 'drafted a test plan',
  'test_plan.save': 'changed a draft test plan',
  'test_plan.release': 'released a test plan',
  'batch.open': 'opened the batch',
  'batch.change': 'changed the batch',
  'order.place': 'placed the order',
  'order.pay': 'paid',
  'order.pay_balance': 'paid the balance',
  'order.pay_by_hand': 'wrote a payment down',
  'order.cancel': 'cancelled the order',
  'order.ask_balance': 'asked for the balance',
  'shipment.pack': 'packed a parcel',
  'shipment.unpack': 'took a parcel apart',
  'shipment.ship': 'shipped a parcel',
  'shipment.ship_again': 'shipped a parcel that had left',
  'run.open': 'opened the run',
  'run.take_over': 'took the run over',
  'run.conditions': 'wrote the conditions down',
  'run.close': 'closed the run',
  'reading.record': 'took a reading',
  'reading.correct': 'corrected a reading',
  'reading.send': 'sent readings from a script',
  'reading.void': 'voided a reading',
  'concession.grant': 'let a point go by concession',
  'concession.withdraw': 'withdrew a concession',
  'sweep.send': 'sent a sweep from a script',
  'sweep.read': 'read a sweep',
  'instrument.create': 'entered an instrument',
  'instrument.revise': 'revised an instrument',
  'path.create': 'entered a path',
  'path.revise': 'revised a path',
  'instrument.retire': 'took an instrument out of use',
  'instrument.return': 'put an instrument back in use',
  'path.retire': 'took a path out of use',
  'path.return': 'put a path back in use',
  'path_part.create': 'entered a path part',
  'path_part.revise': 'revised a path part',
  'path_part.retire': 'took a path part out of use',
  'path_part.return': 'put a path part back in use',
  'check.define': 'defined a check reference',
  'check.retire': 'gave up a check reference',
  'check.record': 'measured a check reference',
  'check.explain': 'explained a bad check',
  'run.end_flag': 'ended a run’s flag',
  'certificate.issue': 'issued the certificate',
  'certificate.amend': 'amended the certificate',
  'certificate.print': 'printed the certificate',
  'checkout.want': 'asked for a payment page',
  'checkout.want_again': 'asked for the payment page again',
  'checkout.open': 'opened the payment page',
  'checkout.replace': 'replaced the payment page',
  'checkout.await_money': 'waits for the money',
  'checkout.end': 'closed the payment page',
  'order.release_places': 'gave the places back',
  'payment.known': 'repeated a payment that is written down',
  'payment.too_little': 'paid too little',
  'payment.send_back': 'paid what goes back',
  'payment.refunded': 'sent money back',
  'payment.dispute': 'disputed a payment',
};

/** What an entry says was done: `run.close` becomes "closed the run". */
export function changeInWords(action: string): string {
  return words[action] ?? action.replaceAll('_', ' ').replace('.', ': ');
}

/** An entry's details on one line: `state: usable → barred, reason: cracked`; sums with their currency. */
export function detailsInWords(details: Record<string, unknown>): string {
  const currency = typeof details['currency'] === 'string' ? details['currency'] : undefined;
  return Object.entries(details)
    .flatMap(([name, value]) => {
      if (value === null || value === undefined) return [];
      if (currency !== undefined) {
        if (name === 'currency') return [];
        const sum = sumInWords(name, value, currency);
        if (sum !== undefined) return [sum];
      }
      return [`${spaced(name)}: ${said(value)}`];
    })
    .join(', ');
}

/** `totalMinor: 71300` as `total: € 713`. */
function sumInWords(name: string, minor: unknown, currency: string): string | undefined {
  if (!name.endsWith('Minor') || typeof minor !== 'number') return undefined;
  return `${spaced(name.slice(0, -'Minor'.length))}: ${formatMoney({ minor, currency })}`;
}

function said(value: unknown): string {
  if (Array.isArray(value)) return value.length === 0 ? 'none' : value.map(said).join(' + ');
  if (typeof value === 'object' && value !== null) {
    if ('from' in value && 'to' in value) return `${said(value.from)} → ${said(value.to)}`;
    return Object.entries(value)
      .map(([name, inner]) => `${spaced(name)} ${said(inner)}`)
      .join(' ');
  }
  if (value === true) return 'yes';
  if (value === false) return 'no';
  if (value === null || value === undefined || value === '') return 'none';
  return typeof value === 'number' || typeof value === 'string' ? String(value) : 'something';
}

function spaced(name: string): string {
  return name.replace(
    /([a-z])([A-Z])/g,
    (_, before: string, after: string) => `${before} ${after.toLowerCase()}`,
  );
}
