import { useState } from 'react';
import { Button } from '@/components/ui/Button';
import { Sheet } from '@/components/ui/overlay';
import { TextField } from '@/components/ui/TextField';
import { showToast } from '@/components/ui/toast';
import { useAct } from '@/lib/client/useApi';
import { returnRevision, showReview, type OpenReview } from '@/lib/contracts/reviews';
import { listRevisions, listWaveforms, showRevision, showWaveform } from '@/lib/contracts/waveforms';

/** Back to its author as a draft, with what should change. */
export function ReturnSheet({
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
  const [reason, setReason] = useState('');
  const act = useAct(returnRevision, [showWaveform, showReview, showRevision, listRevisions, listWaveforms], () => {
    showToast('Returned with your note');
    onDone();
  });
  return (
    <Sheet
      title="Return with a note"
      onClose={onClose}
      unsaved={reason.trim() !== ''}
      foot={
        <Button
          kind="filled"
          size="foot"
          fill
          busy={act.isPending}
          disabledBecause={reason.trim() === '' ? 'Say what should change.' : null}
          onPress={() => act.mutate({ params: { waveformId }, body: { revisionId: review.revisionId, reason } })}
        >
          Return
        </Button>
      }
    >
      <TextField
        label="Note"
        hint="Say what should change."
        value={reason}
        onChangeText={setReason}
        multiline
        maxLength={2000}
        error={act.error?.message ?? null}
      />
    </Sheet>
  );
}
