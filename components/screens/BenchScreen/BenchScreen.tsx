import { useRouter } from 'expo-router';
import { useEffect, useMemo, useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Failing, Forbidden, Loading, NotThere } from '@/components/ui/states';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { showToast } from '@/components/ui/toast';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import { useAct, useApi } from '@/lib/client/useApi';
import { useMay } from '@/lib/client/useSession';
import { benchWarnings } from '@/lib/contracts/benchWarnings';
import { createBench, listBenches, saveBench, showBench, type Bench } from '@/lib/contracts/benches';
import { showFit } from '@/lib/contracts/fit';
import { parseBenchProfile } from '@/lib/document/parse';
import type { BenchProfile } from '@/lib/synth';
import { Page } from '../Page';
import { when } from '../when';
import { BenchForm } from './BenchForm';
import { BytePicture } from './BytePicture';
import { newBenchContent } from './fields';
import { SidednessNote } from './SidednessNote';

/** A bench profile: the limits and the byte layout of one generator. */
export function BenchScreen({ benchId }: { benchId: string }) {
  const bench = useApi(showBench, { params: { benchId }, query: {} });
  if (bench.data)
    return <BenchEditor key={bench.data.versions[0]?.version} bench={bench.data} start={bench.data.shown.profile} />;
  return (
    <Page title="Bench profile" backTo="/benches">
      {bench.isPending ? <Loading what="the bench profile" rows={5} rowHeight={70} /> : null}
      {bench.error?.problem?.code === 'not_found' ? <NotThere /> : null}
      {bench.error && bench.error.problem?.code !== 'not_found' ? (
        <Failing what={`The profile did not load. ${bench.error.message}`} onRetry={() => void bench.refetch()} />
      ) : null}
    </Page>
  );
}

export function NewBenchScreen() {
  const [start] = useState<BenchProfile>(() => ({
    format: 'combwright.bench',
    version: 1,
    about: { name: '', notes: '' },
    content: newBenchContent,
  }));
  if (!useMay('writeBenches'))
    return (
      <Page title="New bench profile" backTo="/benches">
        <Forbidden />
      </Page>
    );
  return <BenchEditor bench={null} start={start} />;
}

function byPointer(issues: readonly { pointer: string; message: string }[]): Record<string, string> {
  const found: Record<string, string> = {};
  for (const issue of issues) found[issue.pointer] ??= issue.message;
  return found;
}

