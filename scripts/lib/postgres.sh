# The PostgreSQL cluster of this clone: its data under .local/postgres, scram passwords, loopback only.
# shellcheck shell=bash
# shellcheck disable=SC2154 # ROOT, LOCAL, LOG_DIR, RUN_DIR and PG_PORT are set by the command.

# Where the cluster lives and who runs it: sets PG_HOME and PG_ACCOUNT (empty: this user).
# PostgreSQL refuses to run as root, so root hands it to an account without privileges, which may not be
# able to enter the folder the clone lies in; then the data goes to /var/lib, and .local points there.
locate_cluster() {
	local link=$LOCAL/postgres elsewhere
	PG_HOME=$link
	PG_ACCOUNT=''
	if ((EUID != 0)); then
		mkdir -p "$PG_HOME"
		chmod 700 "$PG_HOME/"
		[[ -O $PG_HOME/ ]] || die "The database in .local/postgres belongs to another user (an earlier start as root?): start as that user, or run 'sudo $SELF reset'."
		return
	fi
	PG_ACCOUNT=postgres
	id -u postgres >/dev/null 2>&1 || PG_ACCOUNT=nobody
	elsewhere=/var/lib/duskline-$(printf '%s' "$ROOT" | sha256sum | cut -c1-12)
	if [[ ! -L $link ]]; then
		mkdir -p "$link"
		chmod 700 "$link"
		# Data made by a start without root stays with the user it belongs to.
		if [[ -d $link/data && $(stat -c %u "$link/data") != 0 ]]; then
			PG_ACCOUNT=$(stat -c %U "$link/data")
		fi
		chown "$PG_ACCOUNT" "$link" 2>/dev/null || true
		if as_postgres test -w "$link" 2>/dev/null; then return 0; fi
		rmdir "$link" 2>/dev/null ||
			die "PostgreSQL's account $PG_ACCOUNT can no longer reach $link: move the clone back, or run '$SELF reset'."
	fi
	PG_HOME=$elsewhere
	if [[ ! -d $PG_HOME ]]; then
		say "The database goes to $PG_HOME: PostgreSQL may not run as root, and $PG_ACCOUNT can't enter $ROOT"
		mkdir -m 700 "$PG_HOME"
	fi
	chown "$PG_ACCOUNT" "$PG_HOME"
	ln -sfn "$PG_HOME" "$link"
}

# Options of setpriv that drop root's privileges; none for another user.
postgres_privileges() {
	PRIVILEGES=()
	[[ -z $PG_ACCOUNT ]] || PRIVILEGES=(--reuid "$(id -u "$PG_ACCOUNT")" --regid "$(id -g "$PG_ACCOUNT")" --clear-groups)
}

as_postgres() {
	local -a PRIVILEGES
	postgres_privileges
	if ((${#PRIVILEGES[@]})); then setpriv "${PRIVILEGES[@]}" -- env -C / "$@"; else "$@"; fi
}

database_url() {
	printf 'postgres://duskline:%s@127.0.0.1:%s/duskline' "$(cat "$PG_HOME/password")" "$PG_PORT"
}

run_psql() {
	PGPASSWORD=$(cat "$PG_HOME/password") "$PG_BIN/psql" -X -h 127.0.0.1 -p "$PG_PORT" -U duskline "$@"
}

create_cluster() {
	say 'Making the database cluster'
	# Made beside its place and moved there when whole: a start cut off here begins again.
	rm -rf "$PG_HOME/data.new" "$PG_HOME/password"
	(umask 077 && node -p 'require("node:crypto").randomBytes(18).toString("base64url")' >"$PG_HOME/password")
	[[ -z $PG_ACCOUNT ]] || chown "$PG_ACCOUNT" "$PG_HOME/password"
	as_postgres "$PG_BIN/initdb" -D "$PG_HOME/data.new" -U duskline --auth=scram-sha-256 \
		--pwfile="$PG_HOME/password" --encoding=UTF8 --locale=C.UTF-8 >"$LOG_DIR/initdb.log" 2>&1 || {
		show_log "$LOG_DIR/initdb.log"
		die "The database cluster could not be made; initdb's last lines are above."
	}
	mv "$PG_HOME/data.new" "$PG_HOME/data"
}

# A postmaster of this very data folder that an earlier start left behind is ended; a stale file that
# names a process of somebody else's is removed, as PostgreSQL would refuse to start over it.
clear_stale_postmaster() {
	local file=$PG_HOME/data/postmaster.pid pid='' tenths=300
	[[ -f $file ]] || return 0
	read -r pid <"$file" || true
	if [[ $pid =~ ^[0-9]+$ && -r /proc/$pid/cmdline ]] &&
		tr '\0' '\n' <"/proc/$pid/cmdline" | grep -qxF -- "$PG_HOME/data"; then
		say 'Ending the database that an earlier start left running'
		kill -INT "$pid" 2>/dev/null || true
		while ((tenths-- > 0)) && kill -0 "$pid" 2>/dev/null; do sleep 0.1; done
		! kill -0 "$pid" 2>/dev/null || die "PostgreSQL (process $pid) does not end: stop it by hand, then start again."
	fi
	rm -f "$file"
}

start_postgres() {
	local version='' tenths=600
	locate_cluster
	if [[ -f $PG_HOME/data/PG_VERSION ]]; then version=$(<"$PG_HOME/data/PG_VERSION"); fi
	PG_BIN=$(postgres_bin "$version") ||
		die "The data in .local/postgres is of PostgreSQL $version, which is not installed: install postgresql-$version, or run '$SELF reset'."
	if [[ -z $version || ! -s $PG_HOME/password ]]; then
		[[ -z $version ]] || die "The database's password is missing beside its data: run '$SELF reset' to make both anew."
		create_cluster
	fi
	clear_stale_postmaster
	require_free_port "$PG_PORT" PostgreSQL DUSKLINE_PG_PORT

	local -a PRIVILEGES
	postgres_privileges
	: >"$LOG_DIR/postgres.log"
	PARENT_DEATH_SIGNAL=INT spawn postgres "$LOG_DIR/postgres.log" env -C / "$PG_BIN/postgres" \
		-D "$PG_HOME/data" -p "$PG_PORT" -c listen_addresses=127.0.0.1 -c unix_socket_directories= \
		-c timezone=UTC -c log_timezone=UTC
	until run_psql -qtA -c 'select 1' postgres >/dev/null 2>&1; do
		if ! is_running postgres || ((tenths-- <= 0)); then
			show_log "$LOG_DIR/postgres.log"
			die "PostgreSQL did not start; its last lines are above."
		fi
		sleep 0.1
	done
	if [[ $(run_psql -qtA -c "select 1 from pg_database where datname = 'duskline'" postgres) != 1 ]]; then
		rm -f "$PG_HOME/migrated" "$PG_HOME/seeded"
		run_psql -q -c 'create database duskline' postgres
	fi
}
