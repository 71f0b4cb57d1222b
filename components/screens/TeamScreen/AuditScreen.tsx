import { useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Empty, Failing, Loading } from '@/components/ui/states';
import { Table, type TableColumn } from '@/components/ui/Table';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import { ask, useApi } from '@/lib/client/useApi';
import { useMay } from '@/lib/client/useSession';
import { listAudit, type AuditAct } from '@/lib/contracts/audit';
import { listPeople } from '@/lib/contracts/people';
import { clockTime, when } from '../when';
import { ChoiceField } from '@/components/ui/ChoiceField';
import { TeamPage } from './TeamPage';

const words = (act: string) => act.replaceAll('.', ', ').replaceAll('_', ' ');

/** Who did what, newest first. */
export function AuditScreen() {
  const phone = useBreakpoint() === 'phone';
  const may = useMay('readAudit');
  const people = useApi(listPeople, {}, { enabled: may });
  const [personId, setPersonId] = useState('');
  const [act, setAct] = useState('');
  const [older, setOlder] = useState<{ key: string; acts: AuditAct[]; nextBefore: number | null } | null>(null);
  const [busy, setBusy] = useState(false);
  const [problem, setProblem] = useState<string | null>(null);
  const query = { ...(personId ? { personId } : {}), ...(act ? { act } : {}) };
  const key = JSON.stringify(query);
  const audit = useApi(listAudit, { query }, { enabled: may, placeholderData: (before) => before });
  const more = older?.key === key ? older : null;
  const acts = [...(audit.data?.acts ?? []), ...(more?.acts ?? [])];
  const nextBefore = more ? more.nextBefore : (audit.data?.nextBefore ?? null);
  const showOlder = async () => {
    if (nextBefore === null) return;
    setBusy(true);
    setProblem(null);
    try {
      const page = await ask(listAudit, { query: { ...query, before: nextBefore } });
      setOlder({ key, acts: [...(more?.acts ?? []), ...page.acts], nextBefore: page.nextBefore });
    } catch (error) {
      setProblem(error instanceof Error ? error.message : String(error));
    }
    setBusy(false);
  };
  return (
    <TeamPage right="readAudit">
      <View style={styles.filters}>
        <ChoiceField
          label="Person"
          value={personId}
          onChange={setPersonId}
          choices={[
            { value: '', label: 'Everybody' },
            ...(people.data?.people ?? []).map((one) => ({ value: one.personId, label: one.name })),
          ]}
        />
        <ChoiceField
          label="Act"
          value={act}
          onChange={setAct}
          choices={[
            { value: '', label: 'Every act' },
            ...(audit.data?.knownActs ?? []).map((one) => ({ value: one, label: words(one) })),
          ]}
        />
      </View>
      {audit.isPending ? <Loading what="the audit" rowHeight={52} /> : null}
      {audit.error && !audit.data ? (
        <Failing what={`The list did not load. ${audit.error.message}`} onRetry={() => void audit.refetch()} />
      ) : null}
      {audit.data && acts.length === 0 ? <Empty>Nothing matches.</Empty> : null}
      {acts.length > 0 ? (
        phone ? (
          <View role="list" aria-label="Acts" style={styles.table}>
            {acts.map((one) => (
              <Row key={one.seq} act={one} />
            ))}
          </View>
        ) : (
          <Table label="Acts" columns={columns} rows={acts} keyOf={(one) => String(one.seq)} rowHeight={44} />
        )
      ) : null}
      {problem ? <Failing what={problem} onRetry={() => void showOlder()} /> : null}
      {nextBefore !== null ? (
        <Button busy={busy} onPress={() => void showOlder()}>
          Show older acts
        </Button>
      ) : null}
    </TeamPage>
  );
}

function timeWords(atMs: number): string {
  const time = when(atMs);
  return time.includes(':') || time.includes('ago') || time === 'just now' ? time : `${time} ${clockTime(atMs)}`;
}

const objectWords = (act: AuditAct) =>
  `${act.objectLabel}${typeof act.detail.reason === 'string' ? `: ${act.detail.reason}` : ''}`;

const columns: TableColumn<AuditAct>[] = [
  {
    key: 'time',
    label: 'Time',
    width: 150,
    cell: (act) => (
      <Text variant="small" tone="quiet">
        {timeWords(act.atMs)}
      </Text>
    ),
  },
  {
    key: 'person',
    label: 'Person',
    width: 160,
    cell: (act) => (
      <Text variant="small" weight={600} numberOfLines={1}>
        {act.person?.name ?? 'the installation'}
      </Text>
    ),
  },
  { key: 'act', label: 'Act', width: 200, cell: (act) => <Text variant="small">{words(act.act)}</Text> },
  {
    key: 'object',
    label: 'Object',
    cell: (act) => (
      <Text variant="small" numberOfLines={2}>
        {objectWords(act)}
      </Text>
    ),
  },
];

function Row({ act }: { act: AuditAct }) {
  return (
    <View role="listitem" style={styles.row}>
      <Text variant="small">
        <Text variant="small" weight={600} tone="strong">
          {act.person?.name ?? 'The installation'}
        </Text>
        {`: ${words(act.act)}`}
      </Text>
      <Text variant="small" numberOfLines={2}>
        {objectWords(act)}
      </Text>
      <Text variant="small" tone="quiet">
        {timeWords(act.atMs)}
      </Text>
    </View>
  );
}

const styles = StyleSheet.create({
  filters: { flexDirection: 'row', flexWrap: 'wrap', gap: 12 },
  table: { borderWidth: 1, borderColor: color.rule.line, backgroundColor: color.surface.sheet },
  row: { paddingHorizontal: 14, paddingVertical: 8, gap: 2, borderBottomWidth: 1, borderBottomColor: color.rule.hair },
});
