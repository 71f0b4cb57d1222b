import { describeAccess } from '../../helpers/accessMatrix';
import { packsAccess } from './tables/packs';

jest.setTimeout(60_000);

describeAccess('packs and their jobs', packsAccess);
