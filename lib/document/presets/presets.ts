import { ieee80211At20MHz } from './ieee80211';
import type { Preset } from './preset';
import { ts36211At5MHz } from './ts36211';

export type { Preset };

/** The built-in starting layouts; each cites its standard and says what of it is left out. */
export const presets: readonly Preset[] = [ieee80211At20MHz, ts36211At5MHz];
