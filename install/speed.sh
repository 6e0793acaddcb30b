#!/bin/sh
# Prints how quick the kernel is, beside JShell alone and the reference Python kernel, and what ten thousand cells do to it.
# Needs the built distribution and a Python with jupyter_client and ipykernel, named in COUNTWRIGHT_PYTHON or else python3.
# Takes some fifteen minutes; run it on a machine that does nothing else.
set -u

fail() {
    printf 'speed: %s\n' "$@" >&2
    exit 2
}

install=$(CDPATH='' cd -P -- "$(dirname -- "$0")" && pwd -P) || fail "the folder of $0 cannot be entered."
home=$install/target/countwright
[ -x "$home/bin/countwright" ] || fail "there is no distribution in $home. Build it with: mvn -B package -DskipTests"
java=${JAVA_HOME:+$JAVA_HOME/bin/}java
command -v "$java" >/dev/null || fail "no Java was found: neither in JAVA_HOME nor on the PATH."
python=${COUNTWRIGHT_PYTHON:-python3}
"$python" -c 'import jupyter_client, ipykernel' 2>/dev/null ||
    fail "$python has no jupyter_client and ipykernel, which measure and compare." \
        "Get them with 'python3 -m venv DIR && DIR/bin/pip install jupyter_client ipykernel', and set COUNTWRIGHT_PYTHON=DIR/bin/python."
exec "$python" "$install/src/speed/speed.py" "$home" --java "$java" "$@"
