import { useRouter } from 'expo-router';
import { useCallback, useEffect, useRef, useState } from 'react';
import { StyleSheet, View } from 'react-native';
import type { FrameProbe, TableCanvasHandle } from '@/components/canvas/CanvasGate';
import { Dialog } from '@/components/ui/overlay';
import { setPreferences, usePreferences } from '@/components/ui/preferences';
import { Stamp } from '@/components/ui/Stamp';
import { Button } from '@/components/ui/Button';
import { showToast } from '@/components/ui/toast';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import { dropLocalCopy, type FoundCopy } from '@/lib/client/localCopies';
import { useMe } from '@/lib/client/useSession';
import { editorCommands } from '@/lib/editor/commands/all';
import { performOutcome, type Outcome, type Question } from '@/lib/editor/commands/outcome';
import { lowestOf, storedDocument } from '@/lib/editor/document';
import { createEditor, type Editor } from '@/lib/editor/store';
import { formatInteger } from '@/lib/drawing/quantities';
import { Page } from '../Page';
import { CellRuns } from './CellRuns';
import { handOverDrawing, type DrawingStore, type OpenedDrawing } from './drawingStore';
import { downloadText } from './downloadText';
import { NumbersStrip } from './NumbersStrip';
import { PhoneTable } from './PhoneTable';
import { SheetLine } from './SheetLine';
import type { OpenSheet } from './sheets';
import { SpokenCursor } from './SpokenCursor';
import { TableNotices } from './TableNotices';
import { TableSheets } from './TableSheets';
import type { TableCanvas } from './tableCanvas';
import type { TableContext, TableRights } from './tableContext';
import type { ViewPage } from './tableLayout';
import { attachTestHook, isTestRun } from './testHook';
import { Trough } from './Trough';
import { useSaveState, useSaving } from './useSaving';
import { focusNextPart, useTableKeys } from './useTableKeys';
import { useTableLive } from './useTableLive';
import { useSettings, useTitle } from './useEditorState';
import { useViewportOfDocument } from './useViewport';
import { WideTable } from './WideTable';

export interface DrawTableProps {
  opened: OpenedDrawing;
  store: DrawingStore;
  mayDraw: boolean;
  /** Opens the waveform's newest revision in place of this one. */
  onReopen: () => void;
  /** What was found on this device at return. */
  found: FoundCopy | null;
  onFound: (isTaken: boolean) => void;
}