function BenchEditor({ bench, start }: { bench: Bench | null; start: BenchProfile }) {
  const router = useRouter();
  const wide = useBreakpoint() === 'wide';
  const mayWrite = useMay('writeBenches');
  const [profile, setProfile] = useState(start);
  const [typing, setTyping] = useState<Record<string, string>>({});
  const changed = JSON.stringify(profile) !== JSON.stringify(start);
  const parsed = useMemo(() => parseBenchProfile(profile), [profile]);
  const errors = { ...(parsed.ok ? {} : byPointer(parsed.issues)), ...typing };
  // a new profile's empty name is no mistake before somebody has been there
  const shownErrors: Record<string, string> = { ...errors };
  if (profile.about.name.trim() === '') {
    if (!bench && profile.about.name === start.about.name) delete shownErrors['/about/name'];
    else shownErrors['/about/name'] = 'A bench needs a name.';
  }
  const warnings = parsed.ok ? benchWarnings(profile.content) : [];
  const newest = bench?.versions[0] ?? null;
  const onDone = (saved: Bench) => {
    showToast(`Version ${saved.shown.version} is saved`);
    router.replace({ pathname: '/benches/[benchId]', params: { benchId: saved.benchId } });
  };
  const save = useAct(saveBench, [listBenches, showBench, showFit], onDone);
  const create = useAct(createBench, [listBenches], onDone);
  const failure = save.error ?? create.error;
  const wrong = Object.keys(errors).length;
  const send = () => {
    const idempotencyKey = crypto.getRandomValues(new Uint32Array(4)).join('-');
    if (bench && newest)
      save.mutate({
        params: { benchId: bench.benchId },
        query: { afterVersion: newest.version },
        body: profile,
        idempotencyKey,
      });
    else create.mutate({ body: profile, idempotencyKey });
  };
  useEffect(() => {
    const onKey = (event: KeyboardEvent) => {
      if ((event.ctrlKey || event.metaKey) && event.key.toLowerCase() === 's') {
        event.preventDefault();
        if (mayWrite && changed && wrong === 0) send();
      }
    };
    window.addEventListener('keydown', onKey);
    return () => window.removeEventListener('keydown', onKey);
  });
  const button = mayWrite ? (
    <Button
      kind="filled"
      size={wide ? 'usual' : 'foot'}
      fill={!wide}
      busy={save.isPending || create.isPending}
      disabledBecause={
        !changed && bench
          ? 'Nothing has changed.'
          : wrong > 0
            ? wrong === 1
              ? 'One field is not right yet.'
              : `${wrong} fields are not right yet.`
            : null
      }
      onPress={send}
    >
      {bench && newest ? `Save version ${newest.version + 1}` : 'Save the profile'}
    </Button>
  ) : null;
  return (
    <Page
      title={bench ? bench.name : 'New bench profile'}
      backTo="/benches"
      actions={
        <View style={styles.actions}>
          {changed && bench ? (
            <Button
              kind="plain"
              onPress={() => {
                setProfile(start);
                setTyping({});
              }}
            >
              Discard changes
            </Button>
          ) : null}
          {wide ? button : null}
        </View>
      }
      foot={!wide && button ? <View style={styles.foot}>{button}</View> : undefined}
    >
      {newest ? (
        <Text variant="small" tone="quiet">
          {`Version ${newest.version}, ${when(newest.savedAtMs)}, by ${newest.savedBy.name}. ${
            newest.packCount === 0
              ? 'No pack uses it yet.'
              : newest.packCount === 1
                ? '1 pack uses it and keeps it.'
                : `${newest.packCount} packs use it and keep it.`
          }`}
        </Text>
      ) : null}
      {mayWrite ? null : <Notice>You can look. Changing a bench needs the admin role.</Notice>}
      {failure ? (
        <Notice kind="danger" title="The profile was not saved.">
          {failure.problem?.code === 'stale_revision'
            ? 'Somebody saved a newer version first. Load it again, then change it.'
            : failure.message}
        </Notice>
      ) : null}
      <View style={wide ? styles.columns : styles.stack}>
        <View style={wide ? styles.left : null}>
          <BenchForm
            profile={profile}
            onChange={setProfile}
            errors={shownErrors}
            warnings={warnings}
            readOnly={!mayWrite}
            onTyping={(pointer, message) => {
              const next = { ...typing };
              if (message === null) delete next[pointer];
              else next[pointer] = message;
              setTyping(next);
            }}
          />
        </View>
        <View style={[styles.beside, wide ? styles.right : null]}>
          <BytePicture content={profile.content} />
          {bench && newest ? (
            <SidednessNote benchId={bench.benchId} version={bench.shown.version} profile={start} changed={changed} />
          ) : null}
        </View>
      </View>
    </Page>
  );
}

const styles = StyleSheet.create({
  actions: { flexDirection: 'row', gap: 10 },
  columns: { flexDirection: 'row', alignItems: 'flex-start', gap: 40 },
  stack: { gap: 16 },
  left: { flexGrow: 1, flexShrink: 1, minWidth: 0, maxWidth: 900 },
  beside: { gap: 16 },
  right: { width: 460, flexShrink: 0 },
  foot: {
    padding: 10,
    paddingHorizontal: 12,
    flexDirection: 'row',
    backgroundColor: color.surface.trough,
    borderTopWidth: 1,
    borderTopColor: color.rule.line,
  },
});
