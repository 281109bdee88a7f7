#!/bin/sh
# The man pages tell all; what make install puts under a prefix works from there, and uninstall takes it away; the Debian
# packages hold what they should. Prints "N held, M broken".
BUILD=${BUILD:-build}
MAKE=${MAKE:-make}
PROGRAM=$(cd "$BUILD" && pwd)/scantling
work=$(mktemp -d) || exit 1
trap 'rm -rf "$work"' EXIT
held=0 broken=0
count() { # count VERDICT WORDS
    if [ "$1" = 0 ]; then held=$((held + 1)); else broken=$((broken + 1)); echo "broken: $2"; fi
}
finish() {
    echo "$held held, $broken broken"
    [ "$broken" = 0 ]
    exit
}

# ---- man pages: in the words of the pages hyphens are escaped by no one, so that they can be searched
commands=$("$PROGRAM" --help | sed -n 's/^  \([a-z][a-z]*\)  *[A-Z].*/\1/p')
for command in $commands; do
    grep -q "^\.It Cm $command\$" src/cli/scantling.1; count $? "scantling.1 has the command $command"
    for option in $("$PROGRAM" "$command" --help | sed -n '/^options/,/^$/s/^  .*--\([a-z-]*\).*/\1/p'); do
        grep -qE "^\.(It .*)?Fl (. , Fl )?(. Ar [a-z]+ , Fl )?-$option( |\$)" src/cli/scantling.1
        count $? "scantling.1 has --$option of $command"
    done
    for letter in $("$PROGRAM" "$command" --help | sed -n '/^options/,/^$/s/^  -\(.\),.*/\1/p'); do
        grep -qE "^\.It Fl $letter( |\$)" src/cli/scantling.1; count $? "scantling.1 has -$letter of $command"
    done
done
sed -n '/^ *EXIT_[A-Z_]* = [0-9]/s/[^0-9]*\([0-9][0-9]*\).*/\1/p' src/cli/exits.h >"$work/exits"
while read -r word; do
    grep -qE "^\.It ([0-9]+, )?$word\$|^\.It $word, [0-9]+\$" src/cli/scantling.1; count $? "scantling.1 has the exit status $word"
done <"$work/exits"
[ "$(wc -l <"$work/exits")" -ge 9 ]; count $? "the exit codes were found"
python3 - <<'PY'
import json, re, sys
page = open("src/model/scantling-model.5").read()
marked = set(re.findall(r"[$\w]+", " ".join(re.findall(r"^\.(?:It )?Cm (.*)$", page, re.M))))
schema, keys = json.load(open("models/model.schema.json")), set()
def walk(node):
    if isinstance(node, dict):
        keys.update(node.get("properties", {}))
        for value in node.values():
            walk(value)
    elif isinstance(node, list):
        for value in node:
            walk(value)
walk(schema)
missing = sorted(key for key in keys if not set(key.split()) <= marked)
units = [u for p in schema["properties"]["units"]["properties"].values() for u in p.get("enum", [])]
missing += [u for u in units if not re.search(r"(?<![\w/])" + re.escape(u) + r"(?![\w/])", page)]
print("\n".join("scantling-model.5 lacks " + m for m in missing))
sys.exit(bool(missing))
PY
count $? "scantling-model.5 has every key and unit of the schema"
sed -n '/^\.Sh EXAMPLES/,/^\.Ed/p' src/model/scantling-model.5 | sed '/^\./d' >"$work/example.json"
"$PROGRAM" size "$work/example.json" --quiet; count $? "the example of scantling-model.5 is sized"
if command -v mandoc >/dev/null 2>&1; then
    for page in src/cli/scantling.1 src/model/scantling-model.5; do
        mandoc -T lint -W style "$page" | grep -v "referenced manual not found: Xr scantling" >"$work/lint"
        [ ! -s "$work/lint" ]; count $? "mandoc has no word against $page: $(head -n 3 "$work/lint")"
    done
else
    echo "skipped: the style of the man pages, for want of mandoc"
fi

# ---- installation
case $BUILD in
*sanitize* | *coverage*)
    echo "skipped: installation, which the plain build tests"
    finish ;;
