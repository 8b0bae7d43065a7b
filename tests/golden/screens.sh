#!/bin/bash
# Screens against kept ones, byte for byte. EF_WRITE_GOLDEN=1 writes them anew: read the difference before you keep it.
# SPDX-License-Identifier: GPL-3.0-or-later
program=$1
here=$(cd "$(dirname "$0")" && pwd)
folder=$(mktemp -d)
trap 'rm -rf "$folder"' EXIT
cp "$here"/../../meshes/*.yaml "$here/../../meshes/bad/many_faults.yaml" "$folder"
cd "$folder" || exit 1
bad=0
screen() { # name, wanted exit status, arguments
    local name=$1 status=$2
    shift 2
    "$program" "$@" >got 2>&1
    local found=$?
    [ $found -eq "$status" ] || { echo "$name: exit status $found, wanted $status"; bad=1; }
    [ -n "$EF_WRITE_GOLDEN" ] && cp got "$here/screens/$name.txt"
    diff -u "$here/screens/$name.txt" got || { echo "$name differs"; bad=1; }
}
screen ironbark_check 0 check ironbark.yaml
screen ironbark_inch 0 check ironbark.yaml --units inch --case "hard landing"
screen ironbark_markdown 0 check ironbark.yaml --as md --c 2
screen ironbark_factors 0 show factors ironbark.results.h5
screen ironbark_fixity_csv 0 show fixity ironbark.results.h5 --as csv --case push-over
screen ironbark_ledger_json 0 show ledger ironbark.yaml --as json
screen ironbark_balance 0 show balance ironbark.results.h5
screen ironbark_reactions 0 show reactions ironbark.results.h5 --case "side load"
screen ironbark_loads 0 show loads ironbark.results.h5 --tube "main-*"
screen ironbark_margins 0 show margins ironbark.results.h5 --tube "ring-*"
screen thornbank_input 0 check thornbank.yaml --input-only --tube "guy-*"
screen quernstone_input 0 check quernstone.yaml --input-only --tube "side-*"
screen thornbank_refused 2 check thornbank.yaml
screen many_faults 2 check many_faults.yaml
screen unknown_option 2 check ironbark.yaml --inputonly
screen abbreviated_option 2 check ironbark.yaml --input
screen unknown_command 2 chekc ironbark.yaml
screen unknown_table 2 show fixty ironbark.yaml
screen unknown_case 2 check ironbark.yaml --case "hard landign"
screen bad_value 2 check ironbark.yaml --count 0
screen no_file 4 check nothing.yaml
screen help 0 --help
screen version 0 --version
exit $bad
