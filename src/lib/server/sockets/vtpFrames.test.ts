import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { FrameError, frameOf, FrameReader, LONGEST_MESSAGE_BYTES } from './vtpFrames';

const readAll = (reader: FrameReader, chunks: Uint8Array[]) =>
	chunks.flatMap((chunk) => [...reader.read(Buffer.from(chunk))]);

/** Cuts bytes at the given places, which may repeat: a chunk may be empty. */
function cutAt(bytes: Buffer, places: number[]): Buffer[] {
	const ends = [...places.map((place) => place % (bytes.length + 1)), bytes.length];
	ends.sort((a, b) => a - b);
	return ends.map((end, index) => bytes.subarray(index === 0 ? 0 : ends[index - 1]!, end));
}

describe('frames', () => {
	it('are the length in four bytes, big-endian, and the message', () => {
		expect([...frameOf(Buffer.from('abc'))]).toEqual([0, 0, 0, 3, 97, 98, 99]);
		expect([...frameOf(Buffer.alloc(0x010203)).subarray(0, 4)]).toEqual([0, 1, 2, 3]);
		const wire = Buffer.from([0, 0, 1, 0, ...new Array<number>(256).fill(120)]);
		expect(readAll(new FrameReader(), [wire])).toEqual([Buffer.alloc(256, 'x')]);
	});

	it('give the same messages however the wire cuts them', () => {
		const message = fc.uint8Array({ maxLength: 60 });
		fc.assert(
			fc.property(
				fc.array(message, { maxLength: 8 }),
				fc.array(fc.nat(), { maxLength: 40 }),
				(messages, places) => {
					const bodies = messages.map((one) => Buffer.from(one));
					const chunks = cutAt(Buffer.concat(bodies.map(frameOf)), places);
					expect(readAll(new FrameReader(), chunks)).toEqual(bodies);
				}
			)
		);
	});

	it('come byte by byte, empty messages at once', () => {
		const wire = Buffer.concat([frameOf(Buffer.alloc(0)), frameOf(Buffer.from('a'))]);
		const reader = new FrameReader();
		const counts = [...wire].map((byte) => [...reader.read(Buffer.from([byte]))].length);
		expect(counts).toEqual([0, 0, 0, 1, 0, 0, 0, 0, 1]);
	});

	it('are taken up to the limit and refused above it, after the messages before', () => {
		const longest = frameOf(Buffer.alloc(LONGEST_MESSAGE_BYTES, 7));
		expect(readAll(new FrameReader(), [longest])[0]).toHaveLength(LONGEST_MESSAGE_BYTES);
		const reader = new FrameReader(10);
		const seen: string[] = [];
		const read = () => {
			const wire = [frameOf(Buffer.from('first')), frameOf(Buffer.alloc(11))];
			for (const one of reader.read(Buffer.concat(wire))) seen.push(one.toString());
		};
		expect(read).toThrow(FrameError);
		expect(seen).toEqual(['first']);
		// A length whose highest bit is set is large, not negative.
		expect(() => readAll(new FrameReader(), [Buffer.from([255, 255, 255, 255])])).toThrow(
			/4294967295 bytes/
		);
	});

	it('are nothing until their last byte has come', () => {
		const reader = new FrameReader(1000);
		expect(readAll(reader, [Buffer.from([0, 0, 3, 232]), Buffer.alloc(999)])).toEqual([]);
		expect(readAll(reader, [Buffer.from('z')])).toHaveLength(1);
	});
});
