import { useState } from 'react';
import { View } from 'react-native';
import { Dialog } from '@/components/ui/overlay';
import { Text } from '@/components/ui/Text';
import { TextField } from '@/components/ui/TextField';
import { useAct } from '@/lib/client/useApi';
import { showReview, takeBackReview } from '@/lib/contracts/reviews';
import { listRevisions, listWaveforms, showRevision, showWaveform } from '@/lib/contracts/waveforms';

/** Takes an open request back: the revision is a draft again. */
export function TakeBackDialog({
  waveformId,
  revisionId,
  onClose,
}: {
  waveformId: string;
  revisionId: string;
  onClose: () => void;
}) {
  const [reason, setReason] = useState('');
  const act = useAct(takeBackReview, [showWaveform, showReview, showRevision, listRevisions, listWaveforms], onClose);
  return (
    <Dialog
      question="Take the request back?"
      onClose={onClose}
      safe={{ label: 'Leave it in review', onPress: onClose }}
      act={{
        label: 'Take it back',
        busy: act.isPending,
        disabledBecause: reason.trim() === '' ? 'Say why.' : null,
        onPress: () => act.mutate({ params: { waveformId }, body: { revisionId, reason } }),
      }}
    >
      <View>
        <Text>The revision is a draft again; the reason stays with it.</Text>
        <TextField
          label="Reason"
          value={reason}
          onChangeText={setReason}
          multiline
          maxLength={2000}
          error={act.error?.message ?? null}
        />
      </View>
    </Dialog>
  );
}
