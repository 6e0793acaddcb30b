#!/bin/sh
# Builds Countwright, runs the demo notebook without a front end, and prints where its report is.
# Needs a JDK 17 or newer and Maven 3.8 or newer; after the first build also without network.
set -u

fail() {
    printf 'demo: %s\n' "$@" >&2
    exit 2
}

root=$(CDPATH='' cd -P -- "$(dirname -- "$0")/.." && pwd -P) || fail "the folder of $0 cannot be entered."
notebook=$root/notebooks-demo/tram-doors.ipynb
get_jdk='Get a JDK from your system (Debian and Ubuntu: apt install openjdk-17-jdk-headless; Fedora: dnf install java-17-openjdk-devel; macOS: brew install openjdk) or from https://adoptium.net, then try again.'
get_maven='Get Maven from your system (Debian and Ubuntu: apt install maven; Fedora: dnf install maven; macOS: brew install maven) or from https://maven.apache.org, then try again.'

# What is missing is told all at once, not one thing after the other.
missing=0
miss() {
    missing=1
    printf 'demo: %s\n' "$@" >&2
}

if [ -n "${JAVA_HOME:-}" ]; then
    javac=$JAVA_HOME/bin/javac
    [ -x "$javac" ] || miss "JAVA_HOME is $JAVA_HOME, but there is no bin/javac in it, so it is no JDK." "$get_jdk"
else
    javac=$(command -v javac) || miss "no JDK was found: JAVA_HOME is not set and there is no javac on the PATH." "$get_jdk"
fi
if [ "$missing" = 0 ]; then
    version=$("$javac" -version 2>&1 | sed -n 's/^javac //p' | head -n 1)
    major=${version%%[!0-9]*}
    [ "${major:-0}" -ge 17 ] || miss "$javac is of Java ${version:-of unknown version}, which is too old: 17 or newer is needed." "$get_jdk"
fi
if command -v mvn >/dev/null; then
    if [ "$missing" = 0 ]; then
        maven=$(mvn -v 2>/dev/null | sed -n 's/.*Apache Maven \([0-9][0-9.]*\).*/\1/p' | head -n 1)
        [ -n "$maven" ] || miss "mvn is on the PATH, but 'mvn -v' does not say its version, so it may be broken." "$get_maven"
        maven_major=${maven%%.*}
        maven_rest=${maven#*.}
        maven_minor=${maven_rest%%.*}
        if [ "${maven_major:-0}" -lt 3 ] || { [ "$maven_major" = 3 ] && [ "${maven_minor:-0}" -lt 8 ]; }; then
            [ -z "$maven" ] || miss "mvn is Maven $maven, which is too old: 3.8 or newer is needed." "$get_maven"
        fi
    fi
else
    miss "no Maven was found: there is no mvn on the PATH." "$get_maven"
fi
[ "$missing" = 0 ] || exit 2
[ -f "$notebook" ] || fail "the demo notebook $notebook is missing. Clone the project again."

log=$root/install/target/demo-build.log
mkdir -p "$root/install/target" || fail "no permission to write into $root/install/target."
build() {
    (cd "$root" && mvn -B -q package -DskipTests "$@") >"$log" 2>&1
}
echo "Building Countwright (the first time Maven also fetches the libraries, which takes a few minutes) ..."
# Offline first: with all libraries there it is faster, and it works without a network.
if ! build -o; then
    if ! build; then
        tail -n 40 "$log" >&2
        fail "the build failed; its last lines stand above, all of it in $log." \
            "If a library could not be fetched, check the network (Maven's settings.xml names a proxy or mirror) and try again."
    fi
fi

echo "Running notebooks-demo/tram-doors.ipynb ..."
exec "$root/install/target/countwright/bin/countwright" run "$notebook" --output "$root/install/target/demo"