esac
install_words() { # install_words VERB VARIABLES...
    verb=$1
    shift
    "$MAKE" --no-print-directory -s "$verb" BUILD="$BUILD" "$@" >"$work/log" 2>&1
    code=$?
    [ "$code" = 0 ] || cat "$work/log"
    count $code "make $verb $*"
}
stage=$work/stage
install_words install DESTDIR="$stage" PREFIX=/opt/trusses
inside=$stage/opt/trusses
[ -z "$(find "$stage" ! -type d ! -path "$inside/*")" ]; count $? "nothing is put outside the prefix"
[ "$(readlink "$inside/lib/libscantling.so")" = libscantling.so.0 ]; count $? "libscantling.so leads to the soname"
version=$("$PROGRAM" --version | sed -n '1s/scantling //p')
[ "$(readlink "$inside/lib/libscantling.so.0")" = "libscantling.so.$version" ]; count $? "and that to the version"
objdump -p "$inside/lib/libscantling.so" | grep -q 'SONAME  *libscantling.so.0$'; count $? "the soname is libscantling.so.0"
! grep -rlq "$stage" "$inside/lib/pkgconfig" "$inside/share"; count $? "the stage is named nowhere"
grep -q '^prefix=/opt/trusses$' "$inside/lib/pkgconfig/scantling.pc"; count $? "the prefix stands in scantling.pc"
grep -q '^\.It Pa /opt/trusses/share/scantling/demo_roof.json' "$inside/share/man/man1/scantling.1"; count $? "and in the man page"
"$inside/bin/scantling" size "$inside/share/scantling/demo_roof.json" -o "$work/out" --quiet; count $? "the installed program sizes the installed demo"
for model in "$inside"/share/scantling/*.json "$inside"/share/scantling/benchmarks/*.json; do
    # shellcheck disable=SC2016 # the dollar belongs to the key
    schema=$(sed -n 's/.*"\$schema": "\([^"]*\)".*/\1/p' "$model" | head -n 1)
    case $schema in https:*) continue ;; esac
    [ -f "$(dirname "$model")/$schema" ]; count $? "the schema of $(basename "$model") lies where it says"
done
[ "$(find "$inside/share/scantling/benchmarks" -name '*.json' | wc -l)" = "$(find models/benchmarks -name '*.json' | wc -l)" ]
count $? "all benchmarks are installed"
"$PROGRAM" completion bash | cmp -s - "$inside/share/bash-completion/completions/scantling"; count $? "the completion is installed"
if command -v man >/dev/null 2>&1; then
    for page in "1 scantling" "5 scantling-model"; do
        # shellcheck disable=SC2086 # section and name are two words
        MANPATH=$inside/share/man man -w $page >/dev/null 2>&1; count $? "man finds $page"
    done
else
    echo "skipped: finding the pages, for want of man"
fi
if command -v pkg-config >/dev/null 2>&1; then
    # A second prefix, without a stage, as a user without rights would have it. LIBDIR of its own.
    home=$work/home
    install_words install PREFIX="$home" LIBDIR="$home/lib64"
    export PKG_CONFIG_PATH="$home/lib64/pkgconfig"
    [ "$(pkg-config --modversion scantling)" = "$version" ]; count $? "pkg-config knows the version"
    [ -f "$(pkg-config --variable=datadir scantling)/model.schema.json" ]; count $? "and where the data are"
    # shellcheck disable=SC2046 # the flags are several words
    ${CC:-cc} -std=c11 examples/size_a_truss.c $(pkg-config --cflags --libs scantling) -o "$work/example"
    count $? "the example is compiled against the installed library"
    LD_LIBRARY_PATH=$home/lib64 "$work/example" "$home/share/scantling/demo_roof.json" >"$work/told"; count $? "and runs"
    grep -q "Every limit is kept" "$work/told"; count $? "and prints the finding"
    LD_LIBRARY_PATH=$home/lib64 ldd "$work/example" | grep -q "$home/lib64/libscantling.so.0"; count $? "with the installed library"
    # The archive itself: -l would take the shared library that lies beside it.
    # shellcheck disable=SC2046
    ${CC:-cc} -std=c11 examples/size_a_truss.c $(pkg-config --cflags scantling) "$home/lib64/libscantling.a" \
        $(pkg-config --static --libs scantling | sed 's/-lscantling//') -o "$work/static"
    count $? "and against the static one"
    "$work/static" "$home/share/scantling/demo_roof.json" | cmp -s - "$work/told"; count $? "which says the same"
    # The staged tree, as a cross build sees it.
    PKG_CONFIG_SYSROOT_DIR=$stage PKG_CONFIG_PATH=$inside/lib/pkgconfig pkg-config --cflags --libs scantling >"$work/flags"
    grep -qF -e "-I$inside/include " "$work/flags" && grep -qF -e "-L$inside/lib " "$work/flags"
    count $? "the staged pkg-config file works under a sysroot"
    install_words uninstall PREFIX="$home" LIBDIR="$home/lib64"
    [ -z "$(find "$home" ! -type d)" ]; count $? "uninstall takes away what was installed"
    [ -z "$(find "$home" -type d -name '*scantling*')" ]; count $? "and the folders that were its own"
