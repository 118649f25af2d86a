import { z } from 'zod';
import { staffRoles } from '~/domain/people/roles';
import { personInvitationSchema } from '~/schemas/people';
import { door } from '~/server/door';
import { listPeople } from '~/server/queries/people/list-people';
import { staff } from '~/server/rules';
import { invitePerson } from '~/server/services/people/invite-person';

export const GET = door({
  rule: staff(),
  summary: 'People of the works and their roles',
  output: z.array(
    z.object({
      id: z.number().int(),
      name: z.string(),
      email: z.string(),
      roles: z.array(z.enum(staffRoles)),
      hasPassword: z.boolean(),
      isDisabled: z.boolean(),
      version: z.number().int(),
    }),
  ),
  run: ({ ctx }) => listPeople(ctx.db),
});

export const POST = door({
  rule: staff(),
  summary: 'Invite a person into the works',
  input: personInvitationSchema,
  output: z.object({ userId: z.number().int() }),
  said: () => 'Invited; the letter is on its way.',
  run: ({ input, ctx }) => invitePerson(input, ctx),
});
