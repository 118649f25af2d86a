import { z } from 'zod';
import { staffRoles } from '~/domain/people/roles';
import { formList } from './form-list';

const email = z
  .string({ required_error: 'Give an e-mail address.' })
  .trim()
  .toLowerCase()
  .max(254, 'An e-mail address has at most 254 characters.')
  .email('This is not an e-mail address.');

const name = z
  .string({ required_error: 'Give a name.' })
  .trim()
  .min(1, 'Give a name.')
  .max(120, 'At most 120 characters.');

const newPassword = z
  .string({ required_error: 'Choose a password.' })
  .min(12, 'A password has at least 12 characters.')
  .max(200, 'At most 200 characters.');

/** A list that a form sends as one value, several, or none. */
const roles = z.preprocess(
  formList,
  z.array(z.enum(staffRoles)).transform((list) => [...new Set(list)]),
);

export const signInSchema = z.object({
  email,
  password: z.string({ required_error: 'Type your password.' }).min(1, 'Type your password.').max(200),
  next: z.string().max(500).optional(),
});

export const askLinkSchema = z.object({ email });

export const personInvitationSchema = z.object({
  email,
  name,
  roles: roles.refine((list) => list.length > 0, 'Choose at least one role.'),
});

export const personChangeSchema = z.object({
  roles,
  disabled: z.preprocess((value) => value === 'on' || value === 'true' || value === true, z.boolean()),
  version: z.coerce.number().int(),
});

const addressLines = z
  .preprocess(
    (value) => (typeof value === 'string' ? value.split('\n').map((line) => line.trim()) : value),
    z
      .array(z.string().max(120, 'A line of an address has at most 120 characters.'))
      .transform((lines) => lines.filter((line) => line !== '')),
  )
  .refine((lines) => lines.length > 0, 'Give the address as it stands on a letter.');

export const worksSchema = z.object({
  name: z.string({ required_error: 'Name the works.' }).trim().min(1, 'Name the works.').max(120),
  addressLines,
  country: z
    .string()
    .trim()
    .toUpperCase()
    .regex(/^[A-Z]{2}$/, 'Two letters, as in ISO 3166: DE, GB, US.'),
  email,
  timeZone: z.string().trim().refine(isTimeZone, 'Name a time zone such as Europe/Berlin.'),
  currency: z
    .string()
    .trim()
    .toUpperCase()
    .regex(/^[A-Z]{3}$/, 'Three letters, as in ISO 4217: EUR, GBP, USD.'),
  testerIsNotBuilder: z.preprocess((value) => value === 'on' || value === true, z.boolean()),
});

/** What a sign-in link asks for besides itself; which of it, its purpose says. */
export const linkUseSchema = z.object({
  name: name.optional(),
  email: email.optional(),
  password: newPassword.optional(),
  worksName: z.string().trim().max(120).optional(),
  addressLines: addressLines.optional(),
  /** What the browser is set to; nobody is asked for it. */
  timeZone: z.string().trim().refine(isTimeZone).optional().catch(undefined),
});

function isTimeZone(text: string): boolean {
  try {
    return new Intl.DateTimeFormat('en', { timeZone: text }).resolvedOptions().timeZone !== '';
  } catch {
    return false;
  }
}
