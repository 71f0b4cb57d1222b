import { useRouter } from 'expo-router';
import { useMemo, useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { FindField } from '@/components/ui/FindField';
import { Notice } from '@/components/ui/Notice';
import { Forbidden } from '@/components/ui/states';
import { Sheet } from '@/components/ui/overlay';
import { Text } from '@/components/ui/Text';
import { TextField } from '@/components/ui/TextField';
import { color } from '@/components/ui/theme';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import { useConnectionLost } from '@/lib/client/connection';
import { useAct } from '@/lib/client/useApi';
import { useMay } from '@/lib/client/useSession';
import { createWaveform, listWaveforms } from '@/lib/contracts/waveforms';
import { presetGroups } from '@/lib/document/presets/preset';
import { Page } from '../Page';
import { BareGridSentence } from './BareGridSentence';
import { DocumentDrop } from './DocumentDrop';
import { StartList } from './StartList';
import { StartSheet } from './StartSheet';
import { bareGridDefaults, bareGridStart, groupTitles, presetStarts, type BareGridText, type Start } from './starts';

/** Choose a start: a public standard's layout, a bare grid, or a document. */
export function StartScreen() {
  const router = useRouter();
  const size = useBreakpoint();
  const wide = size === 'wide';
  const needsConnection = useConnectionLost() ? 'Needs a connection.' : null;
  const mayMake = useMay('saveWaveforms');
  const [presets] = useState(presetStarts);
  const [chosen, setChosen] = useState<Start>(presets[0]!);
  const [title, setTitle] = useState<string | null>(null);
  const [find, setFind] = useState('');
  const [looking, setLooking] = useState(false);
  const [bare, setBare] = useState<BareGridText>(bareGridDefaults);
  const [bareError, setBareError] = useState<string | null>(null);
  const create = useAct(createWaveform, [listWaveforms], (waveform) =>
    router.replace({ pathname: '/waveforms/[waveformId]', params: { waveformId: waveform.waveformId } }),
  );
  const shown = useMemo(
    () => presets.filter((start) => `${start.title} ${start.source}`.toLowerCase().includes(find.trim().toLowerCase())),
    [presets, find],
  );
  if (!mayMake)
    return (
      <Page title="Start from" backTo="/waveforms">
        <Forbidden />
      </Page>
    );

  const choose = (start: Start) => {
    setChosen(start);
    setLooking(size === 'phone');
    setTitle(null);
    create.reset();
  };
  const chooseBare = () => {
    const start = bareGridStart(bare);
    setBareError(start.ok ? null : start.message);
    if (start.ok) choose(start.value);
  };
  const name = title ?? chosen.document.about.title;
  const use = () =>
    create.mutate({
      query: {},
      body: { ...chosen.document, about: { ...chosen.document.about, title: name.trim() } },
      idempotencyKey: crypto.getRandomValues(new Uint32Array(4)).join('-'),
    });
  const useButton = (
    <Button
      kind="filled"
      size={wide ? 'usual' : 'foot'}
      fill={!wide}
      busy={create.isPending}
      disabledBecause={
        name.trim() === ''
          ? 'A waveform needs a title.'
          : name.trim().length > 120
            ? 'At most 120 characters.'
            : needsConnection
      }
      onPress={use}
    >
      Use this start
    </Button>
  );

  const about = (
    <>
      <View style={wide ? styles.titleRow : null}>
        <TextField
          label="Title of the new waveform"
          value={name}
          onChangeText={setTitle}
          maxLength={130}
          error={
            title !== null && name.trim() === ''
              ? 'A waveform needs a title.'
              : name.trim().length > 120
                ? 'At most 120 characters.'
                : null
          }
          style={styles.grow}
        />
        {wide ? <View style={styles.use}>{useButton}</View> : null}
      </View>
      {create.error ? (
        <Notice kind="danger" title="The waveform was not made.">
          {create.error.problem?.issues?.[0]
            ? `${create.error.problem.issues[0].pointer}: ${create.error.problem.issues[0].message}`
            : create.error.message}
        </Notice>
      ) : null}
      <StartSheet start={chosen} />
    </>
  );
  return (
    <Page
      title="Start from"
      backTo="/waveforms"
      bare
      // on a phone the sheet has the same button while it is open
      foot={wide ? undefined : <View style={styles.foot}>{size === 'phone' && looking ? null : useButton}</View>}
    >
      <View style={wide ? styles.wide : styles.narrow}>
        <View style={wide ? styles.left : null}>
          <View style={styles.head}>
            {size !== 'phone' ? (
              <Text variant="display" heading={1} tone="strong" style={styles.grow}>
                Start from
              </Text>
            ) : null}
            <FindField label="Find a preset" value={find} onChange={setFind} style={wide ? styles.find : styles.grow} />
          </View>
          {presetGroups.map((group) => (
            <StartList
              key={group}
              title={groupTitles[group]}
              starts={shown.filter((start) => start.group === group)}
              chosenId={chosen.startId}
              onChoose={choose}
              onUse={use}
            />
          ))}
          {shown.length === 0 ? (
            <View style={styles.nothing}>
              <Text tone="quiet">{`Nothing matches “${find.trim()}”.`}</Text>
              <Button kind="plain" onPress={() => setFind('')}>
                Clear
              </Button>
            </View>
          ) : null}
          <BareGridSentence
            text={bare}
            onChange={setBare}
            onChoose={chooseBare}
            error={bareError}
            chosen={chosen.startId === 'bare'}
          />
          <DocumentDrop onChoose={choose} chosen={chosen.startId === 'file' ? chosen.source : null} />
        </View>
        {size === 'phone' ? null : <View style={[styles.sheet, wide ? styles.right : null]}>{about}</View>}
      </View>
      {size === 'phone' && looking ? (
        <Sheet title={chosen.title} onClose={() => setLooking(false)} foot={useButton}>
          <View style={styles.about}>{about}</View>
        </Sheet>
      ) : null}
    </Page>
  );
}

const styles = StyleSheet.create({
  wide: { flexDirection: 'row', alignItems: 'flex-start', gap: 40, padding: 24, paddingHorizontal: 40 },
  narrow: { padding: 12, gap: 16 },
  left: { width: 560, flexShrink: 1 },
  head: { flexDirection: 'row', alignItems: 'center', gap: 16, marginBottom: 12 },
  nothing: { flexDirection: 'row', alignItems: 'center', gap: 8, marginBottom: 20 },
  grow: { flexGrow: 1, flexShrink: 1 },
  find: { width: 200 },
  sheet: {
    backgroundColor: color.surface.sheet,
    borderWidth: 1,
    borderColor: color.rule.line,
    padding: 16,
    gap: 8,
    minWidth: 0,
  },
  about: { gap: 8 },
  right: { flexGrow: 1, flexShrink: 1, flexBasis: 600, padding: 24 },
  titleRow: { flexDirection: 'row', alignItems: 'flex-start', gap: 16 },
  use: { paddingTop: 22 },
  foot: {
    minHeight: 68,
    padding: 10,
    flexDirection: 'row',
    backgroundColor: color.surface.trough,
    borderTopWidth: 1,
    borderTopColor: color.rule.line,
  },
});
