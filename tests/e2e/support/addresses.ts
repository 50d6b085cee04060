/** Where the stack of a run answers. */
export type StackAddresses = {
	origin: string;
	mailboxUrl: string;
	/** The push service's JSON API. */
	pushUrl: string;
	/** The VOEvent broker's JSON API. */
	brokerUrl: string;
	databaseUrl: string;
	streamKeys: Record<'tambour' | 'carapace' | 'needle', string>;
};

/** The workers get the addresses by the environment they inherit from the global set-up. */
export function publishAddresses(addresses: StackAddresses): void {
	process.env.DUSKLINE_E2E_ORIGIN = addresses.origin;
	process.env.DUSKLINE_E2E_ADDRESSES = JSON.stringify(addresses);
}

export function addresses(): StackAddresses {
	const text = process.env.DUSKLINE_E2E_ADDRESSES;
	if (!text) throw new Error('The global set-up has not run');
	return JSON.parse(text) as StackAddresses;
}
