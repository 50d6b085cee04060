# What must be on the machine: Node.js (checked), Debian packages and npm packages (installed).
# shellcheck shell=bash
# shellcheck disable=SC2154 # ROOT, LOCAL and LOG_DIR are set by the command that sources this.

check_machine() {
	local tool version major minor
	[[ $(uname -s) == Linux ]] || die "This command is for Linux (Debian 12 is what it is tried on)."
	for tool in setsid setpriv flock sha256sum; do
		command -v "$tool" >/dev/null ||
			die "The tool '$tool' is missing: install Debian's packages util-linux and coreutils, then start again."
	done
	command -v node >/dev/null ||
		die "Node.js is missing: install Node.js 20 (20.19 or later, with npm), then start again."
	version=$(node -p 'process.versions.node' 2>/dev/null) || version=unknown
	IFS=. read -r major minor _ <<<"$version"
	if ! [[ $major =~ ^[0-9]+$ && $minor =~ ^[0-9]+$ ]] ||
		((major < 20 || major > 22 || (major == 20 && minor < 19))); then
		die "Node.js is $version, Duskline needs 20.19 to 22: install Node.js 20, then start again."
	fi
	command -v npm >/dev/null ||
		die "npm is missing beside Node.js $version: install it (Debian's package npm, or Node.js from its own packages), then start again."
}

# postgres_bin: the folder of PostgreSQL's programs, of the version the data were made by if there are any.
# shellcheck disable=SC2120
postgres_bin() {
	local wanted=${1:-} directory version best=''
	if [[ -n ${DUSKLINE_PG_BIN:-} ]]; then
		[[ -x $DUSKLINE_PG_BIN/initdb ]] && printf '%s' "$DUSKLINE_PG_BIN"
		return
	fi
	for directory in /usr/lib/postgresql/*/bin; do
		[[ -x $directory/initdb && -x $directory/postgres ]] || continue
		version=$(basename "$(dirname "$directory")")
		[[ $version =~ ^[0-9]+$ ]] && ((version >= 15)) || continue
		if [[ -n $wanted ]]; then
			[[ $version == "$wanted" ]] && best=$directory
		elif [[ -z $best ]]; then
			best=$directory
		fi
	done
	[[ -n $best ]] && printf '%s' "$best"
}

# shellcheck disable=SC2119
ensure_postgres() {
	[[ -n $(postgres_bin) ]] && return
	[[ -z ${DUSKLINE_PG_BIN:-} ]] || die "DUSKLINE_PG_BIN is $DUSKLINE_PG_BIN, but there is no initdb in it."
	require_install_rights postgresql-15
	say 'Installing PostgreSQL from Debian (about a minute)'
	# Debian's package makes and starts a system cluster of its own unless told otherwise; none is wanted here.
	local dropin=/etc/postgresql-common/createcluster.d/duskline.conf
	as_root mkdir -p "$(dirname "$dropin")"
	printf 'create_main_cluster = false\n' | as_root tee "$dropin" >/dev/null
	local status=0
	apt_install postgresql-15 || apt_install postgresql || status=$?
	as_root rm -f "$dropin"
	((status == 0)) && [[ -n $(postgres_bin) ]] || {
		show_log "$LOG_DIR/apt.log"
		die "PostgreSQL could not be installed: run 'apt-get install postgresql-15' by hand, then start again."
	}
}

chromium_path() { printf '%s' "${DUSKLINE_CHROMIUM:-/usr/bin/chromium}"; }

ensure_chromium() {
	[[ -x $(chromium_path) ]] && return
	[[ -z ${DUSKLINE_CHROMIUM:-} ]] || die "DUSKLINE_CHROMIUM is $DUSKLINE_CHROMIUM, which can't be run."
	require_install_rights chromium
	say 'Installing Chromium from Debian for the browser tests (about a minute)'
	apt_install chromium || {
		show_log "$LOG_DIR/apt.log"
		die "Chromium could not be installed: run 'apt-get install chromium' by hand, then start again."
	}
}

# The tests of VOEvents use it. They say so and go on where it can't be had.
ensure_xmllint() {
	command -v xmllint >/dev/null && return
	if ! command -v apt-get >/dev/null || { ((EUID != 0)) && ! sudo -n true 2>/dev/null; }; then
		say 'xmllint is missing (Debian package libxml2-utils): VOEvents are not checked against their schema.'
		return
	fi
	say 'Installing xmllint from Debian for the tests of VOEvents'
	apt_install libxml2-utils ||
		say "xmllint could not be installed; see $LOG_DIR/apt.log. VOEvents are not checked against their schema."
}

# as_root COMMAND…: directly, or by sudo. Not in a session of its own: sudo may ask for the password.
as_root() {
	if ((EUID == 0)); then "$@"; else sudo "$@"; fi
}

# require_install_rights PACKAGE: ends with the way out when this user or machine can't install it.
require_install_rights() {
	command -v apt-get >/dev/null ||
		die "$1 is missing and this machine has no apt-get: install it with the machine's own tool, then start again."
	((EUID != 0)) || return 0
	command -v sudo >/dev/null && { [[ -t 0 ]] || sudo -n true 2>/dev/null; } ||
		die "$1 is missing and this user may not install it: run 'apt-get install $1' as root, then start again."
}

apt_install() {
	local -a options=(-y -q --no-install-recommends -o DPkg::Lock::Timeout=180)
	{
		as_root env DEBIAN_FRONTEND=noninteractive apt-get update -q
		as_root env DEBIAN_FRONTEND=noninteractive apt-get install "${options[@]}" "$@"
	} >>"$LOG_DIR/apt.log" 2>&1
}

# Whether node_modules holds what package-lock.json asks for. npm writes its own list there last, so an
# install that was cut off has none.
node_modules_match() {
	node --input-type=commonjs -e '
		const { readFileSync } = require("node:fs");
		const read = (path) => JSON.parse(readFileSync(path, "utf8")).packages;
		try {
			const wanted = read("package-lock.json");
			const present = read("node_modules/.package-lock.json");
			const missing = Object.entries(wanted).filter(([path, entry]) =>
				path !== "" && !entry.link && present[path]?.version !== entry.version && !entry.optional);
			process.exit(missing.length === 0 ? 0 : 1);
		} catch {
			process.exit(1);
		}' 2>/dev/null
}

ensure_npm_packages() {
	exec 8>"$LOCAL/install.lock"
	if ! flock -n 8; then
		say 'Waiting for another start that is installing'
		flock 8
	fi
	if ! node_modules_match; then
		say 'Installing npm packages (about half a minute)'
		: >"$LOG_DIR/npm.log"
		run_step npm "$LOG_DIR/npm.log" npm ci --no-audit --no-fund || {
			show_log "$LOG_DIR/npm.log"
			die "npm ci failed; its last lines are above. Check the network, then start again."
		}
	fi
	# Its tsconfig names the $lib alias, which the seed and the type check go by.
	if [[ ! -f .svelte-kit/tsconfig.json || svelte.config.js -nt .svelte-kit/tsconfig.json ]]; then
		run_step sync "$LOG_DIR/npm.log" node node_modules/@sveltejs/kit/svelte-kit.js sync ||
			die "svelte-kit sync failed; see $LOG_DIR/npm.log"
	fi
	exec 8>&-
}
