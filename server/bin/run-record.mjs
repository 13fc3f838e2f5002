// Remembers what runs on a data folder, so that a start after a crash can clear up and a second
// start can say that one runs. Node built-ins only.
import { existsSync, mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { endProcess, isAlive, startTicksOf } from './processes.mjs';

const identify = (pid) => ({ pid, ticks: startTicksOf(pid) });

/** Without /proc (ticks null) the number alone has to do. */
const stillRuns = ({ pid, ticks }) => isAlive(pid) && startTicksOf(pid) === ticks;

/**
 * Takes the data folder for this start. What an earlier, killed start left running is ended.
 * @returns how to note children, and how to let go
 * @throws Error with a sentence when another start runs on the folder
 */
export async function claimDataFolder(data, address) {
  const file = join(data, 'run.json');
  mkdirSync(data, { recursive: true, mode: 0o700 });
  const earlier = readRecord(file);
  if (earlier && stillRuns(earlier)) throw new Error(alreadyRuns(earlier, data));
  if (earlier) {
    const left = earlier.children.filter((child) => child.ticks !== null && stillRuns(child));
    await Promise.all(left.map((child) => endProcess(child.pid, 10_000)));
    rmSync(file, { force: true });
  }
  const record = { ...identify(process.pid), address, children: [] };
  try {
    writeFileSync(file, JSON.stringify(record), { flag: 'wx' });
  } catch (error) {
    // EEXIST: another start was a moment faster.
    if (error.code === 'EEXIST')
      throw new Error(alreadyRuns(readRecord(file), data), { cause: error });
    throw error;
  }
  return {
    note(child) {
      record.children = [...record.children.filter(stillRuns), identify(child.pid)];
      writeFileSync(file, JSON.stringify(record));
    },
    letGo: () => rmSync(file, { force: true }),
  };
}

function alreadyRuns(record, data) {
  const where = record ? ` at ${record.address} (process ${record.pid})` : '';
  return (
    `Seamwright runs already on ${data}${where}. End it first, or start another with a data ` +
    'folder and a port of its own: SEAMWRIGHT_DATA=var2 PORT=4320 npm start'
  );
}

function readRecord(file) {
  if (!existsSync(file)) return null;
  try {
    const record = JSON.parse(readFileSync(file, 'utf8'));
    return Number.isInteger(record.pid) && Array.isArray(record.children) ? record : null;
  } catch {
    // Half written when the machine went down: nothing of that start can still run.
    rmSync(file, { force: true });
    return null;
  }
}
