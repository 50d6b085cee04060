import { MOC_ORDER } from '../../sky/healpix/healpix';
import type { MocRanges } from '../../sky/moc/moc';
import { writeFits } from '../fits/writeFits';
import { mocCellRuns } from './mocCellRuns';

/** A coverage map in normal form as FITS (IVOA MOC 2.0, section 4.2): RANGE, at order 29. */
export function mocFits(set: MocRanges, object: string): Uint8Array {
	const finest = mocCellRuns(set).at(-1)?.order ?? 0;
	return writeFits(
		[{ name: 'RANGE', form: 'K', values: set.flat() }],
		[
			['MOCVERS', '2.0'],
			['MOCDIM', 'SPACE'],
			['ORDERING', 'RANGE'],
			['COORDSYS', 'C', 'ICRS'],
			['MOCORD_S', Math.min(finest, MOC_ORDER), 'finest order of the cells'],
			['OBJECT', object]
		],
		[]
	);
}
