#!/usr/bin/env bash
# Sets up and runs Duskline, or its tests, on a Debian machine without containers. See `help` below.
set -euo pipefail

ROOT=$(cd "$(dirname "${BASH_SOURCE[0]}")" && pwd -P)
SELF=./docker-free-dev.sh
LOCAL=$ROOT/.local
RUN_DIR=$LOCAL/run
LOG_DIR=$LOCAL/log
cd "$ROOT"

# shellcheck source=scripts/lib/processes.sh
. scripts/lib/processes.sh
# shellcheck source=scripts/lib/install.sh
. scripts/lib/install.sh
# shellcheck source=scripts/lib/postgres.sh
. scripts/lib/postgres.sh
# shellcheck source=scripts/lib/application.sh
. scripts/lib/application.sh
# shellcheck source=scripts/lib/tests.sh
. scripts/lib/tests.sh

show_help() {
	cat <<TXT
Usage: $SELF [command]

  (none)   set up what is missing, then run Duskline with its demo until Ctrl-C
  dev      the same in watch mode: changes of the source show at once
  test     lint, type check, unit, database and browser tests, on databases and ports of their own
  down     stop what runs from this clone
  reset    stop it and delete the demo's database, secrets and logs
  psql     open the running demo's database; arguments go to psql
  help     this text

Ports, all on 127.0.0.1 (variable, default):
  DUSKLINE_PORT             4180   the application
  DUSKLINE_MAILBOX_PORT     +1     the mailbox page
  DUSKLINE_SMTP_PORT        +2     the mailbox's SMTP
  DUSKLINE_PUSH_PORT        +3     the push service
  DUSKLINE_PUSH_PAGE_PORT   +4     the push service's page
  DUSKLINE_BROKER_PORT      +5     the VOEvent broker
  DUSKLINE_BROKER_PAGE_PORT +6     the VOEvent broker's page
  DUSKLINE_STORAGE_PORT     +7     the object storage
  DUSKLINE_PG_PORT          54329  PostgreSQL

Others: DUSKLINE_FEED=off leaves out the demo feed; LOG_LEVEL (info); DUSKLINE_PG_BIN and
DUSKLINE_CHROMIUM name other programs than Debian's. All data lie under .local/.
TXT
}

read_ports() {
	PORT=${DUSKLINE_PORT:-4180}
	[[ $PORT =~ ^[0-9]{4,5}$ ]] || die "DUSKLINE_PORT is '$PORT'; it must be a port number between 1024 and 65535."
	MAILBOX_PORT=${DUSKLINE_MAILBOX_PORT:-$((PORT + 1))}
	SMTP_PORT=${DUSKLINE_SMTP_PORT:-$((PORT + 2))}
	PUSH_PORT=${DUSKLINE_PUSH_PORT:-$((PORT + 3))}
	PUSH_PAGE_PORT=${DUSKLINE_PUSH_PAGE_PORT:-$((PORT + 4))}
	BROKER_PORT=${DUSKLINE_BROKER_PORT:-$((PORT + 5))}
	BROKER_PAGE_PORT=${DUSKLINE_BROKER_PAGE_PORT:-$((PORT + 6))}
	STORAGE_PORT=${DUSKLINE_STORAGE_PORT:-$((PORT + 7))}
	PG_PORT=${DUSKLINE_PG_PORT:-54329}
}

make_folders() {
	mkdir -p "$LOCAL" 2>/dev/null && [[ -w $LOCAL ]] ||
		die "$LOCAL can't be written by this user (made by root earlier?): start as that user, or remove it."
	chmod 755 "$LOCAL" # PostgreSQL's account passes through; what is secret below is not readable.
	mkdir -p "$RUN_DIR" "$LOG_DIR"
}

# Holds the clone for this command until it ends, however it ends: the lock goes with the process.
hold_clone() {
	exec 9>"$RUN_DIR/lock"
	flock -n 9
}

on_exit() {
	local status=$?
	trap '' INT TERM HUP
	trap - EXIT
	set +e
	if [[ -n ${STOPPING_TEXT:-} ]]; then printf '\n%s\n' "$STOPPING_TEXT"; fi
	end_everything
	rm -f "$RUN_DIR/start.pid" "$RUN_DIR/place"
	exit "$status"
}

