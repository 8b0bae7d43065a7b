#!/bin/bash
# A file includes its own room and rooms to its left only; postproc sees include/ and core; no file is too long.
cd "$(dirname "$0")/../.." || exit 1
rooms=(core linalg section material element frame mesh analysis check study store)
bad=0
place() { local i; for i in "${!rooms[@]}"; do [ "${rooms[i]}" = "$1" ] && { echo "$i"; return; }; done; echo 99; }
for room in "${rooms[@]}"; do
    for file in solver/"$room"/*.[ch]; do
        [ -e "$file" ] || continue
        for seen in $(sed -n 's|^#include "\([a-z]*\)/.*|\1|p' "$file"); do
            [ "$seen" = endfix ] && continue
            if [ "$(place "$seen")" -gt "$(place "$room")" ]; then echo "$file includes $seen/, which lies to its right"; bad=1; fi
        done
    done
done
for file in postproc/*.[ch]; do
    [ -e "$file" ] || continue
    for seen in $(sed -n 's|^#include "\([a-z]*\)/.*|\1|p' "$file"); do
        case "$seen" in endfix|core|postproc) ;; *) echo "$file includes $seen/"; bad=1 ;; esac
    done
done
while read -r lines file; do
    [ "$lines" -le 450 ] || { echo "$file has $lines lines"; bad=1; }
done < <(wc -l solver/*.c solver/*/*.[ch] postproc/*.[ch] include/endfix/*.h 2>/dev/null | grep -v total)
exit $bad
