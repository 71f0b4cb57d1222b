import { benchPresets } from './benchBasics';
import { en300401ModeI } from './en300401';
import { en300744Presets } from './en300744';
import { es201980ModeB } from './es201980';
import { ieee80211At20MHz } from './ieee80211';
import { ieee80211At40MHz, ieee80211At80MHz, ieee80211HighEfficiency } from './ieee80211Wide';
import type { Preset } from './preset';
import { ts36211Presets } from './ts36211';
import { ts38211Slots } from './ts38211';
import { ts38211SyncBlock } from './ts38211Sync';

/** The built-in starting layouts; each cites its standard, or that it has none, and says what of it is left out. */
export const presets: readonly Preset[] = [
  ieee80211At20MHz,
  ieee80211At40MHz,
  ieee80211At80MHz,
  ieee80211HighEfficiency,
  ...ts36211Presets,
  ...ts38211Slots,
  ts38211SyncBlock,
  ...en300744Presets,
  en300401ModeI,
  es201980ModeB,
  ...benchPresets,
];
