import { execFile, spawn } from 'node:child_process';
import {
	chmodSync,
	cpSync,
	mkdirSync,
	mkdtempSync,
	readFileSync,
	rmSync,
	writeFileSync
} from 'node:fs';
import { createServer, type AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { promisify } from 'node:util';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';

const run = promisify(execFile);

/** A folder with nothing but the command in it, so that no test touches the clone's own state. */
let clone: string;

beforeEach(() => {
	clone = mkdtempSync(join(tmpdir(), 'duskline-start-'));
	cpSync('docker-free-dev.sh', join(clone, 'docker-free-dev.sh'));
	cpSync('scripts/lib', join(clone, 'scripts/lib'), { recursive: true });
});
afterEach(() => rmSync(clone, { recursive: true, force: true }));

type Outcome = { code: number; stdout: string; stderr: string };

async function command(args: string[], environment: Record<string, string> = {}): Promise<Outcome> {
	try {
		const { stdout, stderr } = await run('./docker-free-dev.sh', args, {
			cwd: clone,
			env: { PATH: process.env.PATH, HOME: clone, ...environment }
		});
		return { code: 0, stdout, stderr };
	} catch (error) {
		return error as Outcome;
	}
}

/** Runs lines of bash with the process functions loaded and a folder for process files. */
async function withProcesses(script: string): Promise<string> {
	const lines = `set -euo pipefail; RUN_DIR=${clone}/run; mkdir -p $RUN_DIR; . scripts/lib/processes.sh; ${script}`;
	const { stdout } = await run('bash', ['-c', lines], { cwd: clone });
	return stdout.trim();
}

const lines = (text: string) => text.trim().split('\n');

// The command runs many small programs, each slow to start on a busy machine.
const PATIENCE = { timeout: 60_000 };

describe('the start command', PATIENCE, () => {
	it('lists its commands and refuses others in one line', async () => {
		const help = await command(['help']);
		for (const name of ['dev', 'test', 'down', 'reset', 'psql', 'help']) {
			expect(help.stdout).toMatch(new RegExp(`^  ${name} `, 'm'));
		}
		const other = await command(['stop']);
		expect(other.code).toBe(1);
		expect(lines(other.stderr)).toHaveLength(1);
		expect(other.stderr).toContain("'./docker-free-dev.sh help'");
	});

	it('says which Node.js is needed when there is an old one', async () => {
		const bin = join(clone, 'bin');
		mkdirSync(bin);
		writeFileSync(join(bin, 'node'), '#!/bin/sh\necho 18.19.0\n');
		chmodSync(join(bin, 'node'), 0o755);
		const outcome = await command([], { PATH: `${bin}:/usr/bin:/bin` });
		expect(outcome.code).toBe(1);
		expect(lines(outcome.stderr)).toEqual([
			'duskline: Node.js is 18.19.0, Duskline needs 20.19 to 22: install Node.js 20, then start again.'
		]);
	});

	it('names a busy port, what it is for and another to use', async () => {
		const server = createServer().listen(0, '127.0.0.1');
		await new Promise((resolve) => server.once('listening', resolve));
		const { port } = server.address() as AddressInfo;
		const outcome = await command([], { DUSKLINE_PORT: String(port) });
		server.close();
		expect(outcome.code).toBe(1);
		expect(lines(outcome.stderr)).toHaveLength(1);
		expect(outcome.stderr).toContain(`Port ${port} (the application) is in use`);
		expect(outcome.stderr).toMatch(/DUSKLINE_PORT=\d+ \.\/docker-free-dev\.sh/);
	});

	it('refuses what is no port, and has nothing to stop where nothing runs', async () => {
		for (const DUSKLINE_PORT of ['80', '4180x', '99999']) {
			const outcome = await command([], { DUSKLINE_PORT });
			expect(outcome.code).toBe(1);
			expect(outcome.stderr).toContain('DUSKLINE_PORT');
		}
		expect((await command(['down'])).stdout).toContain('Nothing runs');
		const psql = await command(['psql']);
		expect(psql.code).toBe(1);
		expect(lines(psql.stderr)).toHaveLength(1);
	});
});

describe('a process of the start command', PATIENCE, () => {
	it('is known by id and start time, so that a reused id is never signalled', async () => {
		const bystander = spawn('sleep', ['60']);
		const pid = bystander.pid!;
		await withProcesses(`echo "${pid} 1" >$RUN_DIR/app.pid; end_process app`);
		expect(readFileSync(`/proc/${pid}/stat`, 'utf8')).toMatch(/\(sleep\) [^Z]/);
		expect(bystander.signalCode).toBeNull();
		bystander.kill();
	});

	it('is ended with its whole session, a worker that ignores the request included', async () => {
		const worker = `bash -c 'trap "" TERM; echo $$ >${clone}/worker; while :; do sleep 0.1; done'`;
		const output = await withProcesses(
			`spawn app - bash -c '${worker.replaceAll("'", `'"'"'`)} & wait'
			until [[ -s ${clone}/worker ]]; do sleep 0.1; done
			end_process app TERM 1
			worker=$(cat ${clone}/worker)
			start_time "$worker" >/dev/null && echo alive || echo ended`
		);
		expect(output).toBe('ended');
	});

	it('passes on the exit code of a step and forgets it', async () => {
		const output = await withProcesses(
			`run_step build - bash -c 'exit 7' || echo "code $?"; ls $RUN_DIR`
		);
		expect(output).toBe('code 7');
	});
});
