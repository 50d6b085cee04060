/** Prints the cases that `gen_windows1s.py` samples, as JSON: the same numbers that the tests use. */
import { awkwardCases } from '../src/lib/sky/visibility/checks/awkwardCases';
import { boundaryCases } from '../src/lib/sky/visibility/checks/boundaryCases';
import {
	endMsOf,
	limitsOf,
	startMsOf,
	type Case
} from '../src/lib/sky/visibility/checks/observingCase';

const question = (one: Case) => ({
	name: one.name,
	site: one.site,
	position: one.position,
	startMs: startMsOf(one),
	endMs: endMsOf(one),
	limits: limitsOf(one),
	closures: one.closures ?? []
});

process.stdout.write(JSON.stringify([...awkwardCases, ...boundaryCases].map(question)) + '\n');
