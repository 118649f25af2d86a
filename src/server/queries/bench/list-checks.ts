import { desc, eq } from 'drizzle-orm';
import { deviationText } from '~/domain/bench/daily-check';
import { formatValue } from '~/domain/bench/format';
import type { Reader } from '~/server/db/client';
import { checkReferences, dailyChecks, userProfiles } from '~/server/db/schema';
import { listQuantities } from './list-quantities';
import { referenceOf } from './read-check-state';

export interface ListedCheck {
  id: number;
  number: string;
  name: string;
  at: Date;
  by: string | null;
  entered: string;
  /** At the unit. */
  value: string;
  deviation: string;
  isGood: boolean;
  explanation: string | null;
}

/** The newest checks of all references, those given up included. */
export async function listChecks(reader: Reader, limit: number): Promise<ListedCheck[]> {
  const [rows, book] = await Promise.all([
    reader
      .select({ check: dailyChecks, reference: checkReferences, by: userProfiles.name })
      .from(dailyChecks)
      .innerJoin(checkReferences, eq(checkReferences.id, dailyChecks.checkReferenceId))
      .leftJoin(userProfiles, eq(userProfiles.userId, dailyChecks.byUserId))
      .orderBy(desc(dailyChecks.at), desc(dailyChecks.id))
      .limit(limit),
    listQuantities(reader),
  ]);
  return rows.map(({ check, reference, by }) => {
    const rules = referenceOf(reference, book);
    return {
      ...{ id: check.id, number: reference.number, name: reference.name, at: check.at, by },
      entered: withUnit(check.enteredText, check.enteredUnit),
      value: formatValue(check.value, rules.quantity),
      deviation: deviationText(rules, check.deviation),
      isGood: check.isGood,
      explanation: check.explanation,
    };
  });
}

/** What was typed, with the unit it was taken in where none was typed. */
function withUnit(text: string, unit: string): string {
  const shown = text.replace(/^-/, '\u2212');
  return /[\p{L}%°]/u.test(text.replace(/e[+-]?\d+/i, '')) ? shown : `${shown} ${unit}`.trim();
}
