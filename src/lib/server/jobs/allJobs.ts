import { fillAlertSkyJob } from '../alerts/fillAlertSkyJob';
import { deliverCircularJob } from '../circulars/deliverCircularJob';
import { failForgottenDeliveriesJob } from '../circulars/failForgottenDeliveriesJob';
import { mailPersonJob, pushPersonJob } from '../notify/tellPerson';
import { refreshOutlookJob } from '../outlook/refreshOutlookJob';
import { refreshOutlooksJob } from '../outlook/refreshOutlooksJob';
import { resumePacketsJob } from '../packets/resumePacketsJob';
import { sendInvitationJob } from '../people/sendInvitationJob';
import { silentStreamsJob } from '../streams/silentStreamsJob';
import type { Job } from './queue';

/** Every kind of job. The payload type is each job's own business. */
export const ALL_JOBS = [
	fillAlertSkyJob,
	refreshOutlookJob,
	refreshOutlooksJob,
	deliverCircularJob,
	failForgottenDeliveriesJob,
	resumePacketsJob,
	silentStreamsJob,
	mailPersonJob,
	pushPersonJob,
	sendInvitationJob
] as unknown as Job<unknown>[];
