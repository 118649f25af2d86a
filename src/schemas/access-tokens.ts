import { z } from 'zod';
import { accessScopes } from '~/domain/people/access-scopes';
import { formList } from './form-list';

const longestDays = 3650;

export const newAccessTokenSchema = z.object({
  name: z
    .string({ required_error: 'Name the token by where it will be: bench PC.' })
    .trim()
    .min(1, 'Name the token by where it will be: bench PC.')
    .max(80, 'At most 80 characters.'),
  scopes: z.preprocess(
    formList,
    z
      .array(z.enum(accessScopes, { message: 'There is no such scope.' }))
      .min(1, 'Choose what it may do.')
      .transform((list) => [...new Set(list)]),
  ),
  /** Left out or empty: it holds until it is revoked. */
  days: z
    .union([
      z.literal('').transform(() => null),
      z.coerce
        .number({ message: 'Days are a whole number.' })
        .int('Days are a whole number.')
        .min(1, 'At least one day.')
        .max(longestDays, 'At most ten years.'),
    ])
    .nullable()
    .default(null),
});

export type NewAccessToken = z.output<typeof newAccessTokenSchema>;
