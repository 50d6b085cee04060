export {
	formatAngle,
	formatArea,
	formatChance,
	formatOdds,
	formatPoints,
	formatShare
} from '../../domain/quantity';
