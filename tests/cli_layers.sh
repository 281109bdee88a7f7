#!/bin/sh
# The architecture holds: includes point downwards, third-party headers enter through one file each, the library neither
# prints nor ends the process, and only sct_ names are public. Prints "N held, M broken".
BUILD=${BUILD:-build}
held=0 broken=0
ok() {
    if [ "$?" = 0 ]; then held=$((held + 1)); else broken=$((broken + 1)); echo "broken: $1"; fi
}
none() { # none WORDS TEXT: the text must be empty
    [ -z "$2" ] || echo "$2"
    [ -z "$2" ]
    ok "$1"
}

up() { # up FOLDER FORBIDDEN: folders that it must not include
    none "src/$1 includes nothing of $2" "$(grep -rnE "#include \"($2)/" "src/$1")"
}
up base 'numerics|model|analysis|rules|sizing|report|cli'
up numerics 'model|analysis|rules|sizing|report|cli'
up model 'numerics|analysis|rules|sizing|report|cli'
up analysis 'rules|sizing|report|cli'
up rules 'numerics|analysis|sizing|report|cli'
up sizing 'report|cli'
up verify 'analysis|rules|sizing|report|cli' # a second path shares nothing with the first
up analysis 'verify'
up rules 'verify'
up sizing 'verify'
up report 'cli'
up cli 'base|numerics|model|analysis|rules|sizing|report|verify'

door() { # door HEADER FILE
    none "$1 enters through $2 only" "$(grep -rln "#include <.*$1>" src include | grep -v "^$2\$")"
    grep -q "#include <.*$1>" "$2"
    ok "$2 is the door of $1"
}
door cholmod.h src/numerics/sparse.c
door amd.h src/numerics/order.c
door cJSON.h src/model/document.c

# Calls that end the process or print, as undefined symbols of the library's objects (sanitizer builds aside).
calls=$(nm -A --undefined-only "$BUILD/libscantling.a" 2>/dev/null |
    grep -wE 'printf|puts|putchar|fprintf|vprintf|vfprintf|perror|exit|_exit|abort|quick_exit|setlocale|stdout|stderr|system|popen')
none "the library does not print, exit, or set the locale" "$calls"
none "kernels do no input or output" "$(grep -rn '#include <stdio.h>' src/numerics src/analysis src/rules)"
none "cJSON's case-blind, index and number traps are not used" \
    "$(grep -rnE 'cJSON_GetObjectItem\(|cJSON_GetArrayItem|->valueint|cJSON_Print' src)"

public=$(nm -D --defined-only "$BUILD/libscantling.so" | awk '$2 == "T" || $2 == "D" || $2 == "B" || $2 == "R" {print $3}' | grep -v '^sct_')
case $BUILD in *sanitize* | *coverage*) public="" ;; esac
none "only sct_ names are public" "$public"
for name in $(grep -oE '^SCT_API.*' include/scantling.h | grep -oE 'sct_[a-z_]+\(' | tr -d '('); do
    nm -D --defined-only "$BUILD/libscantling.so" | grep -qw "$name"
    ok "$name is exported"
done
# Objects in .data or .bss change; tables of pointers in .data.rel.ro do not.
changing=$(objdump -t "$BUILD/libscantling.a" 2>/dev/null | grep -wE 'O \.(data|bss)[^ ]*' | grep -vF .data.rel.ro)
case $BUILD in *sanitize* | *coverage*) changing="" ;; esac
none "the library has no global data that changes" "$changing"

echo "$held held, $broken broken"
[ "$broken" = 0 ]
