import { randomUUID } from 'node:crypto';
import { defineMiddleware } from 'astro:middleware';
import type { APIContext } from 'astro';
import { doorAt } from '~/server/api-routes';
import { accessOf, bearerOf } from '~/server/auth/access-tokens';
import { personOf, sessionCookieName } from '~/server/auth/sessions';
import { db } from '~/server/db/client';
import { saidCookie } from '~/server/door';
import { pageRuleAt } from '~/server/doors';
import { env } from '~/server/env';
import { DomainError, problemOf } from '~/server/errors';
import { findForm, formReturnCookie } from '~/server/form-return';
import { passes } from '~/server/rules';
import { paths } from '~/lib/paths';
import { getWorks } from '~/server/queries/office/get-works';
import { readWorksUse } from '~/server/queries/office/read-works-use';

export const onRequest = defineMiddleware(async (context, next) => {
  await fillLocals(context);
  if (context.routePattern.startsWith('/api/')) {
    const found = await doorAt(context.routePattern, context.request.method);
    return found === undefined ? noSuchDoor(context) : next();
  }
  const rule = pageRuleAt(context.routePattern);
  if (rule === undefined) return next('/404');
  const answer = passes(rule, context.locals.person);
  if (answer === 'unsigned')
    return context.redirect(paths.signIn(context.url.pathname + context.url.search), 302);
  if (answer === 'hidden') return next('/404');
  if (answer === 'forbidden') return next('/closed');
  await takeNotes(context);
  const response = await next();
  letFormsReachTheProvider(response);
  if (context.locals.person !== null) response.headers.set('cache-control', 'private, no-store');
  return response;
});

async function fillLocals(context: APIContext): Promise<void> {
  const { locals, request, cookies } = context;
  // A rewrite runs the middleware again for its target.
  if ((locals as Partial<App.Locals>).requestId !== undefined) return;
  locals.requestId = request.headers.get('x-request-id') ?? randomUUID();
  locals.now = new Date();
  locals.db = db();
  locals.said = null;
  locals.formReturn = null;
  locals.person = null;
  locals.access = null;
  locals.use = null;
  locals.works = await getWorks(locals.db);
  const bearer = context.routePattern.startsWith('/api/') ? bearerOf(request.headers) : null;
  if (bearer !== null) {
    // A bad token is told so, even beside a good cookie.
    locals.access = await accessOf(bearer, locals.now);
    locals.person = locals.access.ok ? locals.access.person : null;
    return;
  }
  const token = cookies.get(sessionCookieName)?.value;
  if (token === undefined) return;
  const found = await personOf(token);
  locals.person = found?.person ?? null;
  if (found?.renewed) cookies.set(found.renewed.name, found.renewed.value, found.renewed.attributes);
  if (locals.person !== null && locals.person.roles.length > 0 && !context.routePattern.startsWith('/api/')) {
    locals.use = await readWorksUse(locals.db);
  }
}

/** What the last door left for this page: the sentence that it was done, or the form that was refused. */
async function takeNotes({ locals, cookies, url }: APIContext): Promise<void> {
  const said = cookies.get(saidCookie)?.value;
  if (said !== undefined) {
    locals.said = said;
    cookies.delete(saidCookie, { path: '/', secure: true });
  }
  const form = cookies.get(formReturnCookie)?.value;
  if (form !== undefined) {
    locals.formReturn = await findForm(db(), form, url.pathname, locals.now);
    if (locals.formReturn !== null) cookies.delete(formReturnCookie, { path: '/', secure: true });
  }
}

function noSuchDoor({ locals }: APIContext): Response {
  const problem = problemOf(new DomainError('not_found', 'There is no such door.'), locals.requestId);
  return new Response(JSON.stringify(problem), {
    status: problem.status,
    headers: { 'content-type': 'application/problem+json' },
  });
}

/** Browsers apply form-action to redirects after a form too, so the way to the payment page is named. */
function letFormsReachTheProvider(response: Response): void {
  const policy = response.headers.get('content-security-policy');
  if (policy === null) return;
  const provider = env().stripeApiUrl?.origin ?? 'https://checkout.stripe.com';
  response.headers.set(
    'content-security-policy',
    `${policy.replace(/;\s*$/, '')}; form-action 'self' ${provider}`,
  );
}
