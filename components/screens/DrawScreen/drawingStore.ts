import { call, type CallAnswer } from '@/lib/client/apiClient';
import { askForReview, takeBackReview, type OpenReview } from '@/lib/contracts/reviews';
import { createWaveform, saveRevision, type Revision, type SaveAnswer, type Waveform } from '@/lib/contracts/waveforms';
import type { WaveformDocument } from '@/lib/synth';

/** What the drawing table needs from outside; the server stands behind it, or a test's own. */
export interface DrawingStore {
  save(document: WaveformDocument, parentId: string, key: string, isLeaving: boolean): Promise<CallAnswer<SaveAnswer>>;
  /** A new waveform of this drawing: what is kept when somebody saved first. */
  saveAsCopy(document: WaveformDocument, sourceRevisionId: string): Promise<CallAnswer<Waveform>>;
  askForReview(revisionId: string, note: string): Promise<CallAnswer<OpenReview>>;
  takeBack(revisionId: string, reason: string): Promise<CallAnswer<unknown>>;
}

/** Browsers let a request of this many bytes outlive its page. */
const KEEPALIVE_CHARACTERS_MOST = 60_000;

export function serverStore(waveformId: string): DrawingStore {
  const params = { waveformId };
  return {
    async save(document, parentId, idempotencyKey, isLeaving) {
      const keepalive = isLeaving && JSON.stringify(document).length < KEEPALIVE_CHARACTERS_MOST;
      return call(saveRevision, { params, query: { parentId }, body: document, idempotencyKey, keepalive });
    },
    saveAsCopy: (document, sourceRevisionId) => call(createWaveform, { query: { sourceRevisionId }, body: document }),
    askForReview: (revisionId, note) => call(askForReview, { params, body: { revisionId, note } }),
    takeBack: (revisionId, reason) => call(takeBackReview, { params, body: { revisionId, reason } }),
  };
}

/** What was opened to draw on. */
export interface OpenedDrawing {
  revision: Revision;
  document: WaveformDocument;
  editionNumber: number | null;
  openReview: OpenReview | null;
  /** A copy from this device, or an older revision to draw on from: the newest revision does not hold it yet. */
  isUnsaved: boolean;
  /** An earlier revision, or one kept beside: it is looked at, and the newest one has this number. */
  newestNumber: number | null;
  /** Drawing goes on although the newest revision is in review or released: a new draft. */
  drawsOn: boolean;
}

let handedOver: { waveformId: string; document: WaveformDocument } | null = null;

/** Takes an older revision's drawing along to the table of the newest one, where it is drawn on. */
export function handOverDrawing(waveformId: string, document: WaveformDocument): void {
  handedOver = { waveformId, document };
}

export function takeHandedOver(waveformId: string): WaveformDocument | null {
  const document = handedOver?.waveformId === waveformId ? handedOver.document : null;
  handedOver = null;
  return document;
}
