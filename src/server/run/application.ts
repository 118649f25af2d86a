import { mkdirSync, realpathSync } from 'node:fs';
import { join } from 'node:path';
import { readEnv } from '~/server/env';
import { ensureBuild } from './build';
import { startFakes, type Fakes } from './fakes';
import { localSettings } from './local-settings';
import { tryLock } from './machine-lock.mjs';
import { isPortFree } from './ports';
import { openPrivateDatabase } from './private-database';
import { EndedEarly, portInUseExitCode, supervise, type Supervised } from './processes';
import { root } from './root';
import { PlainError, step } from './step.mjs';
import { prepareWorks, webhookPath, type Works } from './works';

/** A running application: its processes, and what a person needs to know to use it. */
export interface Application {
  baseUrl: URL;
  works: Works;
  paymentsPage: string | undefined;
  mailboxPage: string | undefined;
  /** The folder of the log files; undefined when the logs go to this process's own output. */
  logFolder: string | undefined;
  /** The settings that its processes run with. */
  variables: NodeJS.ProcessEnv;
}

interface Options {
  /** The settings as they were given; those that are missing are made up here. */
  variables: NodeJS.ProcessEnv;
  /** Ends a start under way. */
  signal: AbortSignal;
  /** Takes what has to be undone at the end, last first. */
  onStop: (task: () => Promise<void>) => void;
  /** Called when the application cannot go on. */
  onFatal: (error: Error) => void;
}

const webGraceMs = 15_000;
const workerGraceMs = 20_000;

function readPort(text: string | undefined): number {
  const port = Number(text ?? '4321');
  if (Number.isInteger(port) && port > 0 && port < 65_536) return port;
  throw new PlainError(`PORT is “${text ?? ''}”; give it a number from 1 to 65535.`);
}

async function takePort(port: number, onStop: Options['onStop']): Promise<void> {
  const release = await tryLock(`port ${port}`);
  if (release) onStop(release);
  if (!release || !(await isPortFree(port))) {
    throw new PlainError(
      `Port ${port} is in use; end the program that uses it, or choose another with PORT=4322.`,
    );
  }
}

/** The database of the settings, or a private one in the data folder. */
async function openDatabaseServer(
  dataFolder: string,
  { variables, onStop, onFatal }: Options,
): Promise<string> {
  const given = variables['DATABASE_URL'];
  if (given) {
    step('Using the database of DATABASE_URL');
    return given;
  }
  step('Starting a private MariaDB');
  const database = await openPrivateDatabase({ folder: join(dataFolder, 'database'), durable: true });
  onStop(() => database.release());
  database.onLost(() => onFatal(new PlainError('The private MariaDB ended; start again.')));
  return database.url('rigwright');
}

async function startProcess(options: Parameters<typeof supervise>[0], port: number): Promise<Supervised> {
  const supervised = supervise(options);
  try {
    await supervised.ready;
    return supervised;
  } catch (error) {
    await supervised.stop(webGraceMs);
    if (error instanceof EndedEarly && error.exitCode === portInUseExitCode) {
      throw new PlainError(
        `Port ${port} is in use; end the program that uses it, or choose another with PORT=4322.`,
      );
    }
    const where =
      options.logFolder === undefined ? '' : ` Look into ${join(options.logFolder, `${options.name}.log`)}.`;
    throw new PlainError(`The ${options.name} process does not start.${where}`);
  }
}

/** A settings object that its processes can use, or a sentence about the first setting that they cannot. */
function checkSettings(variables: NodeJS.ProcessEnv): void {
  try {
    readEnv(variables);
  } catch (error) {
    throw new PlainError(error instanceof Error ? error.message : String(error));
  }
}

function composeVariables(
  given: NodeJS.ProcessEnv,
  added: NodeJS.ProcessEnv,
  fakes: Fakes,
): NodeJS.ProcessEnv {
  return { ...given, ...added, ...fakes.variables };
}

/**
 * Starts everything the application consists of, in order, and says each step.
 *
 * @throws PlainError when a person has to put something right first.
 */
export async function startApplication(options: Options): Promise<Application> {
  const given = options.variables;
  const port = readPort(given['PORT']);
  const baseText = given['RIGWRIGHT_BASE_URL'] ?? `http://localhost:${port}`;
  if (!URL.canParse(baseText))
    throw new PlainError(`RIGWRIGHT_BASE_URL is “${baseText}”; give it a whole address.`);
  const baseUrl = new URL(baseText);
  await takePort(port, options.onStop);
  const namedFolder = given['RIGWRIGHT_DATA'] ?? join(root, '.data');
  mkdirSync(namedFolder, { recursive: true, mode: 0o700 });
  const dataFolder = realpathSync(namedFolder);
  const local = await localSettings(dataFolder);
  const fakes = await startFakes({ variables: given, local, dataFolder, baseUrl, webhookPath });
  options.onStop(() => fakes.stop());

  const databaseUrl = await openDatabaseServer(dataFolder, options);
  const variables = composeVariables(
    given,
    {
      NODE_ENV: 'production',
      DATABASE_URL: databaseUrl,
      PORT: String(port),
      RIGWRIGHT_BASE_URL: baseUrl.origin,
      RIGWRIGHT_DATA: dataFolder,
      RIGWRIGHT_SECRET: given['RIGWRIGHT_SECRET'] ?? local.secret,
    },
    fakes,
  );
  checkSettings(variables);
  // What this process itself does with the database reads its settings where every process does.
  Object.assign(process.env, variables);
  options.signal.throwIfAborted();
  const works = await prepareWorks({
    databaseUrl,
    isPrivate: !given['DATABASE_URL'],
    dataFolder,
    baseUrl,
    demo: given['RIGWRIGHT_DEMO'],
  });

  options.signal.throwIfAborted();
  const buildFolder = await ensureBuild(options.signal);
  options.signal.throwIfAborted();
  // A service manager expects the logs of a production machine on standard output.
  const logFolder = given['DATABASE_URL'] ? undefined : join(dataFolder, 'logs');
  if (logFolder !== undefined) mkdirSync(logFolder, { recursive: true, mode: 0o700 });
  step('Starting the web server and the worker');
  const processEnv = { ...variables, RIGWRIGHT_BUILD: buildFolder };
  for (const [name, graceMs] of [
    ['worker', workerGraceMs],
    ['web', webGraceMs],
  ] as const) {
    const onRestart = (code: number | null): void =>
      step(`The ${name} process ended by itself (${code ?? 'signal'}); starting it again`);
    const supervised = await startProcess(
      { name, env: processEnv, logFolder, onRestart, signal: options.signal },
      port,
    );
    options.onStop(() => supervised.stop(graceMs));
  }
  return {
    baseUrl,
    works,
    paymentsPage: fakes.paymentsPage,
    mailboxPage: fakes.mailboxPage,
    logFolder,
    variables,
  };
}
