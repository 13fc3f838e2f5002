import { and, asc, eq } from 'drizzle-orm';
import type { Db } from '../../platform/db/client.js';
import { isDuplicate } from '../../platform/db/driver-errors.js';
import { createEnvelopeNameTaken } from './envelopes.errors.js';
import type { Envelope, EnvelopeData } from './envelopes.model.js';
import { envelopes } from './envelopes.table.js';

export type EnvelopesRepository = ReturnType<typeof createEnvelopesRepository>;

interface Key {
  readonly id: string;
  readonly workshopId: string;
}

const columns = {
  id: envelopes.id,
  name: envelopes.name,
  shape: envelopes.shape,
  widthMm: envelopes.widthMm,
  depthMm: envelopes.depthMm,
  diameterMm: envelopes.diameterMm,
  heightMm: envelopes.heightMm,
  marginMm: envelopes.marginMm,
  nozzleMm: envelopes.nozzleMm,
  layerHeightMm: envelopes.layerHeightMm,
  updatedAt: envelopes.updatedAt,
};

const selectFrom = (db: Db) => db.select(columns).from(envelopes);
const isKey = ({ id, workshopId }: Key) =>
  and(eq(envelopes.id, id), eq(envelopes.workshopId, workshopId));

export function createEnvelopesRepository({ db }: { db: Db }) {
  return {
    async list(workshopId: string): Promise<Envelope[]> {
      const rows = await selectFrom(db)
        .where(eq(envelopes.workshopId, workshopId))
        .orderBy(asc(envelopes.name));
      return rows.map(toEnvelope);
    },

    async find(key: Key): Promise<Envelope | null> {
      const rows = await selectFrom(db).where(isKey(key)).limit(1);
      return rows[0] ? toEnvelope(rows[0]) : null;
    },

    /** @throws envelope.nameTaken */
    async add(key: Key, data: EnvelopeData, now: Date): Promise<void> {
      await named(data, () =>
        db.insert(envelopes).values({ ...key, ...toColumns(data), createdAt: now, updatedAt: now }),
      );
    },

    /** @returns whether there was one. @throws envelope.nameTaken */
    async replace(key: Key, data: EnvelopeData, now: Date): Promise<boolean> {
      const [changed] = await named(data, () =>
        db
          .update(envelopes)
          .set({ ...toColumns(data), updatedAt: now })
          .where(isKey(key)),
      );
      return changed.affectedRows > 0;
    },

    /** @returns whether there was one */
    async remove(key: Key): Promise<boolean> {
      const [gone] = await db.delete(envelopes).where(isKey(key));
      return gone.affectedRows > 0;
    },
  };
}

async function named<T>(data: EnvelopeData, write: () => Promise<T>): Promise<T> {
  try {
    return await write();
  } catch (error) {
    // ER_DUP_ENTRY: the only unique value besides the identifier is the name in the workshop.
    if (isDuplicate(error)) throw createEnvelopeNameTaken(data.name);
    throw error;
  }
}

function toColumns(data: EnvelopeData) {
  const { name, shape, heightMm, marginMm, nozzleMm, layerHeightMm } = data;
  const bed =
    data.shape === 'round'
      ? { widthMm: null, depthMm: null, diameterMm: data.diameterMm }
      : { widthMm: data.widthMm, depthMm: data.depthMm, diameterMm: null };
  return { name, shape, heightMm, marginMm, nozzleMm, layerHeightMm, ...bed };
}

type Row = Awaited<ReturnType<typeof selectFrom>>[number];

function toEnvelope({ shape, widthMm, depthMm, diameterMm, ...common }: Row): Envelope {
  return shape === 'round'
    ? { ...common, shape, diameterMm: stored(diameterMm) }
    : { ...common, shape, widthMm: stored(widthMm), depthMm: stored(depthMm) };
}

/** The columns of the row's own shape are always filled; anything else is a broken row. */
function stored(lengthMm: number | null): number {
  if (lengthMm === null) throw new Error('An envelope lacks a length of its shape');
  return lengthMm;
}
