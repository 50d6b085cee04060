export { formatPosition, positionToPaste } from '../../domain/positionWords';
