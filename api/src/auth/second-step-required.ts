import type { Configuration } from '../common/configuration.ts';

/** Whether acts on money ask for a second step: in production, unless the deployment says otherwise, and elsewhere where it says so. */
export const secondStepRequired = ({ REQUIRE_SECOND_FACTOR, NODE_ENV }: Configuration): boolean => REQUIRE_SECOND_FACTOR ?? NODE_ENV === 'production';
