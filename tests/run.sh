#!/bin/sh
# Installs what is missing on Debian 12, builds evenpath in every way that is kept working, and runs
# all tests on each: gcc, clang with sanitizers, the fuzzer, the style checks. Ends with one line.
set -u
top=$(cd "$(dirname "$0")/.." && pwd)
. "$top/src/install.sh"
# shellcheck disable=SC2086
install_missing $build_packages $test_packages || exit 1
builds=${EVENPATH_BUILDS:-$top/build-tests}
passed=0
failed=0

# step WORDS COMMAND...: runs it, counts it, shows its output only when it fails.
step() {
    words=$1
    shift
    mkdir -p "$builds"
    if "$@" >"$builds/step.log" 2>&1; then
        passed=$((passed + 1))
        echo "passed: $words"
    else
        failed=$((failed + 1))
        cat "$builds/step.log"
        echo "FAILED: $words"
    fi
}

# make_and_test NAME COMPILER OPTIONS...: one way to build, and all tests on it.
make_and_test() {
    name=$1 compiler=$2
    shift 2
    step "build, $name" build_with "$name" "$compiler" "$@"
    ctest --test-dir "$builds/$name" --output-on-failure -j2 >"$builds/ctest.log" 2>&1
    sed -n '/tests passed/p; /Failed)$/p; /Timeout)$/p; /\*\*\*/p' "$builds/ctest.log"
    good=$(grep -c ' Passed ' "$builds/ctest.log")
    all=$(sed -n 's/.*tests failed out of \([0-9]*\).*/\1/p' "$builds/ctest.log")
    [ "${all:-0}" -gt 0 ] || all=1
    [ "$good" = "$all" ] || cat "$builds/ctest.log"
    passed=$((passed + good))
    failed=$((failed + all - good))
}

build_with() {
    name=$1 compiler=$2
    shift 2
    cmake -S "$top" -B "$builds/$name" -G Ninja -DCMAKE_C_COMPILER="$compiler" \
        -DEVENPATH_WERROR=ON "$@" && cmake --build "$builds/$name"
}

build_fuzzer() {
    cmake -S "$top" -B "$builds/fuzz" -G Ninja -DCMAKE_C_COMPILER=clang -DEVENPATH_WERROR=ON \
        -DEVENPATH_FUZZ=ON -DEVENPATH_SANITIZE=ON && cmake --build "$builds/fuzz" --target fuzz_scene
}

# Leaks are looked for in the tests on the corpus; the YAML library has one of its own on odd keys.
fuzz() {
    rm -rf "$builds/corpus" && mkdir -p "$builds/corpus" &&
        ASAN_OPTIONS=detect_leaks=0 "$builds/fuzz/tests/fuzz_scene" -max_total_time=60 -max_len=8192 -timeout=20 \
            -artifact_prefix="$builds/" "$builds/corpus" "$top/tests/scene/corpus"
}

formatted() {
    cd "$top" && git ls-files '*.c' '*.h' | xargs clang-format --dry-run -Werror
}

tidy() {
    cd "$top" && git ls-files 'src/*.c' |
        xargs -P 2 -n 1 clang-tidy --quiet -p "$builds/clang" --warnings-as-errors='*'
}

export ASAN_OPTIONS=detect_leaks=1 UBSAN_OPTIONS=print_stacktrace=1
export LSAN_OPTIONS="suppressions=$top/tests/support/leaks.txt:print_suppressions=0"
make_and_test gcc gcc -DEVENPATH_BENCHMARKS=ON
make_and_test clang clang -DEVENPATH_SANITIZE=ON
step "build, fuzzer" build_fuzzer
step "a minute of fuzzing the scene reader" fuzz
step "clang-format" formatted
step "clang-tidy" tidy
echo "$passed passed, $failed failed"
[ "$failed" = 0 ]
