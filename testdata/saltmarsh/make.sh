#!/bin/sh
# Make the demo's simulated captures again: a sound unit, and one with the wrong shunt.
set -eu
cd "$(dirname "$0")/../.."
make_unit() {
    folder=testdata/saltmarsh/$1
    seed=$2
    shift 2
    rm -rf "$folder"
    go run ./cmd/padproof rehearse --pad testdata/saltmarsh/pad.toml --rig testdata/saltmarsh/rig.toml \
        --out "$folder" --vary --seed "$seed" --seconds 3 "$@"
    rm "$folder/pad.toml" "$folder/rig.toml" # those one folder up serve every unit
}
make_unit 0417 417
make_unit 0418 418 --fault "R3 is 360"