stop_on_signals() {
	trap on_exit EXIT
	trap 'exit 130' INT
	trap 'exit 143' TERM
	trap 'exit 129' HUP
}

# run_demo MODE: `built` or `watch`; returns only by a signal or an error.
run_demo() {
	local mode=$1
	check_machine
	read_ports
	make_folders
	if ! hold_clone; then
		say "Duskline already runs from this clone$(running_place). '$SELF down' stops it."
		exit 0
	fi
	stop_on_signals
	end_leftovers
	record start $$
	require_free_ports
	ensure_postgres
	ensure_npm_packages
	start_postgres
	export_environment
	start_fakes
	printf 'ORIGIN=%s\nPG_PORT=%s\n' "$ORIGIN" "$PG_PORT" >"$RUN_DIR/place"
	migrate_and_seed
	if [[ $mode == watch ]]; then
		await_fakes
		start_watching
	else
		ensure_build
		install_build
		await_fakes
		start_application
	fi
	print_welcome
	start_feed
	STOPPING_TEXT='Stopping'
	watch_over app mailbox push broker storage postgres
}

# Ends what an earlier start left running when it was cut off.
end_leftovers() {
	local file
	for file in "$RUN_DIR"/*.pid; do
		[[ -e $file ]] || continue
		if [[ $file != */start.pid ]] && is_running "$(basename "$file" .pid)"; then
			say 'Ending what an earlier start left running'
			break
		fi
	done
	rm -f "$RUN_DIR/start.pid" "$RUN_DIR/place"
	end_everything
}

# Waits until one of the named processes ends by itself, which is an error, or a signal comes.
watch_over() {
	local name
	while :; do
		for name in "$@"; do
			if ! is_running "$name"; then
				show_log "$LOG_DIR/$name.log"
				die "The process '$name' ended by itself; its last lines are above."
			fi
		done
		sleep 1 9>&- &
		wait $! || true
	done
}

running_place() {
	[[ ! -f $RUN_DIR/place ]] || sed -n 's/^ORIGIN=/ at /p' "$RUN_DIR/place"
}

stop_demo() {
	[[ -d $RUN_DIR ]] || {
		say 'Nothing runs from this clone.'
		return 0
	}
	if hold_clone; then
		end_leftovers
		say 'Nothing runs from this clone.'
		return 0
	fi
	if is_running start; then
		local pid
		read -r pid _ <"$RUN_DIR/start.pid"
		kill -TERM "$pid" 2>/dev/null || true
	fi
	flock -w 60 9 || die "The running start does not end; its process is named in $RUN_DIR/start.pid."
	say 'Stopped.'
}

reset_demo() {
	stop_demo
	if [[ -t 0 ]]; then
		local answer
		read -r -p "Delete the demo's database, secrets and logs in this clone? [y/N] " answer
		[[ $answer == [yY]* ]] || die 'Nothing was deleted.'
	fi
	if [[ -L $LOCAL/postgres ]]; then
		local target
		target=$(readlink "$LOCAL/postgres")
		[[ $target != /var/lib/duskline-* ]] || rm -rf "$target"
	fi
	rm -rf "$LOCAL"/{postgres,env,push,app,log,demo-keys.json}
	say "Deleted. '$SELF' begins anew."
}

open_psql() {
	[[ -d $RUN_DIR ]] && ! hold_clone && [[ -f $RUN_DIR/place ]] ||
		die "The demo's database does not run: start it with '$SELF' in another terminal."
	PG_PORT=$(sed -n 's/^PG_PORT=//p' "$RUN_DIR/place")
	locate_cluster
	PG_BIN=$(postgres_bin) || die 'psql is missing: install postgresql-client.'
	exec 9>&-
	PGPASSWORD=$(cat "$PG_HOME/password") exec "$PG_BIN/psql" -h 127.0.0.1 -p "$PG_PORT" -U duskline duskline "$@"
}

command=${1:-start}
(($# == 0)) || shift
case $command in
	start) run_demo built ;;
	dev) run_demo watch ;;
	test) run_tests ;;
	down) stop_demo ;;
	reset) reset_demo ;;
	psql) open_psql "$@" ;;
	help | -h | --help) show_help ;;
	*) die "There is no command '$command'; '$SELF help' lists them." ;;
esac