/** The drawing table of one opened revision: the editor lives as long as this is mounted. */
export function DrawTable({ opened, store, mayDraw, onReopen, found, onFound }: DrawTableProps) {
  const router = useRouter();
  const me = useMe();
  const isPhone = useBreakpoint() !== 'wide';
  const [editor] = useState(() => createEditor(opened.document));
  const { client, reader, setLayout } = useTableLive(editor);
  const saver = useSaving(editor, store, opened, me.personId);
  const saveState = useSaveState(saver);
  const [sheet, setSheet] = useState<OpenSheet | null>(null);
  const [question, setQuestion] = useState<Question | null>(null);
  const [page, setPage] = useState<ViewPage>('time');
  const [drawsOn, setDrawsOn] = useState(opened.drawsOn);
  const [isCanvasMissing, setCanvasMissing] = useState(false);
  const [isCopying, setCopying] = useState(false);
  const { oneFingerMoves } = usePreferences();
  const canvasHandle = useRef<TableCanvasHandle | null>(null);
  const title = useTitle(editor);
  const [probe] = useState<FrameProbe | null>(() =>
    isTestRun() ? { frames: 0, scriptMs: [], shownChangeCount: -1, shownLiveChangeCount: -1 } : null,
  );
  useViewportOfDocument(editor, isPhone);
  useEffect(() => attachTestHook(editor, client, saver, probe), [editor, client, saver, probe]);

  const { revision } = opened;
  const isOlder = opened.newestNumber !== null;
  const isFixed = revision.stamp.state !== 'draft' && !drawsOn;
  const rights: TableRights = {
    canDraw: mayDraw && !isFixed && !isOlder,
    canAsk: mayDraw && revision.stamp.state === 'draft' && opened.openReview === null && !isOlder,
    because: isOlder ? 'older' : !mayDraw ? 'role' : isFixed ? 'state' : null,
  };
  const openNewest = () => router.replace(`/waveforms/${revision.waveformId}` as never);

  const { canDraw, because } = rights;
  const perform = useCallback(
    (outcome: Outcome): string | null => {
      // The forms stay open to look at: what they would change is refused in one place.
      if (!canDraw && (outcome?.kind === 'patch' || outcome?.kind === 'question')) return LOOK_ONLY[because ?? 'role'];
      const done = performOutcome(editor, outcome);
      if (done?.kind === 'question') setQuestion(done.question);
      return done?.kind === 'refused' ? done.message : null;
    },
    [editor, canDraw, because],
  );

  const runCommand = useCallback(
    (id: string): boolean => {
      if (!canDraw && /^(paint|history|peak)\./.test(id)) return false;
      const command = editorCommands.find(id);
      if (!command.isEnabled(editor)) return false;
      const outcome = editorCommands.run(editor, id);
      if (outcome?.kind === 'question') setQuestion(outcome.question);
      if (outcome?.kind === 'cancelGesture') canvasHandle.current?.cancelStroke();
      if (outcome?.kind === 'screen') {
        if (outcome.act === 'nextRegion') focusNextPart();
        else if (outcome.act === 'listKeys') setSheet({ kind: 'keys' });
        else if (outcome.act === 'lowerPeak') setSheet({ kind: 'peak' });
        else if (isPhone) setSheet({ kind: 'sentence' });
        else document.querySelector<HTMLElement>('#sentence input')?.focus();
      }
      return true;
    },
    [editor, canDraw, isPhone],
  );
  useTableKeys(runCommand, question === null);

  const run = useCallback(
    (id: string) => {
      if (id === 'ask') setSheet({ kind: 'ask' });
      else runCommand(id);
    },
    [runCommand],
  );

  const table: TableContext = {
    editor,
    live: reader,
    peak: client.peak,
    saver: mayDraw ? saver : null,
    saveState,
    drawing: {
      waveformId: revision.waveformId,
      revision: saver.revision(),
      stampState: drawsOn ? 'draft' : revision.stamp.state,
      editionNumber: drawsOn ? null : opened.editionNumber,
    },
    rights,
    fitHref: `/waveforms/${revision.waveformId}/fit` as TableContext['fitHref'],
    sheet,
    open: setSheet,
    run,
    perform,
    setLayout,
    page,
    setPage,
  };

  const keepMine = async () => {
    setCopying(true);
    const mine = storedDocument(editor.document);
    const answer = await store.saveAsCopy(
      { ...mine, about: { ...mine.about, title: copyTitle(mine.about.title) } },
      revision.revisionId,
    );
    setCopying(false);
    if (!answer.ok) {
      showToast(answer.problem?.detail ?? 'No connection. Your drawing is still here.');
      return;
    }
    saver.stop();
    await dropLocalCopy(me.personId, revision.waveformId).catch(() => undefined);
    router.replace(`/waveforms/${answer.value.waveformId}` as never);
  };

  const canvas: TableCanvas = {
    readOnly: !rights.canDraw,
    oneFingerMoves: oneFingerMoves || (isPhone && !rights.canDraw),
    preview: null,
    label: useGridLabel(editor),
    handle: useCallback((handle: TableCanvasHandle | null) => void (canvasHandle.current = handle), []),
    probe,
    onMissing: useCallback(() => setCanvasMissing(true), []),
  };
  const fallback = <CellRuns table={table} />;
  const body = isPhone ? (
    <PhoneTable table={table} canvas={canvas} fallback={fallback} />
  ) : (
    <>
      <SheetLine table={table} />
      <NumbersStrip table={table} />
      <WideTable table={table} canvas={canvas} fallback={fallback} />
      {rights.canDraw ? <Trough table={table} /> : null}
    </>
  );
  return (
    <Page
      title={isPhone ? title : `${title}, ${STATE_WORDS[table.drawing.stampState]}`}
      backTo="/waveforms"
      fixed
      bare
      foot={<View />}
      headAside={
        <View style={styles.aside}>
          <View>
            <Stamp state={table.drawing.stampState} edition={table.drawing.editionNumber} />
          </View>
          <Button kind="plain" onPress={() => setSheet({ kind: 'more' })}>
            More
          </Button>
        </View>
      }
    >
      <View style={styles.fill} {...({ dataSet: { canvas: isCanvasMissing ? 'missing' : 'here' } } as object)}>
        <TableNotices
          table={table}
          acts={{
            openTheirs: () => {
              saver.stop();
              void dropLocalCopy(me.personId, revision.waveformId).catch(() => undefined);
              onReopen();
            },
            keepMine: () => void keepMine(),
            drawOn: () => setDrawsOn(true),
            older: isOlder
              ? {
                  words: `This is revision ${revision.number}${revision.isSide ? ', kept beside' : ''}. Revision ${opened.newestNumber} is the newest.`,
                  openNewest,
                  drawOnFromHere: mayDraw
                    ? () => {
                        handOverDrawing(revision.waveformId, opened.document);
                        openNewest();
                      }
                    : null,
                }
              : null,
            copy: found,
            takeCopy: () => onFound(true),
            leaveCopy: () => onFound(false),
            downloadCopy: () => found?.kind === 'damaged' && downloadText('set-aside-copy.json', found.text),
            isBusy: isCopying,
          }}
        />
        {body}
      </View>
      <SpokenCursor editor={editor} />
      <TableSheets
        table={table}
        store={store}
        isPhone={isPhone}
        oneFinger={{ moves: oneFingerMoves, set: (moves) => setPreferences({ oneFingerMoves: moves }) }}
        onAsked={onReopen}
      />
      {question ? (
        <Dialog
          question={question.text}
          safe={{ label: question.keepLabel, onPress: () => setQuestion(null) }}
          act={{
            label: question.doLabel,
            onPress: () => {
              editor.apply(question.patch);
              setQuestion(null);
              setSheet(null);
            },
          }}
          onClose={() => setQuestion(null)}
        />
      ) : null}
    </Page>
  );
}

const LOOK_ONLY = {
  role: 'You can look. Drawing needs the author role.',
  state: 'This revision cannot change. Draw on in a new draft.',
  older: 'This is not the newest revision. Draw on from here first.',
} as const;

const STATE_WORDS = { draft: 'draft', inReview: 'in review', released: 'released', withdrawn: 'withdrawn' } as const;

/** "PA ladder, copy"; a title holds 120 characters. */
function copyTitle(title: string): string {
  return `${title.slice(0, 113)}, copy`;
}

function useGridLabel(editor: Editor): string {
  const { fftSize, symbolCount } = useSettings(editor);
  const lowest = lowestOf(fftSize);
  return `Grid, ${formatInteger(symbolCount)} symbols by ${formatInteger(fftSize)} subcarriers, ${formatInteger(lowest)} to ${formatInteger(lowest + fftSize - 1)}. Arrows move the cursor cell, Space paints, question mark lists the keys.`;
}

const styles = StyleSheet.create({
  fill: { flex: 1, minHeight: 0 },
  aside: { flexDirection: 'row', alignItems: 'center', gap: 4 },
});
