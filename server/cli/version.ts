import { synthVersion } from '@/lib/synth';
import { packVersion } from '../packs/packVersion.ts';

export const versionLine = `combwright, synthesis ${synthVersion}, pack ${packVersion}`;
