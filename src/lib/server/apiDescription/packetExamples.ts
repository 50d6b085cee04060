import { INSTANT_EXAMPLE } from '../../domain/answers/exampleValues';

const centre = { raDeg: 83.42, decDeg: -8.2 };

const report = (packetId: string, shape: object) => ({
	packetId,
	serial: 1,
	role: 'observation',
	kind: 'report',
	t0: INSTANT_EXAMPLE,
	shape
});

/** One packet of each shape, an update and a retraction. */
export const PACKET_EXAMPLES: Record<string, unknown> = {
	circle: {
		...report('TB-1', { kind: 'circle', centre, radiusDeg: 3, containment: 0.9, systematicDeg: 1 }),
		significance: 8.1,
		falseAlarmPerYear: 0.2,
		remarks: 'Flight software position.'
	},
	hardCircle: report('CP-1', { kind: 'hardCircle', centre, radiusDeg: 0.05 }),
	ellipse: report('TB-2', {
		kind: 'ellipse',
		centre,
		semiMajorDeg: 4,
		semiMinorDeg: 1.5,
		positionAngleDeg: 35,
		containment: 0.9
	}),
	annulus: report('TB-3', {
		kind: 'annulus',
		centre,
		radiusDeg: 24.5,
		halfWidthDeg: 0.4,
		containment: 0.9
	}),
	polygon: report('TB-4', {
		kind: 'polygon',
		vertices: [
			{ raDeg: 82, decDeg: -9 },
			{ raDeg: 85, decDeg: -9 },
			{ raDeg: 84, decDeg: -6 }
		]
	}),
	mapOfSeveralOrders: report('TB-5', {
		kind: 'map',
		uniq: [1105, 1106, 278],
		density: [20.5, 31, 2.25]
	}),
	mapOfOneOrder: report('TB-6', {
		kind: 'map',
		order: 0,
		ordering: 'ring',
		frame: 'galactic',
		probability: [0, 0, 0.1, 0, 0, 0.2, 0.6, 0.1, 0, 0, 0, 0]
	}),
	update: {
		...report('TB-1', { kind: 'circle', centre, radiusDeg: 1.2, containment: 0.9 }),
		serial: 2,
		kind: 'update',
		cites: [{ stream: 'tambour', packetId: 'TB-1', relation: 'supersedes' }]
	},
	retraction: {
		packetId: 'TB-7',
		serial: 1,
		role: 'observation',
		kind: 'retraction',
		t0: INSTANT_EXAMPLE,
		cites: [{ stream: 'tambour', packetId: 'TB-1', relation: 'retraction' }],
		remarks: 'Particle event.'
	}
};

/** IVOA VOEvent 2.0, with the error radius that its schema asks for. */
export const VOEVENT_EXAMPLE = `<?xml version="1.0" encoding="UTF-8"?>
<voe:VOEvent xmlns:voe="http://www.ivoa.net/xml/VOEvent/v2.0" version="2.0"
    role="observation" ivorn="ivo://tambour.example/alerts#TB-1">
  <Who><Date>2026-12-01T03:41:40Z</Date></Who>
  <WhereWhen>
    <ObsDataLocation>
      <ObservatoryLocation id="tambour"/>
      <ObservationLocation>
        <AstroCoordSystem id="UTC-ICRS-GEO"/>
        <AstroCoords coord_system_id="UTC-ICRS-GEO">
          <Time unit="s"><TimeInstant><ISOTime>2026-12-01T03:41:27</ISOTime></TimeInstant></Time>
          <Position2D unit="deg">
            <Name1>RA</Name1><Name2>Dec</Name2>
            <Value2><C1>83.42</C1><C2>-8.2</C2></Value2>
            <Error2Radius>3</Error2Radius>
          </Position2D>
        </AstroCoords>
      </ObservationLocation>
    </ObsDataLocation>
  </WhereWhen>
</voe:VOEvent>
`;
