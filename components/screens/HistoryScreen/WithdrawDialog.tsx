import { useState } from 'react';
import { View } from 'react-native';
import { Dialog } from '@/components/ui/overlay';
import { Text } from '@/components/ui/Text';
import { TextField } from '@/components/ui/TextField';
import { useAct } from '@/lib/client/useApi';
import { listPacks, showPack } from '@/lib/contracts/packs';
import { withdrawEdition, type Edition } from '@/lib/contracts/reviews';
import { listRevisions, listWaveforms, showRevision, showWaveform } from '@/lib/contracts/waveforms';

/** For ever, with a reason that every operator reads. */
export function WithdrawDialog({ edition, onClose }: { edition: Edition; onClose: () => void }) {
  const [reason, setReason] = useState('');
  const act = useAct(
    withdrawEdition,
    [showWaveform, showRevision, listRevisions, listWaveforms, listPacks, showPack],
    onClose,
  );
  return (
    <Dialog
      question="Why should nobody use it?"
      onClose={onClose}
      safe={{ label: 'Keep it', onPress: onClose }}
      act={{
        label: `Withdraw edition ${edition.number}`,
        grave: true,
        busy: act.isPending,
        disabledBecause: reason.trim() === '' ? 'Say why.' : null,
        onPress: () =>
          act.mutate({ params: { waveformId: edition.waveformId, editionNumber: edition.number }, body: { reason } }),
      }}
    >
      <View>
        <Text>{`Edition ${edition.number} of ${edition.title} and its packs can then not be downloaded any more. This cannot be undone; its number is never used again.`}</Text>
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
