# The `test` command: each runner in turn, then a table and one closing line over all of them.
# shellcheck shell=bash
# shellcheck disable=SC2034,SC2154 # ROOT, LOCAL and SELF are set by the command.

# step NAME COMMAND…: runs it on the terminal and keeps its exit code for the closing table.
step() {
	local name=$1 status=0
	shift
	printf '\n── %s\n' "$name"
	run_step "${name// /-}" - "$@" || status=$?
	printf '%s' "$status" >"$RESULTS/$name.exit"
}

run_tests() {
	check_machine
	make_folders
	RUN_DIR=$LOCAL/test/run
	LOG_DIR=$LOCAL/test/log
	RESULTS=$LOCAL/test/results
	mkdir -p "$RUN_DIR" "$LOG_DIR" "$RESULTS"
	hold_clone || die "The tests already run from this clone; wait for them."
	stop_on_signals
	end_everything
	rm -f "$RESULTS"/*
	ensure_postgres
	ensure_chromium
	ensure_xmllint
	ensure_npm_packages

	local vitest=node_modules/vitest/vitest.mjs
	step 'format' node node_modules/prettier/bin/prettier.cjs --check .
	step 'lint' node node_modules/eslint/bin/eslint.js .
	step 'type check' npm run --silent check
	# The compute thread's tests load its build.
	step 'worker build' node node_modules/vite/bin/vite.js build -c vite.workers.config.ts
	step 'unit tests' node "$vitest" run --project unit --reporter=default --reporter=json \
		--outputFile.json="$RESULTS/unit tests.json"
	step 'database tests' node "$vitest" run --project db --reporter=default --reporter=json \
		--outputFile.json="$RESULTS/database tests.json"
	printf '\n── build\n'
	local status=0
	(ensure_build) || status=$?
	printf '%s' "$status" >"$RESULTS/build.exit"
	PLAYWRIGHT_JSON_OUTPUT_NAME="$RESULTS/browser tests.json" DUSKLINE_CHROMIUM=$(chromium_path) \
		step 'browser tests' node node_modules/@playwright/test/cli.js test --reporter=list,json
	printf '\n'
	node --import tsx scripts/sumTestResults.ts "$RESULTS"
}
