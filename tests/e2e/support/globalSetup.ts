import { publishAddresses } from './addresses';
import { startStack } from './stack';

/** Starts the stack for the run; what is returned ends it. */
export default async function globalSetup(): Promise<() => Promise<void>> {
	const stack = await startStack();
	publishAddresses(stack.addresses);
	return stack.stop;
}
