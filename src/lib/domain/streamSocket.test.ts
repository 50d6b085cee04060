import { describe, expect, it } from 'vitest';
import { socketCreateSchema } from './streamSocket';

describe('an address', () => {
	it.each(['broker.example', '127.0.0.1', 'localhost', '::1', 'fe80::1:2'])(
		'%s is taken',
		(host) => {
			expect(socketCreateSchema.parse({ host: ` ${host} `, port: '8099' })).toEqual({
				host,
				port: 8099,
				ivornPrefix: ''
			});
		}
	);

	it.each([
		['host', { host: 'broker.example:8099', port: '8099' }],
		['host', { host: 'https://broker.example', port: '8099' }],
		['host', { host: 'two words', port: '8099' }],
		['host', { host: '', port: '8099' }],
		['port', { host: 'broker.example', port: '0' }],
		['port', { host: 'broker.example', port: '80.5' }],
		['port', { host: 'broker.example', port: '65536' }],
		['ivornPrefix', { host: 'broker.example', port: '1', ivornPrefix: 'http://broker.example' }]
	])('is refused by its %s: %j', (field, values) => {
		const outcome = socketCreateSchema.safeParse(values);
		expect(outcome.error?.issues.map(({ path }) => path[0])).toEqual([field]);
	});
});
