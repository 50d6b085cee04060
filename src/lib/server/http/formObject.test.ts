import { expect, test } from 'vitest';
import { formObject } from './formObject';

function form(...fields: [string, string][]): FormData {
	const data = new FormData();
	for (const [name, value] of fields) data.append(name, value);
	return data;
}

test('names are pointers into objects and lists', () => {
	expect(
		formObject(
			form(
				['name', 'Cerro Almendra'],
				['limits/minAltDeg', '20'],
				['depths/0/filter', 'r'],
				['depths/1/filter', 'g'],
				['roles/-', 'duty'],
				['roles/-', 'pi']
			)
		)
	).toEqual({
		name: 'Cerro Almendra',
		limits: { minAltDeg: '20' },
		depths: [{ filter: 'r' }, { filter: 'g' }],
		roles: ['duty', 'pi']
	});
});

test('blank rows at the end are dropped, one in the middle keeps the places of the others', () => {
	const { depths, detectors } = formObject(
		form(
			['depths/0/filter', 'r'],
			['depths/1/filter', ' '],
			['depths/2/filter', 'g'],
			['depths/3/filter', ''],
			['detectors/0/shape', 'circle'],
			['detectors/0/radiusDeg', '']
		)
	);
	expect(depths).toEqual([{ filter: 'r' }, { filter: ' ' }, { filter: 'g' }]);
	expect(detectors).toEqual([]);
});

test('no name reaches a prototype, contradicts another or makes a huge list', () => {
	const made = formObject(
		form(
			['__proto__/polluted', 'yes'],
			['constructor/prototype/polluted', 'yes'],
			['a', '1'],
			['a/b', '2'],
			['list/0', 'x'],
			['list/999', 'y'],
			['list/12345', 'z']
		)
	);
	expect(made).toEqual({ a: '1', list: ['x'] });
	expect(({} as Record<string, unknown>).polluted).toBeUndefined();
});
