# scantling: `make` builds, `make demo` sets up and sizes the demo roof truss, `make test` runs the tests.
# `make` itself never touches the system; demo and test install missing Debian packages (as root or with sudo).

CC       ?= gcc
BUILD    ?= build
WARN      = -Wall -Wextra -Wpedantic -Wshadow -Wconversion -Wstrict-prototypes -Wmissing-prototypes -Werror=implicit-function-declaration
OPT      ?= -O2 -g
SAN      ?=
# -ffp-contract=off: the same bits with and without fused multiply-add
CFLAGS   += -std=c11 $(OPT) $(WARN) -ffp-contract=off -fvisibility=hidden -fPIC $(SAN) -Iinclude -Isrc
CPPFLAGS += -DNGPL -I/usr/include/suitesparse -I/usr/include/cjson
LDFLAGS  += $(SAN)
LDLIBS   += -lcholmod -lamd -lcjson -lm

LIB_SRC  := $(sort $(filter-out src/cli/%,$(wildcard src/*/*.c)))
CLI_SRC  := $(sort $(wildcard src/cli/*.c))
FAMILIES := $(sort $(wildcard models/sections/*.csv))
GEN      := $(BUILD)/families.c
LIB_OBJ  := $(LIB_SRC:%.c=$(BUILD)/%.o) $(BUILD)/families.o
CLI_OBJ  := $(CLI_SRC:%.c=$(BUILD)/%.o)
TESTS    := $(patsubst tests/%.c,$(BUILD)/tests/%,$(sort $(wildcard tests/test_*.c)))

.PHONY: all demo test test-full sanitize sanitized format clean packages test-packages
all: $(BUILD)/scantling $(BUILD)/libscantling.a $(BUILD)/libscantling.so

$(BUILD)/scantling: $(CLI_OBJ) $(BUILD)/libscantling.a
	$(CC) $(LDFLAGS) -o $@ $^ $(LDLIBS)
$(BUILD)/libscantling.a: $(LIB_OBJ)
	rm -f $@ && ar rcsD $@ $^
$(BUILD)/libscantling.so: $(LIB_OBJ)
	$(CC) -shared -Wl,-soname,libscantling.so.0 $(LDFLAGS) -o $@ $^ $(LDLIBS)
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

# ---- packages: what is missing is installed by demo and test, never by plain make -------------------------------------
BUILD_PACKAGES = gcc libc6-dev libcjson-dev libsuitesparse-dev
TEST_PACKAGES  = $(BUILD_PACKAGES) check liblapack-dev libblas-dev python3-jsonschema
PROBE       = printf '\#include <cJSON.h>\n\#include <cholmod.h>\nint main(void){cholmod_common c;return cholmod_start(&c)+(cJSON_Version()==0);}\n' | $(CC) $(CPPFLAGS) -x c - -o /dev/null $(LDLIBS)
TEST_PROBE  = printf '\#include <check.h>\nvoid dposv_(void);int main(void){dposv_();return check_minor_version;}\n' | $(CC) -x c - -o /dev/null -lcheck -lsubunit -lrt -lpthread -llapack -lblas -lm && python3 -c 'import jsonschema'

packages:
	@( $(PROBE) ) >/dev/null 2>&1 || sh .ci/packages $(BUILD_PACKAGES)
test-packages:
	@( $(PROBE) && $(TEST_PROBE) ) >/dev/null 2>&1 || sh .ci/packages $(TEST_PACKAGES)

# ---- what people run ---------------------------------------------------------------------------------------------------
demo: packages
	@$(MAKE) --no-print-directory -s all
	@$(BUILD)/scantling size models/demo_roof.json -o $(BUILD)/demo --force
	@echo
	@echo "Written into $(BUILD)/demo. Open drawing.svg in a browser, schedule.csv in a spreadsheet; result.json holds all"
	@echo "numbers, model.json the sized model. One member worked out: $(BUILD)/scantling explain $(BUILD)/demo/model.json --member T4"

test: test-packages
	@$(MAKE) --no-print-directory -s all $(TESTS)
	@BUILD=$(BUILD) sh tests/run.sh $(TESTS)

# Slow and random tests as well.
test-full: test-packages
	@$(MAKE) --no-print-directory -s all $(TESTS)
	@BUILD=$(BUILD) SCT_TEST_FULL=1 CK_DEFAULT_TIMEOUT=600 sh tests/run.sh $(TESTS)

# The whole suite under address, undefined-behaviour and float checks; the first report ends a run.
sanitize: test-packages
	@$(MAKE) --no-print-directory -s BUILD=$(BUILD)/sanitize OPT="-O1 -g" \
	  SAN="-fsanitize=address,undefined,float-cast-overflow,float-divide-by-zero -fno-sanitize-recover=all -fno-omit-frame-pointer" sanitized
sanitized: all $(TESTS)
	@BUILD=$(BUILD) CK_DEFAULT_TIMEOUT=120 sh tests/run.sh $(TESTS)

format:
	clang-format -i $(wildcard src/*/*.[ch] tests/*.[ch] examples/*.c include/*.h)

clean:
	rm -rf $(BUILD)
-include $(LIB_OBJ:.o=.d) $(CLI_OBJ:.o=.d) $(TESTS:=.d)
