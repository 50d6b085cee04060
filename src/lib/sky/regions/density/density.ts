import type { Vector } from '../../vector';

/** A cell of the mesh: where it is and how far its corners reach from its centre. */
export type CellPlace = { order: number; pixel: number; at: Vector; reachRad: number };

/** A normalised probability density on the sky; logs are natural, of probability per steradian. */
export type Density = {
	/** At a unit vector; −Infinity where there is none. */
	logAt(direction: Vector): number;
	/** The value that stands for a whole cell. */
	logIn(cell: CellPlace): number;
	/** An upper bound inside a cell; −Infinity only where there is none anywhere in it. */
	logBound(cell: CellPlace): number;
	/** Greatest value on the sky. */
	logPeak: number;
	/** Greatest cell side that follows the density in and around a cell, radians; Infinity where it is flat. */
	sideRad(cell: CellPlace): number;
};

/** Greatest cell side over σ at which sums over cell centres are good to 1 % in area. */
export const SIDE_PER_SIGMA = 1 / 3;

/** σ that the finest cells (order 24) still follow, radians: 0.04″; smaller ones are widened to it. */
export const SIGMA_MIN_RAD = 2e-7;
