import { parseWaveformDocument } from '@/lib/document/parse';
import type { WaveformDocument } from '@/lib/synth';

/** A drawing that the server may not have yet, kept on this device. */
export interface LocalCopy {
  waveformId: string;
  /** The revision it was drawn on. */
  parentId: string;
  atMs: number;
  document: WaveformDocument;
}

export type FoundCopy =
  | { kind: 'copy'; copy: LocalCopy }
  /** It could not be read and was set aside; the text is what is left of it. */
  | { kind: 'damaged'; atMs: number; text: string };

interface StoredCopy {
  waveformId: string;
  parentId: string;
  atMs: number;
  text: string;
}

const DATABASE = 'combwright';
const STORE = 'copies';

function openCopies(): Promise<IDBDatabase> {
  return new Promise((resolve, reject) => {
    const request = indexedDB.open(DATABASE, 1);
    request.onupgradeneeded = () => request.result.createObjectStore(STORE);
    request.onsuccess = () => resolve(request.result);
    request.onerror = () => reject(request.error ?? new Error('no local store'));
    request.onblocked = () => reject(new Error('the local store is blocked'));
  });
}

async function inStore<T>(mode: IDBTransactionMode, act: (store: IDBObjectStore) => IDBRequest<T>): Promise<T> {
  const database = await openCopies();
  try {
    return await new Promise<T>((resolve, reject) => {
      const transaction = database.transaction(STORE, mode);
      const request = act(transaction.objectStore(STORE));
      // A write is kept when its transaction is complete, not when its request succeeded.
      transaction.oncomplete = () => resolve(request.result);
      transaction.onerror = () => reject(transaction.error ?? new Error('the local store failed'));
      transaction.onabort = () => reject(transaction.error ?? new Error('the local store has no room'));
    });
  } finally {
    database.close();
  }
}

/** One copy a person and waveform: another person at the same device neither sees nor overwrites it. */
const keyOf = (personId: string, waveformId: string) => `${personId}/${waveformId}`;
/** A copy found at return waits here for its person's choice, out of the way of new strokes. */
const foundKeyOf = (personId: string, waveformId: string) => `${keyOf(personId, waveformId)}/found`;
const asideKeyOf = (personId: string, waveformId: string) => `${keyOf(personId, waveformId)}/aside`;

/** Keeps a drawing as it is now. */
export async function keepLocalCopy(personId: string, copy: Omit<LocalCopy, 'atMs'>): Promise<void> {
  const { waveformId, parentId, document } = copy;
  const stored: StoredCopy = { waveformId, parentId, atMs: Date.now(), text: JSON.stringify(document) };
  await inStore('readwrite', (store) => store.put(stored, keyOf(personId, waveformId)));
}

export async function dropLocalCopy(personId: string, waveformId: string): Promise<void> {
  await inStore('readwrite', (store) => store.delete(keyOf(personId, waveformId)));
}

/**
 * Looks for a copy at return, and lets it wait for its person's choice. One that cannot be read is set aside under a key of its
 * own, so that it stands in nobody's way.
 */
export async function findLocalCopy(personId: string, waveformId: string): Promise<FoundCopy | null> {
  const key = keyOf(personId, waveformId);
  const foundKey = foundKeyOf(personId, waveformId);
  const newest = (await inStore('readonly', (store) => store.get(key))) as Partial<StoredCopy> | undefined;
  const stored =
    newest ?? ((await inStore('readonly', (store) => store.get(foundKey))) as Partial<StoredCopy> | undefined);
  if (stored === undefined) return null;
  const text = typeof stored.text === 'string' ? stored.text : JSON.stringify(stored);
  const atMs = typeof stored.atMs === 'number' ? stored.atMs : 0;
  const parsed = parseWaveformDocument(text);
  const isWhole = parsed.ok && typeof stored.parentId === 'string';
  await inStore('readwrite', (store) => store.put(stored, isWhole ? foundKey : asideKeyOf(personId, waveformId)));
  await inStore('readwrite', (store) => store.delete(key));
  if (isWhole) return { kind: 'copy', copy: { waveformId, parentId: stored.parentId!, atMs, document: parsed.value } };
  await inStore('readwrite', (store) => store.delete(foundKey));
  return { kind: 'damaged', atMs, text };
}

/** The person left the found copy, or goes on with it (it is then the newest local copy again). */
export async function settleFoundCopy(personId: string, copy: LocalCopy, isTaken: boolean): Promise<void> {
  if (isTaken) await keepLocalCopy(personId, copy);
  await inStore('readwrite', (store) => store.delete(foundKeyOf(personId, copy.waveformId)));
}
