/** Right ascensions in a packet's shape that lie outside [0, 360) and are folded into it, degrees. */
export function foldedRightAscensions(packet: unknown): number[] {
	const shape = field(packet, 'shape');
	const vertices = field(shape, 'vertices');
	return [field(shape, 'centre'), ...(Array.isArray(vertices) ? vertices : [])]
		.map((position) => field(position, 'raDeg'))
		.filter((raDeg): raDeg is number => typeof raDeg === 'number' && (raDeg < 0 || raDeg >= 360));
}

function field(from: unknown, name: string): unknown {
	return typeof from === 'object' && from !== null && name in from
		? (from as Record<string, unknown>)[name]
		: undefined;
}
