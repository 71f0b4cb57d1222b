import { useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { ChoiceField } from '@/components/ui/ChoiceField';
import { FigureRow } from '@/components/ui/Figure';
import { Failing, Loading } from '@/components/ui/states';
import { Text } from '@/components/ui/Text';
import { TextLink } from '@/components/ui/TextLink';
import { useApi } from '@/lib/client/useApi';
import { listBenches } from '@/lib/contracts/benches';
import { showFit } from '@/lib/contracts/fit';
import { verdictWord } from '../FitScreen/FindingCard';

/** The fit of the revision in review, for one bench at a time. */
export function ReviewFit({ waveformId, revisionId }: { waveformId: string; revisionId: string }) {
  const benches = useApi(listBenches, {});
  const [chosen, setChosen] = useState('');
  const benchId = chosen || (benches.data?.items[0]?.benchId ?? '');
  const fit = useApi(
    showFit,
    { params: { revisionId }, query: { benchId } },
    {
      enabled: benchId !== '',
      placeholderData: (before) => before,
      refetchInterval: (query) => (query.state.data?.levels === 'measuring' ? 1000 : false),
    },
  );
  return (
    <View style={styles.part}>
      <Text variant="heading" heading={2} tone="strong">
        Fit
      </Text>
      {benches.data?.items.length === 0 ? <Text tone="quiet">No bench profile yet.</Text> : null}
      {benches.data && benches.data.items.length > 0 ? (
        <ChoiceField
          label="Bench profile"
          value={benchId}
          onChange={setChosen}
          choices={benches.data.items.map((item) => ({
            value: item.benchId,
            label: `${item.name}, version ${item.newest.version}`,
          }))}
        />
      ) : null}
      {benches.isPending || (benchId !== '' && fit.isPending) ? (
        <Loading what="the fit" rows={4} rowHeight={36} />
      ) : null}
      {fit.error && !fit.data ? (
        <Failing what={`The fit did not load. ${fit.error.message}`} onRetry={() => void fit.refetch()} />
      ) : null}
      {fit.data?.findings.map((finding) => (
        <FigureRow
          key={finding.check}
          name={finding.title}
          value={finding.verdict === 'misses' ? finding.byHowMuch : finding.found}
          verdict={verdictWord(finding)}
          verdictTone={finding.verdict === 'meets' ? 'success' : finding.verdict === 'misses' ? 'danger' : 'quiet'}
        />
      ))}
      <TextLink href={{ pathname: '/waveforms/[waveformId]/fit', params: { waveformId, revision: revisionId } }}>
        All findings
      </TextLink>
    </View>
  );
}

const styles = StyleSheet.create({ part: { gap: 8 } });
