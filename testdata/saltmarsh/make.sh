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

# The README's pictures: a unit with most takes, of which a capacitor is ten times too large and
# which does not like to be tapped. Its takes are thrown away.
pictures=testdata/saltmarsh/pictures
passing=$(mktemp -d)
trap 'rm -rf "$passing"' EXIT
go run ./cmd/padproof rehearse --pad $pictures/pad.toml --rig $pictures/rig.toml --out "$passing/0419" \
    --takes before,after,flex,legs-before,legs,rig-noise,pad-noise --signal test --noise-seconds 20 \
    --hum-dbfs -95 --flex step,dropout --fault "C1 x10" --vary --seed 419
go run ./cmd/padproof check "$passing/0419" --plots $pictures || [ $? -eq 1 ] # it fails, and should
go run ./cmd/padproof predict --pad $pictures/pad.toml --rig $pictures/rig.toml --plots "$passing/predicted"
cp "$passing/predicted/predicted.svg" $pictures
rm $pictures/*.png $pictures/*.pdf
