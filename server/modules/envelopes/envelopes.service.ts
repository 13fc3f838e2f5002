import type { CreateId } from '../../platform/ids/create-id.js';
import { createEnvelopeNotFound } from './envelopes.errors.js';
import type { Envelope, EnvelopeData } from './envelopes.model.js';
import type { EnvelopesRepository } from './envelopes.repository.js';

export type EnvelopesService = ReturnType<typeof createEnvelopesService>;

interface Key {
  readonly id: string;
  readonly workshopId: string;
}

export function createEnvelopesService(deps: {
  envelopes: EnvelopesRepository;
  clock: () => Date;
  createId: CreateId;
}) {
  const { envelopes, clock, createId } = deps;

  async function get(key: Key): Promise<Envelope> {
    const envelope = await envelopes.find(key);
    if (!envelope) throw createEnvelopeNotFound();
    return envelope;
  }

  return {
    list: (workshopId: string) => envelopes.list(workshopId),
    get,

    async create(workshopId: string, data: EnvelopeData): Promise<Envelope> {
      const key = { id: createId(), workshopId };
      await envelopes.add(key, data, clock());
      return get(key);
    },

    /** Plans that were made keep the envelope as it was. */
    async replace(key: Key, data: EnvelopeData): Promise<Envelope> {
      if (!(await envelopes.replace(key, data, clock()))) throw createEnvelopeNotFound();
      return get(key);
    },

    async remove(key: Key): Promise<void> {
      if (!(await envelopes.remove(key))) throw createEnvelopeNotFound();
    },
  };
}
