import type { AlertPacket } from '../../domain/alertPacket';
import { mapSourceOf } from '../../domain/mapPacket';
import { densityOf } from '../../sky/regions/density/densityOf';
import type { Shape } from '../../sky/regions/shape';
import type { App } from '../app';
import { DomainError } from '../domainError';

/**
 * A packet's shape as it is stored: maps in their normal form, made in a compute thread; the others as given.
 *
 * @throws DomainError `invalid`, naming the field, when it holds no probability anywhere or contradicts itself.
 */
export async function normalShape(app: App, shape: AlertPacket['shape']): Promise<Shape | null> {
	if (!shape) return null;
	if (shape.kind === 'map') {
		const answer = await app.compute.mapShape(mapSourceOf(shape));
		if ('shape' in answer) return answer.shape;
		const { field, entry, detail } = answer.fault;
		throw invalid(`/shape/${field}${entry === null ? '' : `/${entry}`}`, detail);
	}
	try {
		densityOf(shape);
	} catch (error) {
		if (error instanceof RangeError) throw invalid('/shape', error.message);
		throw error;
	}
	return shape;
}

/** A map that is in its normal form already, as `mapShapeFrom` made it. */
export function mapOf(shape: AlertPacket['shape']): Shape | null {
	if (shape?.kind !== 'map') return null;
	const { uniq = [], density = [] } = shape;
	return { kind: 'map', uniq, density };
}

function invalid(pointer: string, detail: string): DomainError {
	return new DomainError('invalid', 'Some fields are not valid.', [{ pointer, detail }]);
}
