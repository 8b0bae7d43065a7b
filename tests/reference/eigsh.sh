#!/bin/bash
# The exported matrices, solved by SciPy: the same factors to 1e-8. A general-purpose eigensolver that is not ours.
# SPDX-License-Identifier: GPL-3.0-or-later
program=$1
python=/usr/bin/python3
here=$(cd "$(dirname "$0")" && pwd)
"$python" -c 'import scipy, h5py' 2>/dev/null || { echo "scipy is not there"; exit 77; }
folder=$(mktemp -d)
trap 'rm -rf "$folder"' EXIT
for frame in ironbark quernstone; do
    "$program" check "$here/../../meshes/$frame.yaml" --quiet --out "$folder" --export-matrices "$folder"
    [ $? -le 1 ] || exit 1
    "$python" "$here/eigsh_check.py" "$folder" "$folder/$frame.results.h5" || exit 1
done
