import { Dialog } from '@/components/ui/overlay';
import { Text } from '@/components/ui/Text';
import { showToast } from '@/components/ui/toast';
import { View } from 'react-native';
import { useAct } from '@/lib/client/useApi';
import { releaseRevision, showReview, type OpenReview } from '@/lib/contracts/reviews';
import { listRevisions, listWaveforms, showRevision, showWaveform } from '@/lib/contracts/waveforms';

export function ReleaseDialog({
  waveformId,
  review,
  onClose,
  onDone,
}: {
  waveformId: string;
  review: OpenReview;
  onClose: () => void;
  onDone: () => void;
}) {
  const act = useAct(
    releaseRevision,
    [showWaveform, showReview, showRevision, listRevisions, listWaveforms],
    (edition) => {
      showToast(`Edition ${edition.number} is released`);
      onDone();
    },
  );
  return (
    <Dialog
      question={`Release as edition ${review.nextEditionNumber}?`}
      onClose={onClose}
      safe={{ label: 'Not yet', onPress: onClose }}
      act={{
        label: 'Release',
        busy: act.isPending,
        onPress: () => act.mutate({ params: { waveformId }, body: { revisionId: review.revisionId } }),
      }}
    >
      <View>
        <Text>It can never change, only be withdrawn.</Text>
        {act.error ? (
          <Text tone="danger" role="alert">
            {act.error.message}
          </Text>
        ) : null}
      </View>
    </Dialog>
  );
}
