import type { Href } from 'expo-router';
import type { StampState } from '@/components/ui/Stamp';
import type { Autosave, SaveState } from '@/lib/client/autosave';
import type { Revision } from '@/lib/contracts/waveforms';
import type { Outcome } from '@/lib/editor/commands/outcome';
import type { LiveClient } from '@/lib/editor/live/client';
import type { Editor } from '@/lib/editor/store';
import type { LiveReader } from './liveReader';
import type { OpenSheet } from './sheets';
import type { ViewPage } from './tableLayout';
import type { TableLayout } from '@/components/canvas/CanvasGate';

/** What a person may do here now. */
export interface TableRights {
  canDraw: boolean;
  canAsk: boolean;
  /** Why nothing can be drawn: said in a notice; null where drawing is possible. */
  because: 'role' | 'state' | 'older' | null;
}

/** The parts of the drawing table share one value: the editor, what stands open, and the acts of the page. */
export interface TableContext {
  editor: Editor;
  live: LiveReader;
  /** Tries a way to a lower peak in the worker of the live views. */
  peak: LiveClient['peak'];
  saver: Autosave | null;
  saveState: SaveState;
  drawing: { waveformId: string; revision: Revision; stampState: StampState; editionNumber: number | null };
  rights: TableRights;
  fitHref: Href;
  sheet: OpenSheet | null;
  open(sheet: OpenSheet | null): void;
  /** A command of the registry, or an act of the page: ask, next region, keys. */
  run(id: string): void;
  /** What a form planned: done, asked about, or refused (the message comes back). */
  perform(outcome: Outcome): string | null;
  /** The views' places changed: the worker is told their widths. */
  setLayout(layout: TableLayout): void;
  page: ViewPage;
  setPage(page: ViewPage): void;
}
