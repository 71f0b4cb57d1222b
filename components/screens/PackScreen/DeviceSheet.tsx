import { useState } from 'react';
import { Pressable, StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { NumberField } from '@/components/ui/NumberField';
import { Sheet } from '@/components/ui/overlay';
import { Text } from '@/components/ui/Text';
import { TextField } from '@/components/ui/TextField';
import { color } from '@/components/ui/theme';
import { fieldErrors } from '@/lib/client/fieldErrors';
import { useAct } from '@/lib/client/useApi';
import { enterDeviceCard, showPack, type DeviceCard, type DeviceIntent, type PackDetail } from '@/lib/contracts/packs';
import { formatNumber, parseQuantity } from '@/lib/drawing/quantities';
import { clockTime, when } from '../when';

type Key = keyof DeviceIntent;

const fields: { key: Key; label: string; unit: 'dBm' | 'dB'; least: number; most: number; optional: boolean }[] = [
  { key: 'devicePeakLimitDbm', label: 'Peak limit of the device', unit: 'dBm', least: -200, most: 100, optional: true },
  { key: 'deviceMeanLimitDbm', label: 'Mean limit of the device', unit: 'dBm', least: -200, most: 100, optional: true },
  { key: 'lossDb', label: 'Loss before it: attenuator and cable', unit: 'dB', least: 0, most: 200, optional: false },
  { key: 'outputRmsDbm', label: 'Mean wanted at the device', unit: 'dBm', least: -200, most: 100, optional: true },
  { key: 'levelToleranceDb', label: 'Kept for error', unit: 'dB', least: 0, most: 20, optional: false },
];

/** "limits entered by Jun Aldane, 12:06". */
export function enteredWords(card: DeviceCard): string {
  const at = when(card.enteredAtMs);
  return `limits entered by ${card.enteredBy.name}, ${at.startsWith('today') || at.includes('min ago') || at === 'just now' ? clockTime(card.enteredAtMs) : at}`;
}

/** Other limits for another device: kept beside the pack, which stays as it was reviewed. */
export function DeviceSheet({
  pack,
  chosenId,
  onChoose,
  onClose,
}: {
  pack: PackDetail;
  chosenId: string | null;
  onChoose: (cardId: string | null) => void;
  onClose: () => void;
}) {
  const [intent, setIntent] = useState<DeviceIntent>(pack.intent);
  const [deviceName, setName] = useState('');
  const [errors, setErrors] = useState<Partial<Record<Key, string>>>({});
  const act = useAct(enterDeviceCard, [showPack], (card) => {
    onChoose(card.cardId);
    onClose();
  });
  const served = fieldErrors(act.error);
  const set = (field: (typeof fields)[number], text: string) => {
    const fail = (message: string) => setErrors({ ...errors, [field.key]: message });
    if (text.trim() === '') {
      if (!field.optional) return fail('Needs a number.');
      setErrors({ ...errors, [field.key]: undefined });
      return setIntent({ ...intent, [field.key]: null });
    }
    const parsed = parseQuantity(text, field.unit);
    if (!parsed.ok) return fail(parsed.message);
    if (parsed.value < field.least || parsed.value > field.most)
      return fail(`${formatNumber(field.least)} to ${formatNumber(field.most)} ${field.unit}`);
    setErrors({ ...errors, [field.key]: undefined });
    setIntent({ ...intent, [field.key]: parsed.value });
  };
  const wrong = Object.values(errors).some((error) => error !== undefined);
  return (
    <Sheet
      title="Another device"
      onClose={onClose}
      unsaved={deviceName !== '' || intent !== pack.intent}
      foot={
        <Button
          kind="filled"
          size="foot"
          fill
          busy={act.isPending}
          disabledBecause={wrong ? 'A number is not right yet.' : deviceName.trim() === '' ? 'Name the device.' : null}
          onPress={() =>
            act.mutate({
              params: { packId: pack.packId },
              body: { deviceName, intent },
              idempotencyKey: crypto.getRandomValues(new Uint32Array(4)).join('-'),
            })
          }
        >
          Use these limits
        </Button>
      }
    >
      <View style={styles.body}>
        {pack.deviceCards.length > 0 ? (
          <View role="radiogroup" aria-label="Limits in use" style={styles.list}>
            <Choice
              label="As reviewed"
              aside="the pack’s own card"
              chosen={chosenId === null}
              onPress={() => onChoose(null)}
            />
            {pack.deviceCards.map((card) => (
              <Choice
                key={card.cardId}
                label={card.deviceName}
                aside={enteredWords(card)}
                chosen={card.cardId === chosenId}
                onPress={() => onChoose(card.cardId)}
              />
            ))}
          </View>
        ) : null}
        <Text variant="small" tone="quiet">
          Enter what this device’s own data sheet says. The pack and its card stay as they were reviewed.
        </Text>
        <TextField label="Device" value={deviceName} onChangeText={setName} maxLength={120} error={served.deviceName} />
        {fields.map((field) => (
          <NumberField
            key={field.key}
            label={field.label}
            value={intent[field.key] === null ? '' : formatNumber(intent[field.key]!, 2)}
            unit={field.unit}
            words
            limits={`${formatNumber(field.least)} to ${formatNumber(field.most)} ${field.unit}${field.optional ? ', or empty' : ''}`}
            error={errors[field.key] ?? null}
            onSet={(text) => set(field, text)}
          />
        ))}
        {act.error && !served.deviceName ? (
          <Text variant="small" tone="danger" role="alert">
            {act.error.message}
          </Text>
        ) : null}
      </View>
    </Sheet>
  );
}

function Choice({
  label,
  aside,
  chosen,
  onPress,
}: {
  label: string;
  aside: string;
  chosen: boolean;
  onPress: () => void;
}) {
  return (
    <Pressable
      role="radio"
      aria-checked={chosen}
      onPress={onPress}
      style={[styles.choice, chosen ? styles.chosen : null]}
    >
      <Text weight={chosen ? 600 : 500} tone={chosen ? 'onSelected' : 'body'}>
        {label}
      </Text>
      <Text variant="small" tone={chosen ? 'onSelected' : 'quiet'}>
        {aside}
      </Text>
    </Pressable>
  );
}

const styles = StyleSheet.create({
  body: { gap: 8 },
  list: {
    gap: 4,
    paddingBottom: 8,
    borderBottomWidth: 1,
    borderBottomColor: color.rule.line,
  },
  choice: {
    minHeight: 48,
    justifyContent: 'center',
    paddingHorizontal: 10,
    borderBottomWidth: 2,
    borderBottomColor: 'transparent',
  },
  chosen: { backgroundColor: color.surface.selected, borderBottomColor: color.ink.strong },
});
