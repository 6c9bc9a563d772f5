#!/bin/sh
# Make the demo's simulated captures again: a sound unit recorded with
# the test signal, and one with the wrong shunt recorded with a plain tone.
set -eu
cd "$(dirname "$0")/../.."
make_unit() {
    folder=testdata/saltmarsh/$1
    seed=$2
    shift 2
    rm -rf "$folder"
    go run ./cmd/padproof rehearse --pad testdata/saltmarsh/pad.toml --rig testdata/saltmarsh/rig.toml \
        --out "$folder" --vary --seed "$seed" "$@"
    rm "$folder/pad.toml" "$folder/rig.toml" # those one folder up serve every unit
}
make_unit 0417 417 --signal test --bits 16
make_unit 0418 418 --seconds 3 --fault "R3 is 360"
