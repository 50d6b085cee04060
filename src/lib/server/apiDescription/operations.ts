import { ALERT_OPERATIONS } from './alertOperations';
import type { Operation } from './operation';
import { OTHER_OPERATIONS } from './otherOperations';
import { SLOT_OPERATIONS } from './slotOperations';
import { TRANSIENT_OPERATIONS } from './transientOperations';

/** Every operation of the API; a test holds that no handler under routes/api/v1 is missing. */
export const OPERATIONS: Operation[] = [
	...ALERT_OPERATIONS,
	...TRANSIENT_OPERATIONS,
	...SLOT_OPERATIONS,
	...OTHER_OPERATIONS
];
