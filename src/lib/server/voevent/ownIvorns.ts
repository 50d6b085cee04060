export type OwnIvorns = {
	author: string;
	version: (regionVersion: number) => string;
	retraction: (regionVersion: number) => string;
};

/**
 * Our own IVORNs: the host of ORIGIN is the naming authority, `#D26L01-b.3` is version 3 of a transient's joint
 * region and `#D26L01-b.3.retraction` takes it back.
 */
export function ownIvorns(origin: string, designation: string): OwnIvorns {
	// An address in brackets (IPv6) can't be an authority's name.
	const authority = new URL(origin).hostname.replace(/^\[.*\]$/, 'localhost');
	const author = `ivo://${authority}/duskline`;
	const version = (regionVersion: number) => `${author}#${designation}.${regionVersion}`;
	return {
		author,
		version,
		retraction: (regionVersion) => `${version(regionVersion)}.retraction`
	};
}
