import { describeAccess } from '../../helpers/accessMatrix';
import { benchesAccess } from './tables/benches';
import { waveformsAccess } from './tables/waveforms';

describeAccess('waveforms, reviews, editions', waveformsAccess);
describeAccess('bench profiles', benchesAccess);
