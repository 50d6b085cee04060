# The application: its environment, its build, its start, the fakes beside it and the demo feed.
# shellcheck shell=bash
# shellcheck disable=SC2034,SC2154 # Variables are exported all at once; the others are the command's.

# Secrets made once and kept in .local/env, readable by this user only.
ensure_secrets() {
	if [[ ! -s $LOCAL/env ]]; then
		(
			umask 077
			# shellcheck disable=SC2016 # The dollar signs are JavaScript's.
			node --input-type=module -e '
				import { randomBytes } from "node:crypto";
				import webPush from "web-push";
				const vapid = webPush.generateVAPIDKeys();
				console.log(`AUTH_SECRET=${randomBytes(32).toString("base64url")}`);
				console.log(`VAPID_PUBLIC_KEY=${vapid.publicKey}`);
				console.log(`VAPID_PRIVATE_KEY=${vapid.privateKey}`);' >"$LOCAL/env.new"
		)
		mv "$LOCAL/env.new" "$LOCAL/env"
	fi
}

# Everything the application reads (src/lib/server/config.ts), for this machine only.
export_environment() {
	ensure_secrets
	set -a
	# shellcheck source=/dev/null
	. "$LOCAL/env"
	DATABASE_URL=$(database_url)
	ORIGIN=http://127.0.0.1:$PORT
	HOST=127.0.0.1
	BODY_SIZE_LIMIT=66M
	SMTP_URL=smtp://127.0.0.1:$SMTP_PORT
	VAPID_SUBJECT=mailto:duty@duskline.example
	DUSKLINE_DEMO=on
	DUSKLINE_MAILBOX_URL=http://127.0.0.1:$MAILBOX_PORT
	DUSKLINE_DEMO_KEYS_FILE=$LOCAL/demo-keys.json
	DUSKLINE_SMTP_PORT=$SMTP_PORT
	DUSKLINE_MAILBOX_PORT=$MAILBOX_PORT
	DUSKLINE_PUSH_PORT=$PUSH_PORT
	DUSKLINE_PUSH_PAGE_PORT=$PUSH_PAGE_PORT
	DUSKLINE_PUSH_STATE=$LOCAL/push
	DUSKLINE_BROKER_PORT=$BROKER_PORT
	DUSKLINE_BROKER_PAGE_PORT=$BROKER_PAGE_PORT
	DUSKLINE_BROKER_URL=http://127.0.0.1:$BROKER_PAGE_PORT
	DUSKLINE_DEMO_BROKER=127.0.0.1:$BROKER_PORT
	DUSKLINE_STORAGE_PORT=$STORAGE_PORT
	DUSKLINE_STORAGE_STATE=$LOCAL/storage
	STORAGE_URL=http://127.0.0.1:$STORAGE_PORT
	STORAGE_BUCKET=duskline
	STORAGE_ACCESS_KEY=duskline
	STORAGE_SECRET_KEY=$(printf 'storage %s' "$AUTH_SECRET" | sha256sum | cut -c1-40)
	set +a
	# The application's own PORT; each fake has a variable of its own.
	export PORT
}

require_free_ports() {
	require_free_port "$PORT" 'the application' DUSKLINE_PORT
	require_free_port "$MAILBOX_PORT" 'the mailbox page' DUSKLINE_MAILBOX_PORT
	require_free_port "$SMTP_PORT" 'the mailbox' DUSKLINE_SMTP_PORT
	require_free_port "$PUSH_PORT" 'the push service' DUSKLINE_PUSH_PORT
	require_free_port "$PUSH_PAGE_PORT" "the push service's page" DUSKLINE_PUSH_PAGE_PORT
	require_free_port "$BROKER_PORT" 'the VOEvent broker' DUSKLINE_BROKER_PORT
	require_free_port "$BROKER_PAGE_PORT" "the VOEvent broker's page" DUSKLINE_BROKER_PAGE_PORT
	require_free_port "$STORAGE_PORT" 'the object storage' DUSKLINE_STORAGE_PORT
}

# Both leave a mark beside the data they belong to, so that a later start need not ask again; the seed's
# holds the broker's address, which another port changes.
migrate_and_seed() {
	local log=$LOG_DIR/database.log migrations
	migrations=$(find drizzle -type f -print0 | LC_ALL=C sort -z | xargs -0 sha256sum | sha256sum)
	if [[ $(cat "$PG_HOME/migrated" 2>/dev/null) != "$migrations" ]]; then
		: >"$log"
		run_step migrate "$log" node --import tsx src/lib/server/db/migrate.ts || {
			show_log "$log"
			die "The migrations failed; the last lines are above. '$SELF reset' starts with an empty database."
		}
		printf '%s' "$migrations" >"$PG_HOME/migrated"
	fi
	if [[ $(cat "$PG_HOME/seeded" 2>/dev/null) != "$DUSKLINE_DEMO_BROKER" || ! -s $DUSKLINE_DEMO_KEYS_FILE ]]; then
		run_step seed - node --import tsx src/lib/server/demo/seed.ts ||
			die "The demo data could not be made. '$SELF reset' starts with an empty database."
		printf '%s' "$DUSKLINE_DEMO_BROKER" >"$PG_HOME/seeded"
	fi
}

