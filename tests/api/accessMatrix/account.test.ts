import { describeAccess } from '../../helpers/accessMatrix';
import { accountAccess } from './tables/account';
import { peopleAccess } from './tables/people';

describeAccess('account and sign-in', accountAccess);
describeAccess('people and audit', peopleAccess);
