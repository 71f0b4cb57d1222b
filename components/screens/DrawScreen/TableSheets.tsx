import type { DrawingStore } from './drawingStore';
import { InkSheet } from './forms/InkSheet';
import { NumberSheet } from './forms/NumberSheet';
import { PayloadSheet } from './forms/PayloadSheet';
import { DeviceSheet, LevelSheet, MarkersSheet, TitleSheet } from './forms/SettingsForms';
import { AskSheet, KeysSheet, MoreSheet, SentenceSheet } from './forms/SmallSheets';
import { PeakSheet } from './peak/PeakSheet';
import type { TableContext } from './tableContext';

/** The sheet that stands open, if any. */
export function TableSheets(props: {
  table: TableContext;
  store: DrawingStore;
  isPhone: boolean;
  oneFinger: { moves: boolean; set: (moves: boolean) => void };
  onAsked: () => void;
}) {
  const { table, store, isPhone, oneFinger, onAsked } = props;
  const { sheet } = table;
  switch (sheet?.kind) {
    case undefined:
      return null;
    case 'number':
      return <NumberSheet key={sheet.id} table={table} id={sheet.id} isPhone={isPhone} />;
    case 'ink':
      return <InkSheet key={sheet.place} table={table} place={sheet.place} isPhone={isPhone} />;
    case 'newInk':
      return <InkSheet key="new" table={table} place={null} isPhone={isPhone} />;
    case 'payload':
      return <PayloadSheet table={table} place={sheet.place} />;
    case 'level':
      return <LevelSheet table={table} />;
    case 'markers':
      return <MarkersSheet table={table} />;
    case 'device':
      return <DeviceSheet table={table} />;
    case 'peak':
      return <PeakSheet table={table} />;
    case 'sentence':
      return <SentenceSheet table={table} />;
    case 'keys':
      return <KeysSheet table={table} />;
    case 'ask':
      return <AskSheet table={table} store={store} onAsked={onAsked} />;
    case 'more':
      return <MoreSheet table={table} isPhone={isPhone} oneFinger={oneFinger} />;
    case 'title':
      return <TitleSheet table={table} />;
  }
}
