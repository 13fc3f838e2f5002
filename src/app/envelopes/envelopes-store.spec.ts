import { TestBed } from '@angular/core/testing';
import { ApiFailure } from '../core/http/api-failure';
import { EnvelopesApi } from './envelopes-api';
import { EnvelopesStore } from './envelopes-store';
import { makeRectangular, makeRound } from './testing/envelope-fixtures';

const bench = makeRectangular({ id: 'b'.repeat(20), name: 'Bench' });
const tall = makeRound({ id: 't'.repeat(20), name: 'Attic' });

function setUp(api: Partial<EnvelopesApi>) {
  TestBed.configureTestingModule({
    providers: [EnvelopesStore, { provide: EnvelopesApi, useValue: api }],
  });
  const store = TestBed.inject(EnvelopesStore);
  return { store, names: () => store.envelopes()?.map((envelope) => envelope.name) };
}

const list = () => Promise.resolve([bench, tall]);

describe('EnvelopesStore', () => {
  it('lists by name', async () => {
    const { store, names } = setUp({ list });
    expect(store.isEmpty()).toBe(false);
    await store.load();
    expect(names()).toEqual(['Attic', 'Bench']);
  });

  it('keeps what the server answered to a change', async () => {
    const replace = () => Promise.resolve({ ...bench, name: 'Annex' });
    const { store, names } = setUp({ list, replace });
    await store.load();
    await store.replace(bench.id, bench);
    expect(names()).toEqual(['Annex', 'Attic']);
  });

  it('changes nothing when the server refuses', async () => {
    const refusal = new ApiFailure('session.forbidden', 'Not for your role.', 403);
    const refuse = () => Promise.reject(refusal);
    const { store, names } = setUp({ list, remove: refuse, create: refuse });
    await store.load();
    await expect(store.remove(bench.id)).rejects.toBe(refusal);
    await expect(store.create(bench)).rejects.toBe(refusal);
    expect(names()).toEqual(['Attic', 'Bench']);
  });

  it('takes a removed one off the list', async () => {
    const { store, names } = setUp({ list, remove: () => Promise.resolve() });
    await store.load();
    await store.remove(bench.id);
    expect(names()).toEqual(['Attic']);
  });

  it('puts a failed look into words and can look again', async () => {
    const away = new ApiFailure('network.unreachable', 'The server cannot be reached.', 0);
    const answers = [Promise.reject(away), list()];
    const { store, names } = setUp({ list: () => answers.shift() as ReturnType<typeof list> });
    await store.load();
    expect(store.problem()).toBe('The server cannot be reached.');
    await store.load();
    expect(store.problem()).toBe('');
    expect(names()).toHaveLength(2);
  });
});
