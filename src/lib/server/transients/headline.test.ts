import { describe, expect, it } from 'vitest';
import { headline, type HeadlinePart } from './headline';

const part = (
	streamClass: HeadlinePart['streamClass'],
	shapeKind: HeadlinePart['shapeKind'] = 'circle'
): HeadlinePart => ({ streamClass, shapeKind });

describe('a transient’s line', () => {
	it('counts circles and positions by class', () => {
		expect(headline(1.2, [part('gamma'), part('wideXray'), part('gamma')], false)).toMatch(
			/ from 2 gamma circles and 1 X-ray position$/
		);
	});

	it('calls rings, outlines and maps regions', () => {
		const parts = [
			part('gamma', 'annulus'),
			part('gamma', 'hardCircle'),
			part('gamma', 'map'),
			part('narrowXray', 'ellipse')
		];
		expect(headline(1.2, parts, false)).toMatch(
			/ from 1 gamma circle, 2 gamma regions and 1 fine X-ray region$/
		);
	});

	it('says when nothing stands and when it was found', () => {
		expect(headline(null, [part('gamma')], false)).toBe('No live alert');
		expect(headline(1.2, [], false)).toBe('No live alert');
		expect(headline(1.2, [part('gamma')], true)).toMatch(/, counterpart found$/);
	});
});
