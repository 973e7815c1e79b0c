# tarewright: one Makefile, everything it makes goes to $(BUILD).
# `make help` lists the verbs.

BUILD  ?= build
PREFIX ?= /usr/local
CC     ?= gcc

# What a bare Debian machine needs beyond git and make: the one list. The second is for single verbs only.
PACKAGES       := gcc libc6-dev flex bison libcmocka-dev libgsl-dev libjansson-dev nettle-dev
PACKAGES_EXTRA := clang libclang-rt-dev lcov valgrind clang-format cppcheck

VERSION := 0.1.0

# The layers in the order data flows; a partial build names fewer, as in `make LAYERS="base fluid" build/tests/test_phase`.
LAYERS ?= base deck case fluid equilibrium filling result report

WARNINGS := -Wall -Wextra -Wpedantic -Wshadow -Wconversion -Wdouble-promotion -Wstrict-prototypes \
            -Wmissing-prototypes -Wswitch-enum -Wformat=2 -Wvla -Wundef -Werror
OPTIMISE ?= -O2
# No contraction into fused operations and no fast maths: two builds print the same digits.
CFLAGS   += -std=c17 $(OPTIMISE) -g -ffp-contract=off $(WARNINGS) $(EXTRA_CFLAGS)
CPPFLAGS += -Isrc -I$(BUILD)/generated -I. -Itests -DTAREWRIGHT_VERSION='"$(VERSION)"' -MMD -MP
LDLIBS   := -lgsl -lgslcblas -ljansson -lnettle -lm
LDFLAGS  += $(EXTRA_LDFLAGS)

GENERATED := $(if $(filter deck,$(LAYERS)),$(BUILD)/generated/deck_parser.c $(BUILD)/generated/deck_scanner.c)
SOURCES   := $(foreach layer,$(LAYERS),$(wildcard src/$(layer)/*.c))
OBJECTS   := $(SOURCES:%.c=$(BUILD)/%.o) $(GENERATED:%.c=%.o)
LIBRARY   := $(BUILD)/libtarewright.a
PROGRAM   := $(BUILD)/tarewright
TESTS     := $(patsubst tests/%.c,$(BUILD)/tests/%,$(wildcard tests/test_*.c))
SUPPORT   := $(patsubst tests/%.c,$(BUILD)/tests/%.o,$(wildcard tests/support/*.c))

.DELETE_ON_ERROR:
.SECONDARY:
.PHONY: all
all: $(PROGRAM)

$(PROGRAM): $(BUILD)/src/main.o $(LIBRARY)
	$(CC) $(CFLAGS) $(LDFLAGS) -o $@ $^ $(LDLIBS)

$(LIBRARY): $(OBJECTS)
	rm -f $@ && $(AR) rcs $@ $^

$(BUILD)/%.o: %.c
	@mkdir -p $(@D)
	$(CC) $(CPPFLAGS) $(CFLAGS) -c -o $@ $<

$(BUILD)/tests/test_%: $(BUILD)/tests/test_%.o $(SUPPORT) $(LIBRARY)
	$(CC) $(CFLAGS) $(LDFLAGS) -o $@ $^ -lcmocka $(LDLIBS)

-include $(OBJECTS:.o=.d) $(BUILD)/src/main.d $(wildcard $(BUILD)/tests/*.d $(BUILD)/tests/support/*.d)
