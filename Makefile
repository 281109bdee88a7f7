# scantling: `make` builds, `make demo` sets up and sizes the demo roof truss, `make test` runs the tests.
# `make install` puts it under PREFIX, `make deb` builds Debian packages. Only demo, test, lint and coverage install missing
# Debian packages (as root or with sudo); the others never touch the system.

CC       ?= gcc
BUILD    ?= build
WARN      = -Wall -Wextra -Wpedantic -Wshadow -Wconversion -Wstrict-prototypes -Wmissing-prototypes -Werror=implicit-function-declaration
OPT      ?= -O2 -g
SAN      ?=
# -ffp-contract=off: the same bits with and without fused multiply-add
CFLAGS   += -std=c11 $(OPT) $(WARN) -ffp-contract=off -fvisibility=hidden -fPIC $(SAN) -Iinclude -Isrc
CPPFLAGS += -DNGPL -I/usr/include/suitesparse -I/usr/include/cjson
LDFLAGS  += $(SAN)
export CC SAN # for the tests that compile something
LDLIBS   += -lcholmod -lamd -lcjson -lm

LIB_SRC  := $(sort $(filter-out src/cli/%,$(wildcard src/*/*.c)))
CLI_SRC  := $(sort $(wildcard src/cli/*.c))
FAMILIES := $(sort $(wildcard models/sections/*.csv))
GEN      := $(BUILD)/families.c
LIB_OBJ  := $(LIB_SRC:%.c=$(BUILD)/%.o) $(BUILD)/families.o
CLI_OBJ  := $(CLI_SRC:%.c=$(BUILD)/%.o)
TESTS    := $(patsubst tests/%.c,$(BUILD)/tests/%,$(sort $(wildcard tests/test_*.c)))

# The version stands in the header alone; the number after .so. changes when old programs no longer run with the library.
VERSION  := $(shell sed -n 's/^\#define SCT_VERSION "\(.*\)"/\1/p' include/scantling.h)
SONAME    = libscantling.so.0

.PHONY: all fuzz fuzzers linked-fuzzers demo test test-full sanitize sanitized format clean packages test-packages bench bench-packages install uninstall deb lint coverage covered
all: $(BUILD)/scantling $(BUILD)/libscantling.a $(BUILD)/libscantling.so $(BUILD)/$(SONAME)

$(BUILD)/scantling: $(CLI_OBJ) $(BUILD)/libscantling.a
	$(CC) $(LDFLAGS) -o $@ $^ $(LDLIBS)
$(BUILD)/libscantling.a: $(LIB_OBJ)
	rm -f $@ && ar rcsD $@ $^
$(BUILD)/libscantling.so: $(LIB_OBJ)
	$(CC) -shared -Wl,-soname,$(SONAME) $(LDFLAGS) -o $@ $^ $(LDLIBS)
$(BUILD)/$(SONAME): $(BUILD)/libscantling.so
	ln -sf libscantling.so $@
$(BUILD)/%.o: %.c
	@mkdir -p $(@D)
	$(CC) $(CPPFLAGS) $(CFLAGS) -MMD -MP -c -o $@ $<

# The shipped section families: models/sections/*.csv as one C file of strings, read by model/families.c.
$(GEN): $(FAMILIES) src/model/embed.sh
	@mkdir -p $(@D)
	sh src/model/embed.sh $(FAMILIES) > $@.tmp && mv $@.tmp $@
$(BUILD)/families.o: $(GEN)
	$(CC) $(CPPFLAGS) $(CFLAGS) -c -o $@ $<

$(BUILD)/tests/%: tests/%.c $(BUILD)/libscantling.a
	@mkdir -p $(@D)
	$(CC) $(CPPFLAGS) $(CFLAGS) -MMD -MP -Itests -o $@ $< $(BUILD)/libscantling.a $(LDFLAGS) -lcheck -lsubunit -lrt -lpthread -llapack -lblas $(LDLIBS)

# Requests to arenas are led through the test.
$(BUILD)/tests/test_memory: private LDFLAGS += -Wl,--wrap=sct_arena_array -Wl,--wrap=sct_arena_string

# The program whole, its main and its calls to the system led through the test.
comma := ,
FAULTS := main open read write close fsync rename link unlink mkdir stat lstat fstat access fflush \
          $(if $(findstring address,$(SAN)),malloc calloc realloc free)
$(BUILD)/tests/test_faults: tests/test_faults.c $(CLI_OBJ) $(BUILD)/libscantling.a
	@mkdir -p $(@D)
	$(CC) $(CPPFLAGS) $(CFLAGS) -MMD -MP -Itests -o $@ $< $(CLI_OBJ) $(BUILD)/libscantling.a $(LDFLAGS) \
	  $(FAULTS:%=-Wl$(comma)--wrap=%) -lcheck -lsubunit -lrt -lpthread -lsuitesparseconfig $(LDLIBS)

# Mistakes of the program's own are made there, between its parts.
MISTAKES := main sct_duty_analyse_areas sct_accuracy_refine sct_model_parse sct_skyline_factor sct_sparse_update
$(BUILD)/tests/test_self_check: tests/test_self_check.c $(CLI_OBJ) $(BUILD)/libscantling.a
	@mkdir -p $(@D)
	$(CC) $(CPPFLAGS) $(CFLAGS) -MMD -MP -Itests -o $@ $< $(CLI_OBJ) $(BUILD)/libscantling.a $(LDFLAGS) \
	  $(MISTAKES:%=-Wl$(comma)--wrap=%) -lcheck -lsubunit -lrt -lpthread $(LDLIBS)

# Fuzzers (tests/fuzz): kept inputs are replayed by the tests; `make fuzz` runs libFuzzer for FUZZ_SECONDS each (clang,
# libclang-rt-14-dev); FUZZ=1 CC=afl-clang-fast builds the replay programs for AFL++.
FUZZERS      := gate reader analysis
FUZZ_SECONDS ?= 60
FUZZ_SAN     ?= address,undefined,float-cast-overflow,float-divide-by-zero
REPLAYS      := $(FUZZERS:%=$(BUILD)/tests/fuzz_%)
$(BUILD)/tests/fuzz_%: tests/fuzz/%.c tests/fuzz/replay.c tests/fuzz/fuzz.h $(BUILD)/libscantling.a
	@mkdir -p $(@D)
	$(CC) $(CPPFLAGS) $(CFLAGS) -o $@ tests/fuzz/$*.c tests/fuzz/replay.c $(BUILD)/libscantling.a $(LDFLAGS) $(LDLIBS)
fuzzers:
	@$(MAKE) --no-print-directory -s BUILD=$(BUILD)/libfuzzer CC=clang OPT="-O1 -g" \
	  SAN="-fsanitize=fuzzer-no-link$(comma)$(FUZZ_SAN) -fno-sanitize-recover=all" linked-fuzzers
linked-fuzzers: $(FUZZERS:%=$(BUILD)/fuzz_%)
$(BUILD)/fuzz_%: tests/fuzz/%.c tests/fuzz/fuzz.h $(BUILD)/libscantling.a
	$(CC) $(CPPFLAGS) $(CFLAGS) -fsanitize=fuzzer -o $@ $< $(BUILD)/libscantling.a $(LDFLAGS) $(LDLIBS)
fuzz: fuzzers
	@BUILD=$(BUILD) FUZZ_SECONDS=$(FUZZ_SECONDS) sh tests/fuzz/run.sh $(FUZZERS)

# ---- packages: what is missing is installed by demo and test, never by plain make -------------------------------------
BUILD_PACKAGES = gcc libc6-dev libcjson-dev libsuitesparse-dev
TEST_PACKAGES  = $(BUILD_PACKAGES) check liblapack-dev libblas-dev python3-jsonschema
PROBE       = printf '\#include <cJSON.h>\n\#include <cholmod.h>\nint main(void){cholmod_common c;return cholmod_start(&c)+(cJSON_Version()==0);}\n' | $(CC) $(CPPFLAGS) -x c - -o /dev/null $(LDLIBS)
TEST_PROBE  = printf '\#include <check.h>\nvoid dposv_(void);int main(void){dposv_();return check_minor_version;}\n' | $(CC) -x c - -o /dev/null -lcheck -lsubunit -lrt -lpthread -llapack -lblas -lm && python3 -c 'import jsonschema'

# Without these some tests are skipped in so many words; their installation is tried once.
EXTRA_PACKAGES = mandoc pkgconf dpkg-dev
EXTRA_PROBE = for tool in mandoc pkg-config dpkg-shlibdeps; do command -v $$tool || exit 1; done

BENCH_PACKAGES = $(BUILD_PACKAGES) libnlopt-dev
BENCH_PROBE = printf '\#include <nlopt.h>\nint main(void){return nlopt_create(NLOPT_LD_MMA,1)==0;}\n' | $(CC) -x c - -o /dev/null -lnlopt -lm

packages:
	@( $(PROBE) ) >/dev/null 2>&1 || sh .ci/packages $(BUILD_PACKAGES)
bench-packages:
	@( $(PROBE) && $(BENCH_PROBE) ) >/dev/null 2>&1 || sh .ci/packages $(BENCH_PACKAGES)
test-packages:
	@( $(PROBE) && $(TEST_PROBE) ) >/dev/null 2>&1 || sh .ci/packages $(TEST_PACKAGES)
	@( $(EXTRA_PROBE) ) >/dev/null 2>&1 || test -e $(BUILD)/.extras || sh .ci/packages $(EXTRA_PACKAGES) || true
	@mkdir -p $(BUILD) && touch $(BUILD)/.extras

# ---- what people run ---------------------------------------------------------------------------------------------------
demo: packages
	@$(MAKE) --no-print-directory -s all
	@$(BUILD)/scantling size models/demo_roof.json -o $(BUILD)/demo --force
	@echo
	@echo "Written into $(BUILD)/demo. Open drawing.svg in a browser, schedule.csv in a spreadsheet; result.json holds all"
	@echo "numbers, model.json the sized model. One member worked out: $(BUILD)/scantling explain $(BUILD)/demo/model.json --member T4"

test: test-packages
	@$(MAKE) --no-print-directory -s all $(TESTS) $(REPLAYS)
	@BUILD=$(BUILD) sh tests/run.sh $(TESTS)

# Slow and random tests as well.
test-full: test-packages
	@$(MAKE) --no-print-directory -s all $(TESTS) $(REPLAYS)
	@BUILD=$(BUILD) SCT_TEST_FULL=1 CK_DEFAULT_TIMEOUT=600 sh tests/run.sh $(TESTS)
	@command -v valgrind >/dev/null 2>&1 || sh .ci/packages valgrind || true
	@sh tests/memory.sh $(TESTS)
	@python3 tests/mutate.py --count 12 --floor 70

# The whole suite under address, undefined-behaviour and float checks; the first report ends a run.
sanitize: test-packages
	@$(MAKE) --no-print-directory -s BUILD=$(BUILD)/sanitize OPT="-O1 -g" \
	  SAN="-fsanitize=address,undefined,float-cast-overflow,float-divide-by-zero -fno-sanitize-recover=all -fno-omit-frame-pointer" sanitized
sanitized: all $(TESTS) $(REPLAYS)
	@BUILD=$(BUILD) CK_DEFAULT_TIMEOUT=120 sh tests/run.sh $(TESTS)

# ---- installation: DESTDIR stages it; every path is made here, so that PREFIX may differ from one call to the next ----------
PREFIX   ?= /usr/local
BINDIR   ?= $(PREFIX)/bin
LIBDIR   ?= $(PREFIX)/lib
INCLUDEDIR ?= $(PREFIX)/include
DATADIR  ?= $(PREFIX)/share
MANDIR   ?= $(DATADIR)/man
COMPLETIONDIR ?= $(DATADIR)/bash-completion/completions
PKGCONFIGDIR ?= $(LIBDIR)/pkgconfig
DOCDIR   ?= $(DATADIR)/doc/scantling
INSTALL  ?= install
OURDATA   = $(DATADIR)/scantling
BENCHMARKS := $(sort $(wildcard models/benchmarks/*.json))
INSTALLED = $(BINDIR)/scantling $(INCLUDEDIR)/scantling.h $(LIBDIR)/libscantling.a $(LIBDIR)/libscantling.so \
            $(LIBDIR)/$(SONAME) $(LIBDIR)/libscantling.so.$(VERSION) $(PKGCONFIGDIR)/scantling.pc $(MANDIR)/man1/scantling.1 \
            $(MANDIR)/man5/scantling-model.5 $(COMPLETIONDIR)/scantling $(OURDATA)/model.schema.json $(OURDATA)/demo_roof.json \
            $(BENCHMARKS:models/%=$(OURDATA)/%) $(DOCDIR)/README.md $(DOCDIR)/SAFETY.md $(DOCDIR)/examples/size_a_truss.c

install: all
	$(INSTALL) -D -m 755 $(BUILD)/scantling $(DESTDIR)$(BINDIR)/scantling
	$(INSTALL) -D -m 644 include/scantling.h $(DESTDIR)$(INCLUDEDIR)/scantling.h
	$(INSTALL) -D -m 644 $(BUILD)/libscantling.a $(DESTDIR)$(LIBDIR)/libscantling.a
	$(INSTALL) -D -m 644 $(BUILD)/libscantling.so $(DESTDIR)$(LIBDIR)/libscantling.so.$(VERSION)
	ln -sf libscantling.so.$(VERSION) $(DESTDIR)$(LIBDIR)/$(SONAME)
	ln -sf $(SONAME) $(DESTDIR)$(LIBDIR)/libscantling.so
	$(INSTALL) -d $(DESTDIR)$(PKGCONFIGDIR) $(DESTDIR)$(MANDIR)/man1 $(DESTDIR)$(MANDIR)/man5 $(DESTDIR)$(COMPLETIONDIR)
	printf '%s\n' 'prefix=$(PREFIX)' 'libdir=$(LIBDIR)' 'includedir=$(INCLUDEDIR)' 'datadir=$(OURDATA)' '' 'Name: scantling' \
	  'Description: sizes the members of roof trusses' 'Version: $(VERSION)' 'Requires.private: libcjson' \
	  'Libs: -L$${libdir} -lscantling' 'Libs.private: -lcholmod -lamd -lm' 'Cflags: -I$${includedir}' \
	  > $(DESTDIR)$(PKGCONFIGDIR)/scantling.pc
	sed 's|/usr/local/share/scantling|$(OURDATA)|' src/cli/scantling.1 > $(DESTDIR)$(MANDIR)/man1/scantling.1
	sed 's|/usr/local/share/scantling|$(OURDATA)|' src/model/scantling-model.5 > $(DESTDIR)$(MANDIR)/man5/scantling-model.5
	$(BUILD)/scantling completion bash > $(DESTDIR)$(COMPLETIONDIR)/scantling
	$(INSTALL) -d $(DESTDIR)$(OURDATA)/benchmarks $(DESTDIR)$(DOCDIR)/examples
	$(INSTALL) -m 644 models/model.schema.json models/demo_roof.json $(DESTDIR)$(OURDATA)
	$(INSTALL) -m 644 $(BENCHMARKS) $(DESTDIR)$(OURDATA)/benchmarks
	$(INSTALL) -m 644 README.md SAFETY.md $(DESTDIR)$(DOCDIR)
	$(INSTALL) -m 644 examples/size_a_truss.c $(DESTDIR)$(DOCDIR)/examples

# Takes away what install put there, and the folders that are scantling's own when nothing else is in them.
uninstall:
	rm -f $(INSTALLED:%=$(DESTDIR)%)
	-rmdir $(DESTDIR)$(OURDATA)/benchmarks $(DESTDIR)$(OURDATA) $(DESTDIR)$(DOCDIR)/examples $(DESTDIR)$(DOCDIR) 2>/dev/null || true

# Zero findings, or the exceptions and their reasons in .ci/lint and .clang-tidy.
LINT_PACKAGES = gcc clang clang-tidy cppcheck shellcheck mandoc check
lint: packages
	@( for tool in clang clang-tidy cppcheck shellcheck mandoc; do command -v $$tool || exit 1; done ) >/dev/null 2>&1 || sh .ci/packages $(LINT_PACKAGES)
	@$(MAKE) --no-print-directory -s all
	@BUILD=$(BUILD) sh .ci/lint

deb: all
	BUILD=$(BUILD) VERSION=$(VERSION) MAKE=$(MAKE) sh .ci/deb

# Ratios against CHOLMOD and NLopt in one run, as text and in $(BUILD)/bench.json; FULL=full: the largest models as well.
BENCH_SRC := $(sort $(wildcard tests/bench*.c))
$(BUILD)/bench: $(BENCH_SRC) tests/bench.h tests/bench_side.h tests/grid.h tests/model_build.h $(BUILD)/libscantling.a
	$(CC) $(CPPFLAGS) $(CFLAGS) -Itests -o $@ $(BENCH_SRC) $(BUILD)/libscantling.a $(LDFLAGS) -lnlopt $(LDLIBS)
bench: bench-packages
	@$(MAKE) --no-print-directory -s all $(BUILD)/bench
	@OMP_THREAD_LIMIT=1 OPENBLAS_NUM_THREADS=1 $(BUILD)/bench $(BUILD)/bench.json $(FULL)

# Which lines and branches of src the suite takes: build/coverage/coverage.html. Floors below which it fails, in per cent.
# Whether the tests pass is for `make test` to say: a few look at files and handles that the counting itself uses.
LINES_FLOOR    ?= 98
BRANCHES_FLOOR ?= 92
coverage: test-packages
	@command -v gcovr >/dev/null 2>&1 || sh .ci/packages gcovr
	@find $(BUILD)/coverage -name '*.gcda' -delete 2>/dev/null || true
	@$(MAKE) --no-print-directory -s BUILD=$(BUILD)/coverage OPT="-O0 -g" SAN="--coverage -fprofile-update=atomic" covered
	@BUILD=$(BUILD)/coverage LINES_FLOOR=$(LINES_FLOOR) BRANCHES_FLOOR=$(BRANCHES_FLOOR) sh .ci/coverage
covered: all $(TESTS) $(REPLAYS)
	-@BUILD=$(BUILD) SCT_TEST_MEMORY=1 CK_DEFAULT_TIMEOUT=120 sh tests/run.sh $(TESTS) >$(BUILD)/tests.log 2>&1; tail -n 1 $(BUILD)/tests.log

format:
	clang-format -i $(wildcard src/*/*.[ch] tests/*.[ch] examples/*.c include/*.h)

clean:
	rm -rf $(BUILD)
-include $(LIB_OBJ:.o=.d) $(CLI_OBJ:.o=.d) $(TESTS:=.d)
