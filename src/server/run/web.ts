import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { env } from '~/server/env';
import { log } from '~/server/log';
import { createWebServer, type ApplicationHandler } from './http-server';
import { portInUseExitCode } from './processes';
import { isLoopback, loopbackAddress, parseProxies } from './request-guards';
import { onStopRequest } from './stop-request';

const graceMs = 10_000;
const buildFolder = process.env['RIGWRIGHT_BUILD'];
if (!buildFolder) throw new Error('RIGWRIGHT_BUILD names the folder of the build.');

// The built entry starts a server of its own unless told not to.
process.env['ASTRO_NODE_AUTOSTART'] = 'disabled';
const entry = (await import(pathToFileURL(join(buildFolder, 'server/entry.mjs')).href)) as {
  handler: ApplicationHandler;
};

const { port, baseUrl } = env();
const web = await createWebServer({
  application: entry.handler,
  buildFolder,
  baseUrl,
  trustedProxies: parseProxies(process.env['RIGWRIGHT_TRUSTED_PROXIES']),
  log,
});

web.server.once('error', (error) => {
  log.fatal({ err: error }, 'cannot listen');
  process.exit('code' in error && error.code === 'EADDRINUSE' ? portInUseExitCode : 1);
});
// Where people reach it on this machine only, the network does not reach it either.
const address =
  process.env['RIGWRIGHT_LISTEN'] ?? (isLoopback(baseUrl) ? loopbackAddress(baseUrl) : undefined);
web.server.listen(port, address, () => {
  log.info({ port, address }, 'listening');
  process.send?.('ready');
});

onStopRequest(() => {
  log.info('stopping');
  void web.stop(graceMs).then(() => process.exit(0));
});