else
    echo "skipped: the use of the installed library, for want of pkg-config"
fi
# What is not ours stays.
echo mine >"$inside/share/scantling/my_roof.json"
echo mine >"$inside/bin/other"
install_words uninstall DESTDIR="$stage" PREFIX=/opt/trusses
[ "$(find "$stage" ! -type d | wc -l)" = 2 ] && [ -f "$inside/share/scantling/my_roof.json" ]; count $? "uninstall leaves what is not its own"

# ---- Debian packages
if command -v dpkg-deb >/dev/null 2>&1 && command -v dpkg-shlibdeps >/dev/null 2>&1; then
    install_words deb
    list() {
        dpkg-deb -c "$BUILD"/deb/"$1"_*.deb | awk '{print $6}' | sed -n 's|^\./\(.*[^/]\)$|\1|p' | sed "s|usr/lib/$(dpkg-architecture -qDEB_HOST_MULTIARCH)|LIB|" | sort
    }
    {
        echo usr/bin/scantling
        echo usr/share/bash-completion/completions/scantling
        for name in README.md SAFETY.md changelog.Debian.gz copyright; do echo usr/share/doc/scantling/$name; done
        echo usr/share/man/man1/scantling.1.gz
        echo usr/share/man/man5/scantling-model.5.gz
        (cd models && find benchmarks demo_roof.json model.schema.json -name '*.json') | sed 's|^|usr/share/scantling/|'
    } | sort >"$work/expected"
    list scantling | diff "$work/expected" -; count $? "scantling.deb holds the program, its pages and data"
    printf '%s\n' LIB/libscantling.so.0 "LIB/libscantling.so.$version" usr/share/doc/libscantling0/changelog.Debian.gz usr/share/doc/libscantling0/copyright >"$work/expected"
    list libscantling0 | diff "$work/expected" -; count $? "libscantling0.deb holds the shared library"
    printf '%s\n' LIB/libscantling.a LIB/libscantling.so LIB/pkgconfig/scantling.pc usr/include/scantling.h \
        usr/share/doc/libscantling-dev/changelog.Debian.gz usr/share/doc/libscantling-dev/copyright \
        usr/share/doc/libscantling-dev/examples/size_a_truss.c >"$work/expected"
    list libscantling-dev | diff "$work/expected" -; count $? "libscantling-dev.deb holds what compiling needs"
    for package in scantling libscantling0; do
        for library in libc6 libcholmod libamd libcjson; do
            dpkg-deb -f "$BUILD"/deb/"$package"_*.deb Depends | grep -q "$library"; count $? "$package depends on $library"
        done
    done
    dpkg-deb -f "$BUILD"/deb/libscantling-dev_*.deb Depends | grep -q "libscantling0 (= $version-1), libcjson-dev, libsuitesparse-dev"
    count $? "libscantling-dev depends on the library and on what it is made of"
    [ "$(dpkg-deb -f "$BUILD"/deb/scantling_*.deb Version)" = "$version-1" ]; count $? "the version is the program's"
    for package in "$BUILD"/deb/*.deb; do dpkg-deb -x "$package" "$work/root"; done
    "$work/root/usr/bin/scantling" size "$work/root/usr/share/scantling/demo_roof.json" --quiet; count $? "the packaged program runs"
    [ -z "$(find "$work/root" ! -type l -perm /022)" ]; count $? "no packaged file can be written by others"
    if [ -n "${SCT_TEST_FULL:-}" ]; then
        cp "$BUILD"/deb/*.deb "$work"
        install_words deb
        for package in "$work"/*.deb; do cmp -s "$package" "$BUILD/deb/$(basename "$package")"; count $? "$(basename "$package") is built twice to the same bytes"; done
    fi
else
    echo "skipped: Debian packages, for want of dpkg-dev"
fi
finish
