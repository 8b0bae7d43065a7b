#!/bin/bash
# Results of a small frame, read by h5py: an HDF5 reader that is not ours.
# SPDX-License-Identifier: GPL-3.0-or-later
set -u
program=$1
python=/usr/bin/python3
here=$(cd "$(dirname "$0")" && pwd)
"$python" -c 'import h5py, numpy' 2>/dev/null || { echo "h5py is not there"; exit 77; }
folder=$(mktemp -d)
trap 'rm -rf "$folder"' EXIT
cat >"$folder/tripod.yaml" <<'END'
title: Tripod
units: {length: mm, force: kN}
sizes: {leg: {round: 20 x 1, material: 4130N}}
joints: {A: [0, 0, 0], B: [1000, 0, 0], C: [0, 1000, 0], D: [300, 300, 1000]}
tubes: {a: [A, D, leg], b: [B, D, leg], c: [C, D, leg], d: [A, B, leg]}
supports: {A: pinned, B: pinned, C: pinned}
cases: {hoist: {level: ultimate, loads: [{at: D, force: [0.05, 0, -2]}]}}
END
(cd "$folder" && "$program" check tripod.yaml >out 2>err)
status=$?
if [ ! -s "$folder/tripod.results.h5" ]; then
    [ "$status" = 0 ] && { echo "the program does not run a frame yet"; exit 77; }
    cat "$folder/err"
    exit 1
fi
"$python" "$here/h5py_check.py" "$folder/tripod.results.h5"
