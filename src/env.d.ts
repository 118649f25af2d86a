/// <reference types="astro/client" />

declare namespace App {
  interface Locals {
    requestId: string;
    person: import('~/server/auth/sessions').SignedIn | null;
    /** For reading; every write goes through a service. */
    db: import('~/server/db/client').Reader;
    now: Date;
    works: import('~/server/queries/office/get-works').WorksSummary;
    /** What the person has just done, to be said once. */
    said: string | null;
    /** What a refused form of this page held, and what is wrong with it. */
    formReturn: import('~/server/form-return').FormReturn | null;
  }
}
