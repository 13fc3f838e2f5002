// Runs only the database of the data folder, for work on the server from its sources:
//   node server/bin/database.mjs        prints DATABASE_URL for `npm run dev:server` and friends
import { resolve, join, dirname } from 'node:path';
import { fileURLToPath } from 'node:url';
import { startMariadb } from './mariadb.mjs';

const root = dirname(dirname(dirname(fileURLToPath(import.meta.url))));
const data = resolve(root, process.env.SEAMWRIGHT_DATA || 'var');

try {
  const mariadb = await startMariadb({ dataDir: join(data, 'mariadb'), database: 'seamwright' });
  console.log(`export DATABASE_URL=${mariadb.urlOf('seamwright')}`);
  const end = () => void mariadb.stop().then(() => process.exit(0));
  process.on('SIGINT', end);
  process.on('SIGTERM', end);
} catch (error) {
  console.error(error.message);
  process.exit(1);
}
