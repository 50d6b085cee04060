# Messages, locks, and processes that are started, known again and ended by their id.
# shellcheck shell=bash
# shellcheck disable=SC2154 # RUN_DIR is set by the command that sources this.

say() { printf '%s\n' "$*"; }
warn() { printf 'duskline: %s\n' "$*" >&2; }
die() {
	warn "$*"
	exit 1
}

# Last lines of a log, indented, for a message that says what went wrong.
show_log() {
	[[ -s $1 ]] || return 0
	tail -n "${2:-15}" "$1" | sed 's/^/    /' >&2
	printf '    (all of it: %s)\n' "$1" >&2
}

# Start time of a live process in clock ticks since boot (proc(5), field 22 of stat). With it an id is
# known again: one that the kernel has given to another process since is never signalled.
start_time() {
	local stat fields
	stat=$(cat "/proc/$1/stat" 2>/dev/null) || return 1
	read -ra fields <<<"${stat##*) }" # The name before the bracket may hold spaces.
	[[ ${fields[0]} != Z ]] || return 1
	printf '%s' "${fields[19]}"
}

# is_running NAME: whether the process recorded under that name still is the one that was started.
is_running() {
	local pid='' started=''
	[[ -f $RUN_DIR/$1.pid ]] || return 1
	read -r pid started _ <"$RUN_DIR/$1.pid" || true
	[[ $pid =~ ^[0-9]+$ && -n $started && $(start_time "$pid") == "$started" ]]
}

# record NAME PID: written in one move, so that a reader never sees half of it.
record() {
	printf '%s %s\n' "$2" "$(start_time "$2")" >"$RUN_DIR/$1.pid.new"
	mv -f "$RUN_DIR/$1.pid.new" "$RUN_DIR/$1.pid"
}

# spawn NAME LOG COMMAND…: in a session of its own, so that the terminal's Ctrl-C reaches this script
# alone, which then ends everything in order; and ended by the kernel if this script is killed outright.
# LOG may be - for the terminal. PARENT_DEATH_SIGNAL and PRIVILEGES (options of setpriv) may be set.
spawn() {
	local name=$1 log=$2
	shift 2
	local -a wrapped=(setsid setpriv ${PRIVILEGES[@]+"${PRIVILEGES[@]}"}
		--pdeathsig "${PARENT_DEATH_SIGNAL:-TERM}" -- "$@")
	if [[ $log == - ]]; then
		"${wrapped[@]}" </dev/null 9>&- &
	else
		"${wrapped[@]}" >>"$log" 2>&1 </dev/null 9>&- &
	fi
	record "$name" $!
}

# run_step NAME LOG COMMAND…: like spawn, then waits; a signal to this script ends the wait at once.
run_step() {
	local name=$1 status=0
	spawn "$@"
	wait $! || status=$?
	end_session $!
	rm -f "$RUN_DIR/$name.pid"
	return "$status"
}

# end_session PID: ends what a process that is gone left in its session, as a runner's busy worker may be.
# Its id is not given to another process while the session has members.
end_session() {
	local tenths=50
	[[ ! -e /proc/$1 ]] || return 0
	kill -TERM -- "-$1" 2>/dev/null || return 0
	while ((tenths-- > 0)); do
		kill -0 -- "-$1" 2>/dev/null || return 0
		sleep 0.1
	done
	kill -KILL -- "-$1" 2>/dev/null || true
}

# end_process NAME [SIGNAL] [SECONDS]: asks, waits, then ends the whole session of the process.
end_process() {
	local name=$1 signal=${2:-TERM} tenths=$((${3:-10} * 10)) pid
	if is_running "$name"; then
		read -r pid _ <"$RUN_DIR/$name.pid"
		kill -s "$signal" "$pid" 2>/dev/null || true
		while ((tenths-- > 0)) && is_running "$name"; do sleep 0.1; done
		if is_running "$name"; then kill -KILL -- "-$pid" 2>/dev/null || true; fi
		# Not yet reaped, its id stands as a zombie's until this shell waits for it.
		wait "$pid" 2>/dev/null || true
		end_session "$pid"
	fi
	rm -f "$RUN_DIR/$name.pid"
}

# Ends what is recorded, the database last; what a start that was cut off left behind included.
end_everything() {
	local file name
	for name in feed app workers storage broker push mailbox; do end_process "$name"; done
	for file in "$RUN_DIR"/*.pid; do
		name=$(basename "$file" .pid)
		[[ -e $file && $name != start && $name != postgres ]] && end_process "$name"
	done
	# SIGINT is PostgreSQL's fast shutdown: connections are ended, the data is written.
	end_process postgres INT 30
}

port_answers() { (exec 3<>"/dev/tcp/127.0.0.1/$1") 2>/dev/null; }

# require_free_port PORT PURPOSE VARIABLE
require_free_port() {
	local port=$1 purpose=$2 variable=$3 other holder=''
	[[ $port =~ ^[0-9]+$ ]] && ((port >= 1024 && port <= 65535)) ||
		die "$variable is '$port'; it must be a port number between 1024 and 65535."
	port_answers "$port" || return 0
	if command -v ss >/dev/null; then
		holder=$(ss -ltnpH "sport = :$port" 2>/dev/null |
			sed -n 's/.*users:(("\([^"]*\)",pid=\([0-9]*\).*/ by \1 (process \2)/p' | head -n 1)
	fi
	other=$((port + 10))
	while port_answers "$other"; do other=$((other + 10)); done
	die "Port $port ($purpose) is in use$holder. Stop that, or choose another: $variable=$other $SELF"
}

# http_ok PORT PATH: whether the address answers 200.
http_ok() {
	local status=''
	{
		exec 3<>"/dev/tcp/127.0.0.1/$1" || return 1
		printf 'GET %s HTTP/1.1\r\nHost: 127.0.0.1:%s\r\nConnection: close\r\n\r\n' "$2" "$1" >&3
		read -r -t 5 status <&3 || true
		exec 3<&- 3>&-
	} 2>/dev/null
	[[ $status == *' 200'* ]]
}

# wait_until_answers NAME PORT PATH SECONDS LOG
wait_until_answers() {
	local name=$1 port=$2 path=$3 tenths=$(($4 * 10)) log=$5
	until http_ok "$port" "$path"; do
		if ! is_running "$name"; then
			show_log "$log"
			die "The process '$name' ended before it answered; its last lines are above."
		fi
		if ((tenths-- <= 0)); then
			show_log "$log"
			die "Port $port did not answer within $4 s; the last lines of '$name' are above."
		fi
		sleep 0.1
	done
}
