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

.PHONY: all demo test test-full sanitize format clean packages test-packages
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

clean:
	rm -rf $(BUILD)
-include $(LIB_OBJ:.o=.d) $(CLI_OBJ:.o=.d) $(TESTS:=.d)
