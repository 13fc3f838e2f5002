import { roleNames } from '../shared/api/roles.js';
import { readConfig } from './platform/config/config.js';
import { driverCodeOf } from './platform/db/driver-errors.js';
import { createLogger } from './platform/logging/logger.js';
import { demoAccounts } from './seed/demo-accounts.js';
import { type RunningServer, startServer } from './start.js';

/** What is wrong with the settings or the machine, in a sentence. */
const SENTENCES: Record<string, string> = {
  EADDRINUSE: 'The port is taken by another program. Choose another, for example PORT=4320.',
  EACCES: 'The port, or a file of the data folder, needs more rights than you have.',
  ECONNREFUSED: 'No database answers at DATABASE_URL.',
  ENOTFOUND: 'The machine named in DATABASE_URL is not known.',
  ER_ACCESS_DENIED_ERROR: 'The database refuses the user or the password of DATABASE_URL.',
  ER_BAD_DB_ERROR: 'The database named in DATABASE_URL does not exist. Create it first.',
  ER_DBACCESS_DENIED_ERROR: 'The user of DATABASE_URL may not use that database.',
};

function tell(line: string): void {
  process.stderr.write(`${line}\n`);
}

async function main(): Promise<void> {
  const config = readConfig(process.env);
  const logger = createLogger(config.logLevel);
  const report = (what: string, ms: number) => process.send?.({ kind: 'step', what, ms });
  const starting = startServer(config, logger, report);
  endWithSignals(starting);
  const { address, hasDemo } = await starting;
  logger.info({ address }, 'listening');
  const accounts = demoAccounts.map((account) => ({ ...account, role: roleNames[account.role] }));
  process.send?.({ kind: 'ready', address, demoAccounts: hasDemo ? accounts : [] });
}

/** Ctrl-C, SIGTERM, or the end of the program that started us; also while still starting. */
function endWithSignals(starting: Promise<RunningServer>): void {
  let isEnding = false;
  const end = (): void => {
    if (isEnding) return;
    isEnding = true;
    starting
      .then((server) => server.stop())
      .then(
        () => process.exit(0),
        () => process.exit(1),
      );
  };
  process.on('SIGTERM', end);
  process.on('SIGINT', end);
  process.on('disconnect', end);
}

main().catch((error: unknown) => {
  const sentence = SENTENCES[driverCodeOf(error) ?? ''];
  const message = error instanceof Error ? error.message : String(error);
  tell(sentence ?? `The server cannot start: ${message}`);
  process.exit(1);
});
