import { sha256 } from '@noble/hashes/sha2.js';
import { bytesToHex } from '@noble/hashes/utils.js';
import { createStore, type StoreApi } from 'zustand/vanilla';
import { problemSchema } from '@/lib/contracts/problem';
import { problemWords } from './problemWords';

export type DownloadState =
  | { kind: 'idle' }
  | { kind: 'running'; doneRatio: number }
  /** The line broke: what came so far is kept, and it goes on from there. */
  | { kind: 'stopped'; doneRatio: number }
  /** The server says why not: withdrawn, signed out, gone. */
  | { kind: 'refused'; words: string }
  /** All of it came, and it is not the file that was proven. */
  | { kind: 'different' }
  | { kind: 'done' };

export interface FileDownload {
  readonly state: StoreApi<DownloadState>;
  /** From the beginning, or on from where it stopped. */
  start(): Promise<void>;
  cancel(): void;
}

export interface WantedFile {
  address: string;
  bytes: number;
  /** Hexadecimal SHA-256 of the whole. */
  sha256: string;
  /** Hands the finished file to the person. */
  save: (file: Blob) => void;
}

/** Pieces of this size become blobs, which browsers keep on disk. */
const PIECE_BYTES = 8 << 20;

/** Fetches a file so that a broken line is seen, gone on from and the whole compared with its digest before it is handed out. */
export function createFileDownload(wanted: WantedFile): FileDownload {
  const state = createStore<DownloadState>()(() => ({ kind: 'idle' }));
  let pieces: Blob[] = [];
  let piece: Uint8Array<ArrayBuffer>[] = [];
  let pieceBytes = 0;
  let received = 0;
  let hash = sha256.create();
  let etag: string | null = null;
  let stop: AbortController | null = null;

  function forget(): void {
    pieces = [];
    piece = [];
    pieceBytes = 0;
    received = 0;
    hash = sha256.create();
    etag = null;
  }

  function closePiece(): void {
    if (pieceBytes === 0) return;
    pieces.push(new Blob(piece));
    piece = [];
    pieceBytes = 0;
  }

  function keep(bytes: Uint8Array<ArrayBuffer>): void {
    hash.update(bytes);
    piece.push(bytes);
    pieceBytes += bytes.length;
    received += bytes.length;
    if (pieceBytes >= PIECE_BYTES) closePiece();
    state.setState({ kind: 'running', doneRatio: received / wanted.bytes }, true);
  }

  async function refusalOf(response: Response): Promise<string> {
    const problem = problemSchema.safeParse(await response.json().catch(() => null));
    return problem.success ? problemWords(problem.data) : `The server answered ${response.status}.`;
  }

  /** What is left of the file; false where the server refused it. */
  async function receive(signal: AbortSignal): Promise<boolean> {
    const headers: Record<string, string> = {};
    if (received > 0) {
      headers.Range = `bytes=${received}-`;
      if (etag) headers['If-Range'] = etag;
    }
    const response = await fetch(wanted.address, { headers, credentials: 'same-origin', cache: 'no-store', signal });
    if (!response.ok || !response.body) {
      state.setState({ kind: 'refused', words: await refusalOf(response) }, true);
      forget();
      return false;
    }
    if (response.status !== 206) forget(); // the file is another one now, or the server knows no ranges
    etag = response.headers.get('ETag');
    const reader = response.body.getReader();
    for (;;) {
      const { value, done } = await reader.read();
      if (done) return true;
      keep(value as Uint8Array<ArrayBuffer>);
    }
  }

  function finish(): void {
    if (received < wanted.bytes) return state.setState({ kind: 'stopped', doneRatio: received / wanted.bytes }, true);
    const isSame = received === wanted.bytes && bytesToHex(hash.digest()) === wanted.sha256;
    closePiece();
    if (isSame) wanted.save(new Blob(pieces, { type: 'application/zip' }));
    state.setState({ kind: isSame ? 'done' : 'different' }, true);
    forget();
  }

  return {
    state,
    async start() {
      if (stop) return;
      const mine = new AbortController();
      stop = mine;
      state.setState({ kind: 'running', doneRatio: received / wanted.bytes }, true);
      try {
        if (await receive(mine.signal)) finish();
      } catch {
        if (mine.signal.aborted) {
          forget();
          state.setState({ kind: 'idle' }, true);
        } else state.setState({ kind: 'stopped', doneRatio: received / wanted.bytes }, true);
      } finally {
        stop = null;
      }
    },
    cancel() {
      if (stop) return stop.abort();
      forget();
      state.setState({ kind: 'idle' }, true);
    },
  };
}
