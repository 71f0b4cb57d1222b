import { useState } from 'react';
import { StyleSheet, TextInput, View } from 'react-native';
import { useWidth } from '@/components/drawing/useWidth';
import { Button } from '@/components/ui/Button';
import { Figure } from '@/components/ui/Figure';
import { Text, textStyle } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { elevation } from '@/components/ui/tokens';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import { formatNumber, formatQuantity, parseQuantity } from '@/lib/drawing/quantities';
import type { LevelCard } from '@/lib/synth';
import { LevelScale } from './LevelScale';

/** What to set and must not exceed, in the order in which it is read and obeyed. */
export function LevelCardView({
  card,
  onSetting,
  typed,
}: {
  card: LevelCard;
  /** A setting typed here; null goes back to the card's own. */
  onSetting: (settingDbm: number | null) => void;
  typed: boolean;
}) {
  const { widthPx, onLayout } = useWidth();
  const over = card.verdict === 'over';
  const phone = useBreakpoint() === 'phone';
  const clock = formatQuantity(card.sampleClockHz, 'Hz');
  return (
    <View
      role="region"
      aria-label="Level card"
      onLayout={onLayout}
      style={[styles.card, over ? styles.over : null, { boxShadow: elevation.lifted.shadow.paper } as object]}
    >
      <View style={styles.settings}>
        <View style={styles.setting}>
          <Text variant="small" weight={500}>
            Set on the generator
          </Text>
          <Setting key={card.settingDbm ?? 'none'} card={card} onSetting={onSetting} />
          <Text variant="label" weight={400} tone="quiet">
            {card.settingWords}
          </Text>
          {typed ? (
            <Button kind="plain" size="small" onPress={() => onSetting(null)}>
              Back to the card’s setting
            </Button>
          ) : null}
        </View>
        {card.highestSettingDbm === null ? null : (
          <View style={styles.highest}>
            <Text variant="small" weight={500}>
              Highest setting
            </Text>
            <View style={styles.highestFigure}>
              <Figure variant="figureLarge" value={formatNumber(card.highestSettingDbm, 1, true)} unit="dBm" />
            </View>
            <Text variant="label" weight={400} tone="quiet">
              {`${formatNumber(card.levelToleranceDb, 1)} dB kept for error`}
            </Text>
          </View>
        )}
      </View>
      <View style={styles.scaleHead}>
        <Text variant="small" weight={600} tone="strong">
          At the device’s connector
        </Text>
        <Text variant="label" weight={400} tone="quiet">
          after attenuator and cable
        </Text>
      </View>
      {widthPx > 0 ? (
        <LevelScale card={card} widthPx={widthPx - 3} heightPx={phone ? 160 : 190} />
      ) : (
        <View style={styles.scalePlace} />
      )}
      <Readable card={card} />
      <Text variant="bodyStrong" tone={over ? 'danger' : 'strong'} role="status" style={styles.sentence}>
        {card.sentence}
      </Text>
      <View style={styles.last}>
        <Cell label="Loss before it" value={formatNumber(card.lossDb, 2)} unit="dB" />
        <Cell label="Sample clock" value={clock.value} unit={clock.unit} />
        <Cell
          label="Peak in the file"
          value={card.peakDbfs === null ? 'none' : formatNumber(card.peakDbfs, 2, true)}
          unit={card.peakDbfs === null ? '' : 'dBFS'}
        />
      </View>
    </View>
  );
}

/** The scale in words, for readers of the page. */
function Readable({ card }: { card: LevelCard }) {
  const say = (name: string, dbm: number | null) => (dbm === null ? '' : `${name} ${formatNumber(dbm, 2, true)} dBm. `);
  return (
    <Text style={styles.hidden}>
      {say('Peak limit', card.peakLimitDbm) +
        say('Peak now', card.peakNowDbm) +
        say('Mean limit', card.meanLimitDbm) +
        say('Mean', card.meanNowDbm)}
    </Text>
  );
}

function Setting({ card, onSetting }: { card: LevelCard; onSetting: (settingDbm: number | null) => void }) {
  const shown = card.settingDbm === null ? '' : formatNumber(card.settingDbm, 1, true);
  const [text, setText] = useState(shown);
  const [problem, setProblem] = useState<string | null>(null);
  const leave = () => {
    if (text.trim() === shown) return setProblem(null);
    if (text.trim() === '') return onSetting(null);
    const parsed = parseQuantity(text, 'dBm');
    if (!parsed.ok) return setProblem(parsed.message);
    if (Math.abs(parsed.value) > 200) return setProblem('−200 to 200 dBm.');
    setProblem(null);
    onSetting(parsed.value);
  };
  return (
    <View>
      <View style={styles.settingRow}>
        <TextInput
          aria-label="Set on the generator, dBm"
          value={text}
          placeholder="none"
          placeholderTextColor={color.ink.faint}
          inputMode="text"
          onChangeText={setText}
          onBlur={leave}
          onSubmitEditing={leave}
          onKeyPress={(event) => {
            if (event.nativeEvent.key !== 'Escape') return;
            setText(shown);
            setProblem(null);
          }}
          style={[textStyle('figureHero'), styles.settingInput]}
        />
        <Text tone="quiet">dBm</Text>
      </View>
      {problem ? (
        <Text variant="small" tone="danger" role="alert">
          {problem}
        </Text>
      ) : null}
    </View>
  );
}

function Cell({ label, value, unit }: { label: string; value: string; unit: string }) {
  return (
    <View style={styles.cell}>
      <Text variant="label" weight={400} tone="quiet" numberOfLines={1}>
        {label}
      </Text>
      <Figure value={value} {...(unit ? { unit } : {})} />
    </View>
  );
}

const styles = StyleSheet.create({
  card: { backgroundColor: color.surface.raised, borderWidth: 1.5, borderColor: color.rule.strong },
  over: { backgroundColor: color.danger.wash, borderColor: color.danger.rule },
  settings: { flexDirection: 'row', borderBottomWidth: 1.5, borderBottomColor: color.rule.strong },
  setting: { flexGrow: 1, flexShrink: 1, minWidth: 0, padding: 9, paddingLeft: 14, alignItems: 'flex-start' },
  settingRow: { flexDirection: 'row', alignItems: 'baseline', gap: 6 },
  settingInput: {
    width: 130,
    height: 44,
    color: color.ink.strong,
    borderBottomWidth: 1.5,
    borderBottomColor: color.rule.control,
    borderStyle: 'dotted',
    padding: 0,
  },
  highest: { width: 132, padding: 9, paddingLeft: 14, borderLeftWidth: 1, borderLeftColor: color.rule.line },
  highestFigure: { height: 44, justifyContent: 'flex-end', paddingBottom: 2 },
  scaleHead: {
    flexDirection: 'row',
    justifyContent: 'space-between',
    alignItems: 'center',
    paddingHorizontal: 14,
    paddingTop: 6,
  },
  scalePlace: { height: 190 },
  hidden: { position: 'absolute', width: 1, height: 1, overflow: 'hidden', opacity: 0 },
  sentence: { paddingHorizontal: 14, paddingVertical: 6, fontSize: 14, lineHeight: 20 },
  last: { flexDirection: 'row', borderTopWidth: 1, borderTopColor: color.rule.line },
  cell: {
    flex: 1,
    minWidth: 0,
    paddingVertical: 6,
    paddingLeft: 12,
    borderRightWidth: 1,
    borderRightColor: color.rule.line,
  },
});
