import { XMLValidator } from 'fast-xml-parser';
import { describe, expect, it } from 'vitest';
import { readSocketMessage, writeTransport } from './transportMessage';

// Written from memory of the Recommendation's examples (VOEvent Transport Protocol 2.0, section on messages).
const IAMALIVE = `<?xml version='1.0' encoding='UTF-8'?>
<trn:Transport role="iamalive" version="1.0"
	xmlns:trn="http://telescope-networks.org/schema/Transport/v1.1"
	xmlns:xsi="http://www.w3.org/2001/XMLSchema-instance"
	xsi:schemaLocation="http://telescope-networks.org/schema/Transport/v1.1
		http://telescope-networks.org/schema/Transport-v1.1.xsd">
	<Origin>ivo://broker.example/main</Origin>
	<TimeStamp>2026-12-01T04:12:40Z</TimeStamp>
</trn:Transport>`;

const read = (xml: string) => readSocketMessage(Buffer.from(xml));
const AT = new Date('2026-12-01T04:12:41Z');

describe('transport documents', () => {
	it('are read whatever their namespace and prefix', () => {
		const expected = {
			kind: 'transport',
			message: {
				role: 'iamalive',
				origin: 'ivo://broker.example/main',
				response: '',
				timeStamp: '2026-12-01T04:12:40Z',
				result: ''
			}
		};
		expect(read(IAMALIVE)).toEqual(expected);
		const other = IAMALIVE.replaceAll('trn:', '').replace(
			/xmlns:trn="[^"]*"/,
			'xmlns="http://www.telescope-networks.org/xml/Transport/v1.1"'
		);
		expect(read(other)).toEqual(expected);
		expect(read(`\ufeff${IAMALIVE}`)).toEqual(expected);
	});

	it('hold the reason of a nak', () => {
		const nak = read(`<Transport role="nak" version="1.0"><Origin>ivo://a.example/b#1</Origin>
			<Response>ivo://c.example/d</Response><TimeStamp>2026-12-01T04:12:40</TimeStamp>
			<Meta><Result>No room &amp; no time</Result></Meta></Transport>`);
		expect(nak).toMatchObject({
			message: { role: 'nak', response: 'ivo://c.example/d', result: 'No room & no time' }
		});
	});

	it('are written in the schema’s order and read back, with any characters', () => {
		const answer = {
			role: 'ack' as const,
			origin: 'ivo://a.example/b?x=1&y=<2>#"3"',
			response: 'ivo://duskline.example/duskline',
			at: AT,
			result: 'Kept.\u0000 It can’t be read: a < b && c'
		};
		const xml = writeTransport(answer).toString('utf8');
		expect(XMLValidator.validate(xml)).toBe(true);
		expect(xml).toMatch(
			/^<\?xml version="1.0" encoding="UTF-8"\?>\s*<trn:Transport role="ack" version="1.0"/
		);
		expect(xml).toMatch(/<Origin>.*<Response>.*<TimeStamp>.*<Meta><Result>/s);
		expect(readSocketMessage(Buffer.from(xml))).toEqual({
			kind: 'transport',
			message: {
				role: 'ack',
				origin: answer.origin,
				response: answer.response,
				timeStamp: '2026-12-01T04:12:41.000Z',
				result: answer.result.replace('\u0000', '\ufffd')
			}
		});
	});

	it('without a party to answer have no Response', () => {
		const xml = writeTransport({
			role: 'iamalive',
			origin: 'ivo://b.example/b',
			response: '',
			at: AT
		});
		expect(xml.toString()).not.toContain('Response');
	});
});

describe('anything else', () => {
	it('is a packet, known by its IVORN where it can be read', () => {
		expect(
			read(`<?xml version="1.0"?><!-- first --><voe:VOEvent version="2.0" role="test"
				ivorn="ivo://a.example/b?c=1&amp;d=2#e" xmlns:voe="http://www.ivoa.net/xml/VOEvent/v2.0"/>`)
		).toEqual({ kind: 'packet', ivorn: 'ivo://a.example/b?c=1&d=2#e' });
	});

	it.each([
		['text', 'good evening'],
		['broken XML', '<voe:VOEvent ivorn="ivo://a.example/b#c"><What>'],
		['two roots', '<Transport role="ack"/><Transport role="ack"/>'],
		['nothing but a declaration', '<?xml version="1.0"?>'],
		['a packet without IVORN', '<VOEvent version="2.0"/>'],
		['bytes that are no text', '\u0000\u0001\ufffd'],
		[
			'entities within entities',
			`<!DOCTYPE T [<!ENTITY a "aaaaaaaaaa"><!ENTITY b "&a;&a;&a;&a;">]><T>${'&b;'.repeat(9999)}</T>`
		]
	])('that is %s is a packet without IVORN', (_what, text) => {
		expect(read(text)).toEqual({ kind: 'packet', ivorn: null });
	});
});
