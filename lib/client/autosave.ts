import type { Problem } from '@/lib/contracts/problem';
import { staleFactsSchema, type Revision, type SaveAnswer, type StaleFacts } from '@/lib/contracts/waveforms';
import type { CallAnswer } from './apiClient';

/** How the newest state of a drawing stands with the server. */
export type SaveState =
  | { kind: 'saved'; atMs: number }
  /** Changed, and quiet for less than the wait; or changed again while a save was under way. */
  | { kind: 'changed' }
  | { kind: 'saving' }
  | { kind: 'offline' }
  /** Somebody saved first: nothing more is sent until the person chooses. */
  | { kind: 'stale'; facts: StaleFacts }
  | { kind: 'refused'; problem: Problem };

export interface AutosaveOptions<Snapshot> {
  /** The whole drawing as it is now; called when it is sent, not at every change. */
  getSnapshot: () => Snapshot;
  send: (
    snapshot: Snapshot,
    parentId: string,
    idempotencyKey: string,
    isLeaving: boolean,
  ) => Promise<CallAnswer<SaveAnswer>>;
  /** The revision that was opened; the parent of the first save. */
  opened: Revision;
  /** Keeps the drawing on this device, before it is sent; and lets it go once the server has all of it. */
  keepLocal?: (snapshot: Snapshot, parentId: string) => Promise<void>;
  dropLocal?: () => Promise<void>;
  onRevision?: (answer: SaveAnswer) => void;
  quietMs?: number;
  retryMs?: number;
  newKey?: () => string;
  nowMs?: () => number;
}

export interface Autosave {
  state(): SaveState;
  /** The newest saved revision: what the drawing descends from. */
  revision(): Revision;
  subscribe(listener: () => void): () => void;
  /** The drawing changed: saved after the next quiet. */
  touch(): void;
  /** Saves what is not saved yet, at once. True when the server has everything. */
  flush(isLeaving?: boolean): Promise<boolean>;
  /** Ends: nothing is sent any more. */
  stop(): void;
}

const QUIET_MS = 2000;
const RETRY_MS = 5000;
const LOCAL_QUIET_MS = 400;

/**
 * Saves a drawing 2 s after its last change. One save at a time; a retry carries the same key, so that a lost answer makes no
 * second revision. After a stale parent it stops for good: the page makes a new one for what the person chooses.
 */
export function createAutosave<Snapshot>(options: AutosaveOptions<Snapshot>): Autosave {
  const { getSnapshot, send, keepLocal, dropLocal, onRevision } = options;
  const quietMs = options.quietMs ?? QUIET_MS;
  const newKey = options.newKey ?? (() => randomKey());
  const nowMs = options.nowMs ?? (() => Date.now());
  const listeners = new Set<() => void>();
  let revision = options.opened;
  let state: SaveState = { kind: 'saved', atMs: revision.savedAtMs };
  let changes = 0;
  let savedChanges = 0;
  let timer: ReturnType<typeof setTimeout> | null = null;
  let localTimer: ReturnType<typeof setTimeout> | null = null;
  let underWay: Promise<boolean> | null = null;
  let isStopped = false;
  /** What was sent and not answered: a retry sends the same again. */
  let unanswered: { key: string; changes: number; snapshot: Snapshot } | null = null;

  function show(next: SaveState): void {
    state = next;
    for (const listener of listeners) listener();
  }

  function schedule(ms: number): void {
    if (timer !== null) clearTimeout(timer);
    timer = setTimeout(() => {
      timer = null;
      void save(false);
    }, ms);
  }

  function keep(): Promise<void> {
    if (localTimer !== null) clearTimeout(localTimer);
    localTimer = null;
    // A device without room keeps nothing; the server is asked all the same.
    return keepLocal ? keepLocal(getSnapshot(), revision.revisionId).catch(() => undefined) : Promise.resolve();
  }

  async function save(isLeaving: boolean): Promise<boolean> {
    if (underWay) {
      await underWay;
      return state.kind === 'saved' ? true : save(isLeaving);
    }
    if (isStopped || state.kind === 'stale') return false;
    if (changes === savedChanges) return true;
    underWay = sendOnce(isLeaving).finally(() => (underWay = null));
    return underWay;
  }

  async function sendOnce(isLeaving: boolean): Promise<boolean> {
    if (timer !== null) clearTimeout(timer);
    timer = null;
    const parentId = revision.revisionId;
    // The same state again keeps its key; anything newer is another act.
    if (!unanswered || unanswered.changes !== changes) unanswered = { key: newKey(), changes, snapshot: getSnapshot() };
    const sent = unanswered;
    show({ kind: 'saving' });
    if (localTimer !== null) void keep();
    const answer = await send(sent.snapshot, parentId, sent.key, isLeaving);
    if (isStopped) return answer.ok;
    if (answer.ok) {
      unanswered = null;
      revision = answer.value.revision;
      savedChanges = sent.changes;
      onRevision?.(answer.value);
      if (changes === savedChanges) {
        if (localTimer !== null) clearTimeout(localTimer);
        localTimer = null;
        await dropLocal?.().catch(() => undefined);
        show({ kind: 'saved', atMs: nowMs() });
        return true;
      }
      show({ kind: 'changed' });
      void keep();
      schedule(quietMs);
      return false;
    }
    return notSaved(answer.problem);
  }

  function notSaved(problem: Problem | null): boolean {
    if (problem?.code === 'stale_revision') {
      unanswered = null;
      const facts = staleFactsSchema.safeParse(problem.facts);
      show(facts.success ? { kind: 'stale', facts: facts.data } : { kind: 'refused', problem });
      return false;
    }
    const isPassing =
      problem === null || problem.status >= 500 || problem.code === 'sign_in_needed' || problem.code === 'too_many';
    if (isPassing) {
      show({ kind: 'offline' });
      schedule(options.retryMs ?? RETRY_MS);
    } else {
      unanswered = null;
      show({ kind: 'refused', problem });
    }
    return false;
  }

  return {
    state: () => state,
    revision: () => revision,
    subscribe(listener) {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
    touch() {
      changes++;
      if (isStopped) return;
      if (keepLocal && localTimer === null) localTimer = setTimeout(() => void keep(), LOCAL_QUIET_MS);
      if (state.kind === 'stale') return;
      if (state.kind !== 'saving' && state.kind !== 'offline') show({ kind: 'changed' });
      if (!underWay) schedule(state.kind === 'offline' ? Math.max(quietMs, options.retryMs ?? RETRY_MS) : quietMs);
    },
    flush: (isLeaving = false) => save(isLeaving),
    stop() {
      isStopped = true;
      if (timer !== null) clearTimeout(timer);
      if (localTimer !== null) {
        clearTimeout(localTimer);
        if (changes !== savedChanges) void keep();
      }
    },
  };
}

/** 128 random bits in hexadecimal; getRandomValues is there on plain http too, randomUUID is not. */
function randomKey(): string {
  return [...crypto.getRandomValues(new Uint8Array(16))].map((byte) => byte.toString(16).padStart(2, '0')).join('');
}
