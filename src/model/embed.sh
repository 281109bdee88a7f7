#!/bin/sh
# Writes the section families given as CSV files into one C file on standard output: the table that families.c reads.
# The first line of each file names its family: "# family: NAME".
set -eu
LC_ALL=C
export LC_ALL
echo '/* Made by src/model/embed.sh from models/sections: change the CSV files, not this. */'
echo '#include "model/families.h"'
n=0
table=''
for file in "$@"; do
    name=$(sed -n '1s/^# family: *//p' "$file" | sed 's/["\\]/\\&/g')
    if [ -z "$name" ]; then
        echo "embed.sh: $file: the first line must be \"# family: NAME\"" >&2
        exit 1
    fi
    echo "static const char TEXT_${n}[] = {"
    # signed, as char may be: 7-bit files give the same bytes either way
    od -An -v -td1 "$file" | sed 's/  *\(-*[0-9][0-9]*\)/\1,/g'
    echo '};'
    table="$table    {\"$name\", TEXT_$n, sizeof TEXT_$n},
"
    n=$((n + 1))
done
echo "const sct_shipped_family sct_shipped_families[] = {"
printf '%s' "$table"
echo '};'
echo "const int sct_n_shipped_families = $n;"
