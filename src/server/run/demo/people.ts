import type { StaffRole } from '~/domain/people/roles';
import { hashPassword } from '~/server/auth/passwords';
import { numberSeries, userProfiles, userRoles, users, works } from '~/server/db/schema';
import type { Tx } from '~/server/db/client';
import type { Actor } from '~/server/write';

interface DemoPerson {
  /** As the terminal names it. */
  role: string;
  roles: StaffRole[];
  name: string;
  callSign: string | null;
  email: string;
  password: string;
}

const owner: DemoPerson = {
  ...{ role: 'owner', roles: ['owner'], name: 'Maren Tolley', callSign: 'Q4MT' },
  ...{ email: 'owner@thistledown.test', password: 'thistledown-owner' },
};
const builder: DemoPerson = {
  ...{ role: 'builder', roles: ['builder'], name: 'Ruth Osei', callSign: 'Q2RUT' },
  ...{ email: 'builder@thistledown.test', password: 'thistledown-builder' },
};
const tester: DemoPerson = {
  ...{ role: 'tester', roles: ['tester'], name: 'Ines Aldous', callSign: 'Q7INE' },
  ...{ email: 'tester@thistledown.test', password: 'thistledown-tester' },
};
const shipper: DemoPerson = {
  ...{ role: 'shipper', roles: ['shipper'], name: 'Joss Varley', callSign: null },
  ...{ email: 'shipper@thistledown.test', password: 'thistledown-shipper' },
};
const bookkeeper: DemoPerson = {
  ...{ role: 'bookkeeper', roles: ['bookkeeper'], name: 'Oda Fennimore', callSign: null },
  ...{ email: 'bookkeeper@thistledown.test', password: 'thistledown-bookkeeper' },
};
const buyer: DemoPerson = {
  ...{ role: 'buyer', roles: [], name: 'Tamsin Okoro-Vale', callSign: 'Q0ABC' },
  ...{ email: 'q0abc@buyers.example', password: 'thistledown-buyer' },
};

const demoPeople = { owner, builder, tester, shipper, bookkeeper, buyer };

/** Those who can sign in with a password that everybody knows. */
export const demoSignIns = Object.values(demoPeople).map(({ role, email, password }) => ({
  role,
  email,
  password,
}));

/** The buyer who has a password, as orders name them. */
export const demoBuyer = { name: buyer.name, email: buyer.email, callSign: buyer.callSign };

/** The people of the demo, to act on whose behalf. */
export type Cast = Readonly<Record<keyof typeof demoPeople, Actor>>;

/** Founds the works, lets its people in and begins its numbers where a works of some years would be. */
export async function addPeople(tx: Tx, createdAt: Date): Promise<Cast> {
  await tx.insert(works).values({
    ...{ name: 'Thistledown Radio Works', country: 'GB', timeZone: 'Europe/London', currency: 'EUR' },
    addressLines: ['4 Ropewalk Yard', 'Selwick', 'Northshire NS4 1QA'],
    email: 'works@thistledown.example',
  });
  await tx.insert(numberSeries).values(
    Object.entries({
      ...{ order: 1041, batch: 11, lot: 2203, certificate: 372, shipment: 388 },
      ...{ 'serial:H3': 121, 'serial:S5': 44, 'serial:V4': 212 },
    }).map(([series, nextValue]) => ({ series, nextValue })),
  );
  const add = async ({ roles, name, callSign, email, password }: DemoPerson): Promise<Actor> => {
    const [{ insertId: userId }] = await tx
      .insert(users)
      .values({ passwordHash: await hashPassword(password), createdAt });
    await tx.insert(userProfiles).values({ userId, name, callSign, email });
    if (roles.length > 0) await tx.insert(userRoles).values(roles.map((role) => ({ userId, role })));
    return { kind: 'user', userId };
  };
  return {
    owner: await add(owner),
    builder: await add(builder),
    tester: await add(tester),
    shipper: await add(shipper),
    bookkeeper: await add(bookkeeper),
    buyer: await add(buyer),
  };
}
