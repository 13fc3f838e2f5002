import { type Connection, createConnection, type RowDataPacket } from 'mysql2/promise';

const LOCK_WAIT_S = 60;

/**
 * Does work that only one server at a time may do on a database; the others wait their turn.
 * @param what names the work, at most 30 letters; locks of other databases on the same machine do not count
 * @param work gets the connection that holds the lock
 * @throws Error with a sentence when the turn does not come within a minute
 */
export async function holdingLock<T>(
  url: string,
  what: string,
  work: (connection: Connection) => Promise<T>,
): Promise<T> {
  const connection = await createConnection({ uri: url, timezone: 'Z', charset: 'utf8mb4' });
  try {
    const [locked] = await connection.query<RowDataPacket[]>(
      "SELECT GET_LOCK(CONCAT(?, ':', MD5(DATABASE())), ?) AS got",
      [what, LOCK_WAIT_S],
    );
    if (locked[0]?.['got'] !== 1)
      throw new Error(`Another server has kept the database busy (${what}) for ${LOCK_WAIT_S} s.`);
    return await work(connection);
  } finally {
    // The lock ends with its connection.
    await connection.end();
  }
}
