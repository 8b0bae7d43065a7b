#!/bin/bash
# What the program does to files: same bytes twice, old results intact, full disks and closed pipes told.
# SPDX-License-Identifier: GPL-3.0-or-later
program=$1
here=$(cd "$(dirname "$0")" && pwd)
folder=$(mktemp -d)
trap 'rm -rf "$folder"' EXIT
cp "$here/../../meshes/ironbark.yaml" "$folder"
cd "$folder" || exit 1
say() { echo "$1"; exit 1; }
"$program" check ironbark.yaml --quiet || say "check failed"
cp ironbark.results.h5 first
"$program" check ironbark.yaml --quiet || say "check failed"
cmp first ironbark.results.h5 || say "two runs of one frame differ"
for form in text csv json md; do
    "$program" show margins ironbark.results.h5 --as $form >from_results || say "show $form failed"
    "$program" show margins ironbark.yaml --as $form >from_frame || say "show $form failed"
    cmp from_results from_frame || say "$form of results and of the frame differ"
    grep -qi 'nan' from_results && say "a NaN reached the $form table"
done
"$program" show ledger ironbark.results.h5 --as json | python3 -m json.tool >/dev/null || say "not JSON"
if [ -w /dev/full ]; then
    "$program" check ironbark.yaml >/dev/full 2>err
    [ $? -eq 4 ] || say "a full disk gives exit status 4"
    [ "$(wc -l <err)" -eq 1 ] || say "a full disk gives one line"
fi
(ulimit -f 8; "$program" check ironbark.yaml --quiet 2>err; exit $?)
[ $? -eq 4 ] || say "a file size limit gives exit status 4"
cmp first ironbark.results.h5 || say "old results did not survive a failed write"
[ "$(ls)" = "$(printf 'err\nfirst\nfrom_frame\nfrom_results\nironbark.results.h5\nironbark.yaml')" ] || { ls; say "left-over files"; }
head -c 1000 first >cut.results.h5
"$program" show margins cut.results.h5 >/dev/null 2>err
[ $? -eq 4 ] && [ "$(wc -l <err)" -eq 1 ] || say "a cut results file gives exit status 4 and one line"
"$program" new --schema | python3 -m json.tool >/dev/null || say "the schema is not JSON"
"$program" new >own.yaml && "$program" check own.yaml --quiet
[ $? -le 1 ] || say "the sample of new does not run"
sed -i 's/0.889/0.9/' ironbark.yaml
"$program" show weights ironbark.yaml 2>err >/dev/null || say "show failed"
grep -q 'missing or stale' err || say "stale results are not told"
exit 0
