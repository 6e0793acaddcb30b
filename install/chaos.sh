#!/bin/sh
# Kills the worker at 100 random moments while requests of all kinds are under way, and checks every reply. Takes some
# minutes. Other numbers: bash install/chaos.sh KILLS SEED
set -eu

cd "$(dirname -- "$0")/.."
exec mvn -B -q verify -pl notebooks-demo -am -Dtest=ChaosKernelTest -Dsurefire.failIfNoSpecifiedTests=false \
    "-Dcountwright.chaos.kills=${1:-100}" "-Dcountwright.chaos.seed=${2:-20261201}"
