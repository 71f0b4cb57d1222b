import { useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Notice } from '@/components/ui/Notice';
import { Sheet } from '@/components/ui/overlay';
import { Text } from '@/components/ui/Text';
import { TextField } from '@/components/ui/TextField';
import { showToast } from '@/components/ui/toast';
import { useAct } from '@/lib/client/useApi';
import { askForReview, showReview } from '@/lib/contracts/reviews';
import { listRevisions, listWaveforms, showRevision, showWaveform, type Revision } from '@/lib/contracts/waveforms';

/** Asks all reviewers for a review of the head, with a note. */
export function AskSheet({
  waveformId,
  head,
  onClose,
  onAsked,
}: {
  waveformId: string;
  head: Pick<Revision, 'revisionId' | 'number' | 'title'>;
  onClose: () => void;
  onAsked?: () => void;
}) {
  const [note, setNote] = useState('');
  const act = useAct(askForReview, [showWaveform, showRevision, showReview, listRevisions, listWaveforms], (review) => {
    showToast(
      review.releasableBy.people.length > 0
        ? `Asked ${review.releasableBy.people.map((one) => one.name).join(', ')}`
        : 'Asked for a review',
    );
    onAsked?.();
    if (!review.releasableBy.words) onClose();
  });
  return (
    <Sheet
      title="Ask for review"
      onClose={onClose}
      unsaved={!act.data && note.trim() !== ''}
      foot={
        act.data ? (
          <Button kind="filled" size="foot" fill onPress={onClose}>
            Done
          </Button>
        ) : (
          <Button
            kind="filled"
            size="foot"
            fill
            busy={act.isPending}
            onPress={() => act.mutate({ params: { waveformId }, body: { revisionId: head.revisionId, note } })}
          >
            Ask
          </Button>
        )
      }
    >
      <View style={styles.body}>
        <Text>{`${head.title}, revision ${head.number}. All reviewers are asked; somebody else than you releases it.`}</Text>
        <TextField
          label="Note"
          hint="What changed, and what to look at"
          value={note}
          onChangeText={setNote}
          multiline
          maxLength={2000}
        />
        {act.error ? (
          <Notice kind="danger" title="The review was not asked for.">
            {act.error.message}
          </Notice>
        ) : null}
        {act.data?.releasableBy.words ? <Notice kind="warning">{act.data.releasableBy.words}</Notice> : null}
      </View>
    </Sheet>
  );
}

const styles = StyleSheet.create({ body: { gap: 10 } });
