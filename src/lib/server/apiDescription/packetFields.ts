/**
 * What each field of an alert packet means. A shape's own fields are written `shape(kind).field`, as the schema has one
 * variant for each kind; a test holds that no field is without words.
 */
export const PACKET_FIELDS: Record<string, string> = {
	packetId: 'The stream’s own name for the event: all packets about it share it',
	serial:
		'1 for the first packet, one more for each that follows; same id and serial is the same packet',
	role: 'observation, or test: shown as such, never counted and never sent to partners',
	kind: 'report, update (replaces what the stream said before) or retraction',
	cites: 'Earlier packets that this one is about',
	'cites.stream': 'Code of the stream that sent it',
	'cites.packetId': 'Its packetId there',
	'cites.relation': 'followup of the same event, supersedes it, or retraction',
	t0: 'When the trigger was, ISO 8601 with its zone',
	shape: 'Where the source can be; needed except in a retraction, which must have none',
	significance: 'Of the trigger, in standard deviations',
	falseAlarmPerYear: 'How many false alarms this loud the stream sends in a year',
	remarks: 'Plain text for the people who read it',

	'shape(circle)': 'A Gaussian error circle',
	'shape(circle).centre': 'Its centre, ICRS',
	'shape(circle).radiusDeg': 'Holds the share containment of the probability',
	'shape(circle).containment': 'Share inside the radius, between 0 and 1, statistical only',
	'shape(circle).systematicDeg':
		'Systematic error, one standard deviation per axis; added in quadrature',
	'shape(hardCircle)': 'Certainly inside, equally likely everywhere',
	'shape(hardCircle).centre': 'Its centre, ICRS',
	'shape(hardCircle).radiusDeg': 'Its edge',
	'shape(ellipse)': 'A Gaussian error ellipse',
	'shape(ellipse).centre': 'Its centre, ICRS',
	'shape(ellipse).semiMajorDeg': 'Half the long axis of the ellipse that holds containment',
	'shape(ellipse).semiMinorDeg': 'Half its short axis',
	'shape(ellipse).positionAngleDeg': 'Of the long axis, from north through east',
	'shape(ellipse).containment': 'Share inside the ellipse, between 0 and 1',
	'shape(annulus)': 'A ring, as the delay between two detectors gives it; Gaussian across',
	'shape(annulus).centre': 'Centre of the ring, ICRS',
	'shape(annulus).radiusDeg': 'From the centre to the middle of the ring',
	'shape(annulus).halfWidthDeg': 'Either side of the radius; holds containment',
	'shape(annulus).containment': 'Share inside the ring, between 0 and 1',
	'shape(polygon)': 'Equally likely inside, edges are great circles',
	'shape(polygon).vertices': 'Corners in order, ICRS; the last joins the first',
	'shape(map)': 'A probability map on HEALPix: uniq and density, or every pixel of one order',
	'shape(map).uniq': 'Cells of several orders as UNIQ numbers, 4 · 4^order + index, NESTED',
	'shape(map).order': 'Order of a map with every pixel; or nside',
	'shape(map).nside': 'The same as a power of 2; not beside order',
	'shape(map).ordering': 'Of a map with every pixel: nested or ring',
	'shape(map).frame': 'icrs or galactic; uniq is ICRS unless this says otherwise',
	'shape(map).density': 'Probability per steradian, one number a cell',
	'shape(map).probability':
		'Instead of density, in a map with every pixel: probability of the pixel',
	raDeg: 'Right ascension',
	decDeg: 'Declination'
};
