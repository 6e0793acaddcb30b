#!/bin/sh
# Prints what a trivial cell costs: through the kernel, in JShell in one process, and through the reference Python kernel.
# Needs the built distribution and a Python with jupyter_client (and ipykernel, for the Python kernel's line), named in
# COUNTWRIGHT_PYTHON or else python3. Takes some three minutes; run it on a machine that does nothing else.
set -u

fail() {
    printf 'latency: %s\n' "$@" >&2
    exit 2
}

install=$(CDPATH='' cd -P -- "$(dirname -- "$0")" && pwd -P) || fail "the folder of $0 cannot be entered."
home=$install/target/countwright
[ -x "$home/bin/countwright" ] || fail "there is no distribution in $home. Build it with: mvn -B package -DskipTests"
java=${JAVA_HOME:+$JAVA_HOME/bin/}java
command -v "$java" >/dev/null || fail "no Java was found: neither in JAVA_HOME nor on the PATH."
python=${COUNTWRIGHT_PYTHON:-python3}
"$python" -c 'import jupyter_client' 2>/dev/null ||
    fail "$python has no jupyter_client, which measures." \
        "Get it with 'python3 -m venv DIR && DIR/bin/pip install jupyter_client ipykernel', and set COUNTWRIGHT_PYTHON=DIR/bin/python."
exec "$python" "$install/src/latency/latency.py" "$home" --java "$java" "$@"