start_fakes() {
	: >"$LOG_DIR/mailbox.log"
	: >"$LOG_DIR/push.log"
	: >"$LOG_DIR/broker.log"
	spawn broker "$LOG_DIR/broker.log" node --import tsx fakes/voeventBroker.ts
	: >"$LOG_DIR/storage.log"
	spawn storage "$LOG_DIR/storage.log" node --import tsx fakes/objectStore.ts
	spawn push "$LOG_DIR/push.log" node --import tsx fakes/pushService.ts
	spawn mailbox "$LOG_DIR/mailbox.log" node --import tsx fakes/mailbox.ts
}

await_fakes() {
	wait_until_answers mailbox "$MAILBOX_PORT" / 30 "$LOG_DIR/mailbox.log"
	wait_until_answers push "$PUSH_PAGE_PORT" / 30 "$LOG_DIR/push.log"
	wait_until_answers broker "$BROKER_PAGE_PORT" / 30 "$LOG_DIR/broker.log"
	wait_until_answers storage "$STORAGE_PORT" / 30 "$LOG_DIR/storage.log"
}

# A fingerprint of all that the build is made from.
source_fingerprint() {
	{
		node -v
		find src static drizzle -type f -print0 | LC_ALL=C sort -z | xargs -0 sha256sum
		sha256sum package.json package-lock.json svelte.config.js tsconfig.json vite.config.ts vite.workers.config.ts
	} | sha256sum | cut -c1-16
}

ensure_build() {
	local wanted log=$LOG_DIR/build.log
	exec 8>"$LOCAL/build.lock"
	if ! flock -n 8; then
		say 'Waiting for another build of this clone'
		flock 8
	fi
	wanted=$(source_fingerprint)
	if [[ ! -f build/index.js || ! -f build-workers/worker.js || $(cat build/.sources 2>/dev/null) != "$wanted" ]]; then
		say 'Building the application (about 20 s)'
		rm -f build/.sources
		: >"$log"
		if ! run_step build "$log" node node_modules/vite/bin/vite.js build ||
			! run_step build "$log" node node_modules/vite/bin/vite.js build -c vite.workers.config.ts; then
			show_log "$log" 30
			die 'The build failed; its last lines are above.'
		fi
		printf '%s' "$wanted" >build/.sources
	fi
	exec 8>&-
}

# The build that runs is a copy: building again, as the tests do, must not change files under it.
install_build() {
	[[ $(cat "$LOCAL/app/build/.sources" 2>/dev/null) == "$(cat build/.sources)" ]] && return
	rm -rf "$LOCAL/app" "$LOCAL/app.new"
	mkdir "$LOCAL/app.new"
	cp -a build build-workers drizzle package.json "$LOCAL/app.new/"
	mv "$LOCAL/app.new" "$LOCAL/app"
}

start_application() {
	: >"$LOG_DIR/app.log"
	NODE_ENV=production NODE_EXTRA_CA_CERTS=$LOCAL/push/certificate.pem \
		spawn app "$LOG_DIR/app.log" env -C "$LOCAL/app" node build
	wait_until_answers app "$PORT" /healthz 60 "$LOG_DIR/app.log"
}

# Watch mode: the pages change as their files do; the compute thread is built again by a second watcher.
start_watching() {
	: >"$LOG_DIR/workers.log"
	rm -f build/.sources
	run_step build "$LOG_DIR/workers.log" node node_modules/vite/bin/vite.js build -c vite.workers.config.ts || {
		show_log "$LOG_DIR/workers.log"
		die 'The worker build failed; its last lines are above.'
	}
	spawn workers "$LOG_DIR/workers.log" node node_modules/vite/bin/vite.js build -c vite.workers.config.ts --watch
	NODE_EXTRA_CA_CERTS=$LOCAL/push/certificate.pem spawn app - node node_modules/vite/bin/vite.js dev --host 127.0.0.1 --port "$PORT" --strictPort --clearScreen false
	wait_until_answers app "$PORT" /healthz 60 "$LOG_DIR/workers.log"
}

start_feed() {
	[[ ${DUSKLINE_FEED:-on} != off ]] || {
		say 'The demo feed is off (DUSKLINE_FEED=off).'
		return 0
	}
	spawn feed - node --import tsx fakes/demoFeed.ts
}

print_welcome() {
	cat <<TXT

  Duskline runs at   $ORIGIN
  Sign in            $ORIGIN/auth/demo   (one click for each seeded person)
  Mailbox            $DUSKLINE_MAILBOX_URL   (sign-in links and circulars arrive here)
  Push messages      http://127.0.0.1:$PUSH_PAGE_PORT
  VOEvent broker     http://127.0.0.1:$BROKER_PAGE_PORT
  Logs               .local/log/
  Stop               Ctrl-C, or '$SELF down'

TXT
}
