import { describe, expect, it } from 'vitest';
import { foldedShape, readHandShape, type HandShapeFields } from './handShape';

const typed = (overrides: Partial<HandShapeFields> = {}): HandShapeFields => ({
	shape: 'circle',
	position: '05:33:36 -08:12:00',
	radius: '3',
	radiusUnit: 'deg',
	semiMinor: '',
	positionAngle: '',
	halfWidth: '',
	containment: '90',
	vertices: '',
	...overrides
});
const centre = {
	raDeg: expect.closeTo(83.4, 9) as number,
	decDeg: expect.closeTo(-8.2, 9) as number
};

describe('a typed shape', () => {
	it.each([
		[{}, { kind: 'circle', centre, radiusDeg: 3, containment: 0.9 }],
		[
			{ radius: '90', radiusUnit: 'arcsec' as const },
			{ kind: 'circle', radiusDeg: 0.025 }
		],
		[
			{ shape: 'hardCircle' as const, containment: '' },
			{ kind: 'hardCircle', radiusDeg: 3 }
		],
		[
			{ shape: 'annulus' as const, radius: '600', halfWidth: '30', radiusUnit: 'arcmin' as const },
			{ kind: 'annulus', radiusDeg: 10, halfWidthDeg: 0.5, containment: 0.9 }
		],
		[
			{ shape: 'ellipse' as const, semiMinor: '1.5', positionAngle: '-30' },
			{ kind: 'ellipse', semiMajorDeg: 3, semiMinorDeg: 1.5, positionAngleDeg: -30 }
		],
		[
			{ shape: 'polygon' as const, vertices: '10 10\n\n 20 10\n15 20\n' },
			{ kind: 'polygon', vertices: [{ raDeg: 10, decDeg: 10 }, { raDeg: 20 }, { decDeg: 20 }] }
		]
	])('%j is read', (overrides, shape) => {
		const read = readHandShape(typed(overrides));
		expect(read.errors).toEqual([]);
		expect(read.shape).toMatchObject(shape);
		expect(read.folded).toEqual([]);
	});

	it('keeps a right ascension as typed and says what it is folded to', () => {
		const read = readHandShape(typed({ position: '-10.5 +20' }));
		expect(read.shape).toMatchObject({ centre: { raDeg: -10.5, decDeg: 20 } });
		expect(read.folded).toEqual([{ field: 'position', typedDeg: -10.5, raDeg: 349.5 }]);
		expect(foldedShape(read.shape!)).toMatchObject({ centre: { raDeg: 349.5, decDeg: 20 } });
	});

	it.each([
		[{ position: '' }, 'position'],
		[{ position: '10 91' }, 'position'],
		[{ radius: '0' }, 'radius'],
		[{ radius: '-1' }, 'radius'],
		[{ radius: '3,5' }, 'radius'],
		[{ radius: '181' }, 'radius'],
		[{ containment: '0.9x' }, 'containment'],
		[{ containment: '' }, 'containment'],
		[{ shape: 'annulus' as const, halfWidth: '' }, 'halfWidth'],
		[{ shape: 'ellipse' as const, semiMinor: '4', positionAngle: '0' }, 'semiMinor'],
		[{ shape: 'ellipse' as const, semiMinor: '1', positionAngle: 'north' }, 'positionAngle'],
		[{ shape: 'polygon' as const, vertices: '10 10\n20 10' }, 'vertices']
	])('%j is refused at its field', (overrides, field) => {
		const read = readHandShape(typed(overrides));
		expect(read.shape).toBeNull();
		expect(read.errors.map(({ pointer }) => pointer)).toEqual([`/${field}`]);
	});

	it('names the line of a corner that can’t be read', () => {
		const read = readHandShape(typed({ shape: 'polygon', vertices: '10 10\n20 10\nthere' }));
		expect(read.errors[0]).toMatchObject({ pointer: '/vertices' });
		expect(read.errors[0]!.detail).toMatch(/^Line 3: /);
	});
});
