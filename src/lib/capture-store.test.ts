import 'fake-indexeddb/auto';
import { IDBFactory } from 'fake-indexeddb';
import { beforeEach, describe, expect, it } from 'vitest';
import { CaptureStore, explainStore, type NewRecord } from './capture-store';

const record = (ref: string, some: Partial<NewRecord> = {}): NewRecord => ({
  ref,
  person: 'ada',
  site: 'site',
  string: 'string',
  kind: 'reading',
  madeAt: '2026-12-01T10:00:00.000Z',
  label: ref,
  body: { ref, supersedes: null },
  ...some,
});
beforeEach(() => {
  globalThis.indexedDB = new IDBFactory();
});

describe('what the phone keeps', () => {
  it('stands after the page is loaded again, in the order in which it was made, photos with it', async () => {
    const first = await CaptureStore.open();
    const bytes = new TextEncoder().encode('a picture').buffer;
    await first.add([record('one'), record('two')]);
    await first.add(
      [record('three', { kind: 'photo' })],
      new Map([['three', { ref: 'three', type: 'image/jpeg', bytes }]]),
    );
    first.close();
    const again = await CaptureStore.open();
    const all = await again.all();
    expect(all.map((r) => [r.ref, r.state])).toEqual([
      ['one', 'waiting'],
      ['two', 'waiting'],
      ['three', 'waiting'],
    ]);
    expect(all[0]!.number).toBeLessThan(all[1]!.number);
    expect(new TextDecoder().decode((await again.photo('three'))!.bytes)).toBe('a picture');
    await again.change([{ ...all[0]!, state: 'refused' }], ['three']);
    expect((await again.all()).map((r) => [r.ref, r.state])).toEqual([
      ['one', 'refused'],
      ['two', 'waiting'],
    ]);
    expect(await again.photo('three')).toBeNull();
    again.close();
  });

  it('is all of several records or none', async () => {
    const store = await CaptureStore.open();
    await store.add([record('one')]);
    await expect(store.add([record('two'), record('one')])).rejects.toThrow('could not keep');
    expect((await store.all()).map((r) => r.ref)).toEqual(['one']);
    store.close();
  });

  it('does not come back when another page has sent it meanwhile', async () => {
    const store = await CaptureStore.open();
    const [one] = await store.add([record('one')]);
    await store.change([], ['one']);
    await store.change([{ ...one!, tries: 3 }]);
    expect(await store.all()).toEqual([]);
    store.close();
  });

  it('of a site goes when its person signs out; what waits stays, and so do other people’s sites', async () => {
    const store = await CaptureStore.open();
    await store.setHere({ person: 'ada', name: 'Ada Moor' });
    await store.keepSnapshot('ada', 'site', { name: 'Weirside' });
    await store.keepSnapshot('bo', 'site', { name: 'Weirside, as Bo saw it' });
    await store.add([record('one')]);
    await store.signOut();
    expect(await store.here()).toBeNull();
    expect(await store.snapshot('ada', 'site')).toBeNull();
    expect(await store.snapshots('bo')).toEqual([{ name: 'Weirside, as Bo saw it' }]);
    expect((await store.all()).map((r) => r.ref)).toEqual(['one']);
    store.close();
  });
});

it('says in words why a browser keeps nothing', () => {
  const reason = (name: string) => explainStore(new DOMException('x', name));
  expect(reason('QuotaExceededError')).toMatchObject({ reason: 'full' });
  expect(reason('QuotaExceededError').message).toContain('no room left');
  expect(reason('InvalidStateError')).toMatchObject({ reason: 'not_allowed' });
  expect(reason('VersionError').message).toContain('Load this page again');
  expect(reason('DataError')).toMatchObject({ reason: 'failed' });
});
