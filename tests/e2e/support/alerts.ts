import type { z } from 'zod';
import type { alertPacketSchema } from '../../../src/lib/domain/alertPacket';
import { addresses, type StackAddresses } from './addresses';

export type AlertInput = z.input<typeof alertPacketSchema>;

/** Posts a packet as its stream would, with the stream's key; answers status and parsed body. */
export async function postAlert(
	stream: keyof StackAddresses['streamKeys'],
	packet: AlertInput
): Promise<{ status: number; body: Record<string, unknown> }> {
	const { origin, streamKeys } = addresses();
	const response = await fetch(`${origin}/api/v1/alerts`, {
		method: 'POST',
		headers: {
			'Content-Type': 'application/json',
			Authorization: `Bearer ${streamKeys[stream]}`
		},
		body: JSON.stringify(packet)
	});
	return { status: response.status, body: (await response.json()) as Record<string, unknown> };
}
