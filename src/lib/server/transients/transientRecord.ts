import type { TransientRecord } from '../../domain/answers/transientRecord';
import type { BoardOutlook } from '../../domain/board';
import type { Shape } from '../../sky/regions/shape';
import type { TransientDetail } from './transientDetail';

/** Everything about one transient as the API gives it: the page's own parts (night strips, raw packets) left out. */
export function transientRecord({
	transient,
	regions,
	alerts,
	circulars,
	journal
}: TransientDetail): TransientRecord {
	return {
		designation: transient.designation,
		state: transient.state,
		isTest: transient.isTest,
		isDrill: transient.isDrill,
		t0: transient.t0,
		firstReceivedAt: transient.firstReceivedAt,
		headline: transient.headline,
		taken: transient.taken,
		decision: transient.decision,
		region: transient.region,
		regions,
		alerts: alerts.map((alert) => ({
			id: alert.id,
			packetId: alert.packetId,
			serial: alert.serial,
			streamCode: alert.streamCode,
			streamName: alert.streamName,
			role: alert.role,
			kind: alert.kind,
			t0: alert.t0,
			receivedAt: alert.receivedAt,
			live: alert.live,
			membership: alert.membership,
			logOdds: alert.logOdds,
			shape: shapeOf(alert.shape),
			significance: alert.significance,
			falseAlarmPerYear: alert.falseAlarmPerYear,
			remarks: alert.remarks
		})),
		outlook: transient.outlook && outlookOf(transient.outlook),
		slots: transient.slots,
		reports: transient.reports,
		circulars,
		journal
	};
}

function shapeOf(shape: Shape | null): TransientRecord['alerts'][number]['shape'] {
	return shape?.kind === 'map' ? { kind: 'map' } : shape;
}

function outlookOf(outlook: BoardOutlook): TransientRecord['outlook'] {
	return {
		computedAt: outlook.computedAt,
		regionVersion: outlook.regionVersion,
		networkCatch: outlook.networkCatch,
		costOfWaitingPoints: outlook.costOfWaitingPoints,
		fade: outlook.fade,
		order: outlook.order,
		rows: outlook.rows.map((row) => ({
			telescopeCode: row.telescopeCode,
			catch: row.catch,
			reach: row.reach,
			opensAt: row.opensAt,
			windows: row.windows,
			whyNot: row.whyNot,
			forbidden: row.forbidden,
			atOpening: row.atOpening,
			tiles: row.tiles
		}))
	};
}
