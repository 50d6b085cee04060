import type { BoardPart, BoardTransient } from '../../domain/board';
import { shapeText } from '../../domain/shapeWords';
import { formatPosition } from '../format/formatPosition';
import { formatArea } from '../format/formatQuantity';

export { shapeText } from '../../domain/shapeWords';

/** What a sky chart draws: a transient, or a part that is only typed yet. */
export type ChartSubject = Pick<BoardTransient, 'designation' | 'region'> & {
	parts: readonly Pick<BoardPart, 'alertId' | 'streamName' | 'streamClass' | 'shape'>[];
};

/** The sky chart in words. */
export function chartText({ designation, parts, region }: ChartSubject): string {
	if (!region) return `Sky chart of ${designation}: no live alert, nothing to draw.`;
	const { ra, dec } = formatPosition(region.centre, region.equivalentRadiusDeg);
	const heard = parts.map((part) => `${part.streamName} ${shapeText(part.shape)}`).join(', ');
	return `Sky chart of ${designation}, north up, east to the left. Joint region ${formatArea(region.area90Deg2)} around ${ra} ${dec}. From ${heard}.`;
}
