/// <reference types="astro/client" />

import type { WorksUse } from '~/domain/people/stations';
import type { Access } from '~/server/auth/access-tokens';
import type { SignedIn } from '~/server/auth/sessions';
import type { Reader } from '~/server/db/client';
import type { FormReturn } from '~/server/form-return';
import type { WorksSummary } from '~/server/queries/office/get-works';

declare global {
  namespace App {
    interface Locals {
      requestId: string;
      person: SignedIn | null;
      /** What the request's bearer token stands for; null where it bore none. Pages take none. */
      access: Access | null;
      /** For reading; every write goes through a service. */
      db: Reader;
      now: Date;
      works: WorksSummary;
      /** Which rooms of the works are in use; null on pages that show none. */
      use: WorksUse | null;
      /** What the person has just done, to be said once. */
      said: string | null;
      /** What a refused form of this page held, and what is wrong with it. */
      formReturn: FormReturn | null;
    }
  }
}
