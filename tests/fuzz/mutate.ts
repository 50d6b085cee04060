/** A number in [0, 1) that follows from the seed alone (mulberry32, public domain; from memory). */
export function seededRandom(seed: number): () => number {
	let state = seed >>> 0;
	return () => {
		state = (state + 0x6d2b79f5) >>> 0;
		let mixed = Math.imul(state ^ (state >>> 15), state | 1);
		mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
		return ((mixed ^ (mixed >>> 14)) >>> 0) / 2 ** 32;
	};
}

const NASTY = [
	'\u0000',
	'\ufeff',
	'\ud7ff\u0001',
	'<',
	'>',
	'&',
	'"',
	"'",
	'{',
	'}',
	'[',
	']',
	',',
	':',
	'\\u0000',
	'\\ud800',
	'&amp;',
	'&#0;',
	'&#x110000;',
	'&#55296;',
	'&lol;',
	'<!DOCTYPE a [<!ENTITY b "c">]>',
	'<!--',
	'-->',
	'<![CDATA[',
	']]>',
	'<?xml version="1.0" encoding="UTF-16"?>',
	'<?',
	'</',
	'/>',
	'<a>'.repeat(50),
	'['.repeat(200),
	'{"a":'.repeat(50),
	'__proto__',
	'"__proto__":{"role":"test"},',
	'constructor',
	' xmlns:x="y"',
	' role="test"',
	'null',
	'true',
	'\u202e',
	'😀',
	'😀'.slice(0, 1),
	'é'.normalize('NFD'),
	'1'.repeat(400),
	' '.repeat(5000),
	'\r\n',
	'%00',
	"'; drop table alert; --"
];

const NUMBERS = [
	'NaN',
	'1e999',
	'-1e999',
	'-0',
	'0',
	'1e-320',
	'9007199254740993',
	'179769313486231580793728971405303415079934132710037826936173778980444968292764750946649017977587207096330286416692887910946555547851940402630657488671505820681908902000708383676273854845817711531764475730270069855571366959622842914819860834936475292719074168444365510704342711559699508093042880',
	'-1',
	'360',
	'1.7976931348623157e308',
	'0x10',
	'1_000',
	'١٢',
	'',
	'null',
	'Infinity'
];

type Random = () => number;
type Mutation = (body: Buffer, random: Random) => Buffer;

const below = (random: Random, limit: number) => Math.floor(random() * limit);
const pick = <T>(random: Random, list: readonly T[]): T => list[below(random, list.length)]!;

function range(body: Buffer, random: Random): [number, number] {
	const from = below(random, body.length + 1);
	// Mostly short pieces, now and then a long one.
	const length = below(random, random() < 0.8 ? 20 : 600);
	return [from, Math.min(body.length, from + length)];
}

const MUTATIONS: Mutation[] = [
	function flipBit(body, random) {
		const changed = Buffer.from(body);
		if (changed.length === 0) return changed;
		const at = below(random, changed.length);
		changed[at] = changed[at]! ^ (1 << below(random, 8));
		return changed;
	},
	function cutOut(body, random) {
		const [from, to] = range(body, random);
		return Buffer.concat([body.subarray(0, from), body.subarray(to)]);
	},
	function repeat(body, random) {
		const [from, to] = range(body, random);
		const copies = 1 + below(random, 4);
		const piece = body.subarray(from, to);
		const repeated = Array.from({ length: copies }, () => piece);
		return Buffer.concat([body.subarray(0, to), ...repeated, body.subarray(to)]);
	},
	function insertNasty(body, random) {
		const at = below(random, body.length + 1);
		return Buffer.concat([
			body.subarray(0, at),
			Buffer.from(pick(random, NASTY)),
			body.subarray(at)
		]);
	},
	function truncate(body, random) {
		return body.subarray(0, below(random, body.length + 1));
	},
	function changeNumber(body, random) {
		// Latin-1 keeps every byte as it is, there and back.
		const text = body.toString('latin1');
		const numbers = [...text.matchAll(/-?\d+(?:\.\d+)?(?:[eE][+-]?\d+)?/g)];
		const found = pick(random, numbers.length > 0 ? numbers : [null]);
		if (!found) return body;
		return Buffer.concat([
			body.subarray(0, found.index),
			Buffer.from(pick(random, NUMBERS)),
			body.subarray(found.index + found[0].length)
		]);
	},
	function exchange(body, random) {
		const [a, b] = [range(body, random), range(body, random)].sort((x, y) => x[0] - y[0]);
		const [fromA, toA] = a!;
		const [fromB, toB] = b!;
		if (toA > fromB) return body;
		return Buffer.concat([
			body.subarray(0, fromA),
			body.subarray(fromB, toB),
			body.subarray(toA, fromB),
			body.subarray(fromA, toA),
			body.subarray(toB)
		]);
	}
];

/** The body after one to three random changes, one in most cases. */
export function mutate(body: Buffer, random: Random): Buffer {
	const changes = random() < 0.6 ? 1 : 2 + below(random, 2);
	let changed = body;
	for (let change = 0; change < changes; change++)
		changed = pick(random, MUTATIONS)(changed, random);
	return changed;
}
