import { runWorker } from '~/server/jobs/run-worker';
import { log } from '~/server/log';
import { onStopRequest } from './stop-request';

const stopping = new AbortController();
onStopRequest(() => {
  log.info('stopping');
  stopping.abort();
});
process.send?.('ready');
await runWorker(stopping.signal);
process.exit(0);
