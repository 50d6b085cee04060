import { lookup, type LookupAddress } from 'node:dns';
import { Agent } from 'node:https';
import { BlockList, isIP, type LookupFunction } from 'node:net';

/** Addresses that no outside push service has (IANA special-purpose registries, RFC 6890). */
const inside = new BlockList();
for (const [network, prefix] of [
	['0.0.0.0', 8],
	['10.0.0.0', 8],
	['100.64.0.0', 10],
	['127.0.0.0', 8],
	['169.254.0.0', 16],
	['172.16.0.0', 12],
	['192.0.0.0', 24],
	['192.168.0.0', 16],
	['198.18.0.0', 15],
	['224.0.0.0', 3]
] as const) {
	inside.addSubnet(network, prefix, 'ipv4');
	// The same address written as IPv4-mapped IPv6.
	inside.addSubnet(`::ffff:${network}`, 96 + prefix, 'ipv6');
}
for (const [network, prefix] of [
	['::', 127],
	['64:ff9b::', 96],
	['fc00::', 7],
	['fe80::', 10],
	['ff00::', 8]
] as const) {
	inside.addSubnet(network, prefix, 'ipv6');
}

export function isInsideAddress(address: string): boolean {
	const family = isIP(address);
	if (family === 0) return false;
	return inside.check(address, family === 4 ? 'ipv4' : 'ipv6');
}

/** Whether a push endpoint may lie outside: https, and no address of an inner network in plain sight. */
export function mayBePublicEndpoint(endpoint: string): boolean {
	const url = new URL(endpoint);
	const host = url.hostname.replace(/^\[|\]$/g, '');
	if (url.protocol !== 'https:' || url.username || url.password) return false;
	return host !== 'localhost' && !host.endsWith('.localhost') && !isInsideAddress(host);
}

const publicLookup: LookupFunction = (hostname, options, callback) => {
	lookup(hostname, { ...options, all: true }, (error, addresses: LookupAddress[]) => {
		const found = addresses?.find(({ address }) => !isInsideAddress(address));
		if (error || !found) {
			callback(error ?? new Error(`${hostname} is not a public host`), '', 0);
		} else if (options.all) {
			callback(null, [found]);
		} else {
			callback(null, found.address, found.family);
		}
	});
};

/**
 * An agent that connects to public addresses only: whoever registers a device chooses where the
 * server sends to, and a name may resolve to an inner address after it was checked.
 */
export function publicAgent(): Agent {
	return new Agent({ keepAlive: true, maxSockets: 8, lookup: publicLookup });
}
