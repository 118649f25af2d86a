import { nextLetter } from '~/lib/revision-letters';
import type { BuyerPart, CertificateStatement } from './statement';
import { fullNumber } from './statement';

/**
 * The facts around the readings that an amendment may correct. What was read, at which supply and load, by which plan,
 * limits and instruments, and what it came to, belong to the closed run and stay; where they are wrong, the unit is
 * tested again and gets a new number.
 */
export interface CorrectableFacts {
  works: { name: string; addressLines: string[] };
  /** Where it was tested, in words. */
  place: string;
  options: string;
  bomRevision: string;
  firmware: string;
  alignment: string[];
  ambient: string;
  deviations: string[];
  /** Null for none, and for a unit without a buyer. */
  callSign: string | null;
}

/** The test's own place where a statement does not name it. */
export const AT_THE_WORKS = 'at the works';

/** What of a certificate may be corrected, as it states it. */
export function correctableFacts(statement: CertificateStatement): CorrectableFacts {
  const { works, unit, conditions, deviations, buyer } = statement;
  return {
    works,
    place: statement.place ?? AT_THE_WORKS,
    options: unit.options,
    bomRevision: unit.bomRevision,
    firmware: unit.firmware,
    alignment: unit.alignment,
    ambient: conditions.ambient,
    deviations,
    callSign: buyer?.callSign ?? null,
  };
}

interface Issue {
  reason: string;
  code: string;
  checkUrl: string;
  /** Day of issue, `YYYY-MM-DD`. */
  issuedOn: string;
  issuedBy: string;
  /** A new one, so that two digests of one call sign cannot be compared. */
  salt: string;
  digestBuyer: (buyer: BuyerPart) => string;
}

type Amended = { ok: true; statement: CertificateStatement } | { ok: false; reason: string };

/**
 * The statement of the amendment: the one it replaces with the next letter, the corrected facts, what differs and why.
 * Everything else is taken over as it stands.
 */
export function amendStatement(
  before: CertificateStatement,
  corrected: CorrectableFacts,
  issue: Issue,
): Amended {
  const changes = changesBetween(correctableFacts(before), corrected);
  if (changes.length === 0) {
    return {
      ok: false,
      reason:
        'Nothing differs from the certificate: change what is wrong in it, and then issue the amendment.',
    };
  }
  const { works, place, options, bomRevision, firmware, alignment, ambient, deviations, callSign } =
    corrected;
  const buyer = before.buyer === null ? null : { ...before.buyer, callSign, salt: issue.salt };
  return {
    ok: true,
    statement: {
      ...before,
      works,
      place,
      letter: nextLetter(before.letter === '' ? null : before.letter),
      replaces: { number: fullNumber(before), reason: issue.reason, changes },
      unit: { ...before.unit, options, bomRevision, firmware, alignment },
      buyer,
      buyerDigest: buyer === null ? null : issue.digestBuyer(buyer),
      conditions: { ...before.conditions, ambient },
      deviations,
      issuedOn: issue.issuedOn,
      issuedBy: issue.issuedBy,
      code: issue.code,
      checkUrl: issue.checkUrl,
    },
  };
}

/** What differs, a sentence each, the old words beside the new ones; a call sign is not named. */
function changesBetween(before: CorrectableFacts, after: CorrectableFacts): string[] {
  const words = (text: string) => (text === '' ? 'nothing' : `“${text.replace(/\.$/u, '')}”`);
  const facts = [
    ['Name of the works', before.works.name, after.works.name],
    ['Address of the works', before.works.addressLines.join(', '), after.works.addressLines.join(', ')],
    ['Place of the test', before.place, after.place],
    ['Options', before.options, after.options],
    ['BOM revision', before.bomRevision, after.bomRevision],
    ['Firmware', before.firmware, after.firmware],
    ['Alignment', before.alignment.join('; '), after.alignment.join('; ')],
    ['Ambient', before.ambient, after.ambient],
    ['Deviations', before.deviations.join(' '), after.deviations.join(' ')],
  ] as const;
  const changes = facts
    .filter(([, was, is]) => was !== is)
    .map(([name, was, is]) => `${name}: ${words(was)} before, now ${words(is)}.`);
  if (before.callSign !== after.callSign) changes.push('The buyer’s call sign.');
  return changes;
}
