# tarewright: one Makefile; everything it makes goes to $(BUILD). `make help` lists the verbs.

BUILD  ?= build
PREFIX ?= /usr/local
ifeq ($(origin CC),default)
CC := gcc
endif

# What a bare Debian machine needs beyond git and make: the one list. The second is for the verbs that say so.
PACKAGES       := gcc libc6-dev flex bison libcmocka-dev libgsl-dev libjansson-dev nettle-dev
PACKAGES_EXTRA := clang libclang-rt-dev clang-format cppcheck lcov valgrind

VERSION := 0.1.0
CORES   := $(shell nproc)

# The layers in the order data flows. A partial build names fewer: make LAYERS="base fluid" build/tests/test_phase
LAYERS ?= base deck case fluid equilibrium filling result report run

WARNINGS := -Wall -Wextra -Wpedantic -Wshadow -Wconversion -Wdouble-promotion -Wstrict-prototypes \
            -Wmissing-prototypes -Wswitch-enum -Wformat=2 -Wvla -Wundef -Werror
OPTIMISE ?= -O2
# No contraction into fused operations and no fast maths: two builds print the same digits.
# Threads by OpenMP where it comes with the compiler; elsewhere its pragmas are passed over, and answers are the same.
THREADS  := $(if $(findstring clang,$(CC)),-Wno-unknown-pragmas,-fopenmp)
# Nobody reads errno after mathematics, or traps: square roots and choices need no calls. No digit depends on it.
ARITHMETIC := -ffp-contract=off -fno-math-errno -fno-trapping-math
CFLAGS   += -std=c17 $(OPTIMISE) -g $(ARITHMETIC) $(WARNINGS) $(THREADS) $(EXTRA_CFLAGS)
CPPFLAGS += -Isrc -Itests -I. -I$(BUILD)/generated -DTAREWRIGHT_VERSION='"$(VERSION)"' -MMD -MP
LDLIBS   := -lgsl -lgslcblas -ljansson -lnettle -lm
LDFLAGS  += $(EXTRA_CFLAGS)

PARSER    := $(if $(filter deck,$(LAYERS)),$(BUILD)/generated/deck_parser $(BUILD)/generated/deck_scanner)
SOURCES   := $(foreach layer,$(LAYERS),$(wildcard src/$(layer)/*.c))
OBJECTS   := $(SOURCES:%.c=$(BUILD)/%.o) $(PARSER:%=%.o)
LIBRARY   := $(BUILD)/libtarewright.a
PROGRAM   := $(BUILD)/tarewright
TESTS     := $(patsubst tests/%.c,$(BUILD)/tests/%,$(wildcard tests/test_*.c))
SUPPORT   := $(patsubst tests/%.c,$(BUILD)/tests/%.o,$(wildcard tests/support/*.c))
DEMO      := decks/carbon-dioxide-fifty.deck

# `make V=1` shows the commands; otherwise a word and a name for each.
ifeq ($(V),)
Q := @
say = @echo "  $(1)	$(2)"
endif

.DELETE_ON_ERROR:
.SECONDARY:
.PHONY: all demo test check asan valgrind coverage fuzz bench campaign lint format install clean help packages packages-extra update

all: $(PROGRAM) ## build the program

# ---- building ------------------------------------------------------------------------------------------------------

$(PROGRAM): $(BUILD)/src/main.o $(LIBRARY)
	$(call say,link,$@)
	$(Q)$(CC) $(CFLAGS) $(LDFLAGS) -o $@ $^ $(LDLIBS)

$(LIBRARY): $(OBJECTS)
	$(call say,archive,$@)
	$(Q)rm -f $@ && $(AR) rcs $@ $^

$(BUILD)/%.o: %.c
	$(call say,compile,$<)
	@mkdir -p $(@D)
	$(Q)$(CC) $(CPPFLAGS) $(CFLAGS) -c -o $@ $<

$(BUILD)/generated/deck_parser.c $(BUILD)/generated/deck_parser.h &: grammar/deck.y
	$(call say,bison,$<)
	@mkdir -p $(@D)
	$(Q)bison -Wall -Wcounterexamples -Wdangling-alias -Werror --header=$(BUILD)/generated/deck_parser.h \
	      -o $(BUILD)/generated/deck_parser.c $<

$(BUILD)/generated/deck_scanner.c $(BUILD)/generated/deck_scanner.h &: grammar/deck.l
	$(call say,flex,$<)
	@mkdir -p $(@D)
	$(Q)flex --header-file=$(BUILD)/generated/deck_scanner.h -o $(BUILD)/generated/deck_scanner.c $<

# Generated code keeps every warning but the two its skeletons cannot meet.
$(BUILD)/generated/%.o: $(BUILD)/generated/%.c
	$(call say,compile,$<)
	$(Q)$(CC) $(CPPFLAGS) $(CFLAGS) -Wno-switch-enum -Wno-conversion -c -o $@ $<

$(filter $(BUILD)/src/deck/%.o $(BUILD)/generated/%.o,$(OBJECTS)): | $(PARSER:%=%.h)

$(BUILD)/tests/test_%: $(BUILD)/tests/test_%.o $(SUPPORT) $(LIBRARY)
	$(call say,link,$@)
	$(Q)$(CC) $(CFLAGS) $(LDFLAGS) -o $@ $^ -lcmocka $(LDLIBS)

$(BUILD)/bench $(BUILD)/campaign: $(BUILD)/%: $(BUILD)/tests/%.o $(SUPPORT) $(LIBRARY)
	$(call say,link,$@)
	$(Q)$(CC) $(CFLAGS) $(LDFLAGS) -o $@ $^ -lcmocka $(LDLIBS)

# ---- the README's two ----------------------------------------------------------------------------------------------

demo: ## install what is missing, build, run the demo deck and print its listing
	@$(MAKE) --no-print-directory packages
	@$(MAKE) --no-print-directory -j$(CORES) all
	$(PROGRAM) run $(DEMO) --library decks/library --out $(BUILD)

test: ## install what is missing, build and run all tests
	@$(MAKE) --no-print-directory packages
	@$(MAKE) --no-print-directory -j$(CORES) check

# ---- testing -------------------------------------------------------------------------------------------------------

check: $(PROGRAM) $(TESTS) ## all tests, on a machine that has the packages
	@passed=0; failed=; for test in $(TESTS); do \
	    if TAREWRIGHT=$(PROGRAM) $$test >$$test.log 2>&1; then passed=$$((passed + 1)); \
	    else cat $$test.log; failed="$$failed $$(basename $$test)"; fi; \
	done; \
	cat $(TESTS:%=%.log) | grep -E '^\[  PASSED' | awk '{ n += $$4 } END { print n " test functions passed" }'; \
	for test in $$failed; do echo "FAILED: $$test (log in $(BUILD)/tests)"; done; \
	set -- $$failed; echo "test programs: $$passed passed, $$# failed"; test $$# -eq 0

update: $(PROGRAM) $(TESTS) ## write the expected listings and diagnostics anew; read the difference before committing
	@for test in $(TESTS); do TAREWRIGHT=$(PROGRAM) TAREWRIGHT_UPDATE_GOLDEN=1 $$test >$$test.log 2>&1 || true; done
	git status --short tests/golden

SANITIZERS := address,undefined,float-divide-by-zero,float-cast-overflow
asan: ## all tests under the address and undefined-behaviour sanitizers
	$(MAKE) BUILD=$(BUILD)/asan OPTIMISE=-O1 \
	    EXTRA_CFLAGS="-fsanitize=$(SANITIZERS) -fno-sanitize-recover=all -fno-omit-frame-pointer" check

valgrind: $(PROGRAM) packages-extra ## the demo deck under valgrind
	valgrind --quiet --leak-check=full --error-exitcode=9 $(PROGRAM) run $(DEMO) --library decks/library --out $(BUILD) >$(BUILD)/valgrind.listing

coverage: packages-extra ## line coverage of src/ by the tests
	$(MAKE) BUILD=$(BUILD)/coverage OPTIMISE=-O0 EXTRA_CFLAGS=--coverage check
	lcov --quiet --capture --directory $(BUILD)/coverage --output-file $(BUILD)/coverage/all.info
	lcov --quiet --extract $(BUILD)/coverage/all.info '*/src/*' --output-file $(BUILD)/coverage/src.info
	lcov --list $(BUILD)/coverage/src.info

FUZZ_SECONDS ?= 60
fuzz: packages-extra ## each fuzz target for FUZZ_SECONDS, from the corpus in tests/corpus
	$(MAKE) BUILD=$(BUILD)/fuzz CC=clang OPTIMISE=-O1 \
	    EXTRA_CFLAGS="-fsanitize=fuzzer-no-link,$(SANITIZERS) -fno-sanitize-recover=all" \
	    FUZZ_SECONDS=$(FUZZ_SECONDS) fuzz-parser fuzz-program

.PHONY: fuzz-parser fuzz-program
fuzz-parser fuzz-program: fuzz-%: $(BUILD)/tests/fuzz_%.o $(LIBRARY)
	$(CC) $(CFLAGS) -fsanitize=fuzzer -o $(BUILD)/$@ $^ $(LDLIBS)
	@mkdir -p $(BUILD)/corpus-$* $(BUILD)/crashes
	$(BUILD)/$@ -max_total_time=$(FUZZ_SECONDS) -timeout=10 -rss_limit_mb=4096 -max_len=8192 -print_final_stats=1 \
	    -dict=tests/corpus/words.dict -artifact_prefix=$(BUILD)/crashes/ $(BUILD)/corpus-$* tests/corpus/$*

bench: $(BUILD)/bench ## operations for each second, and as multiples of one exp call
	$(BUILD)/bench

STATES ?= 1000000
SEED   ?= 1
METHOD ?= peng-robinson
campaign: $(BUILD)/campaign ## STATES random states of mixtures from SEED by METHOD, each held against the conditions of equilibrium
	$(BUILD)/campaign $(STATES) $(SEED) $(METHOD)

# ---- care ----------------------------------------------------------------------------------------------------------

# Which layers a layer's files may include, beside its own and base.
MAY_base        :=
MAY_deck        :=
MAY_fluid       :=
MAY_case        := deck fluid/spec
MAY_equilibrium := fluid
MAY_filling     := case fluid equilibrium result
MAY_result      :=
MAY_report      := result
MAY_run         := deck case fluid filling result report
nothing :=
one_of  = $(subst $(nothing) $(nothing),|,$(strip $(1)))

lint: ## layer rules, headers that compile alone, marks left behind, cppcheck where it is installed
	@bad=0; $(foreach layer,base deck case fluid equilibrium filling result report run, \
	    found=$$(grep -nE '^#include "[a-z_]+/' src/$(layer)/*.[ch] /dev/null | \
	        grep -vE '"($(call one_of,base $(layer) $(MAY_$(layer))))[/.]' ); \
	    if [ -n "$$found" ]; then echo "layer $(layer) reaches too far:"; echo "$$found"; bad=1; fi;) exit $$bad
	@for header in src/*/*.h; do $(CC) -std=c17 -Isrc $(WARNINGS) -fsyntax-only -x c $$header || exit 1; done
	@! grep -nIE '\b(TODO|FIXME|XXX|HACK)\b' -r grammar src tests/*.c decks
	@! grep -nE '.{121}' src/*/*.[ch] src/*.c tests/*.c tests/support/*.[ch]
	@if command -v cppcheck >/dev/null; then \
	    cppcheck --quiet --std=c11 --enable=warning,portability --inline-suppr --error-exitcode=1 -Isrc src; fi

format: packages-extra ## lay out the C sources as .clang-format says
	clang-format -i src/*.c src/*/*.[ch] tests/*.c tests/support/*.[ch]

install: $(PROGRAM) ## to DESTDIR and PREFIX: program, library decks, language reference
	install -d $(DESTDIR)$(PREFIX)/bin $(DESTDIR)$(PREFIX)/share/doc/tarewright
	install -m 755 $(PROGRAM) $(DESTDIR)$(PREFIX)/bin/tarewright
	cd decks/library && find . -name '*.deck' -exec install -D -m 644 {} $(abspath $(DESTDIR)$(PREFIX))/share/tarewright/library/{} \;
	install -m 644 README.md LICENSE grammar/reference.md $(DESTDIR)$(PREFIX)/share/doc/tarewright

clean: ## remove everything made
	rm -rf $(BUILD)

# ---- packages ------------------------------------------------------------------------------------------------------

AS_ROOT := $(if $(filter 0,$(shell id -u)),,sudo)
INSTALL_MISSING = missing=; for package in $(1); do \
	    dpkg-query -W -f '$${Status}' $$package 2>/dev/null | grep -q 'ok installed' || missing="$$missing $$package"; done; \
	if [ -n "$$missing" ]; then echo "installing:$$missing"; \
	    $(AS_ROOT) apt-get update -qq && \
	    $(AS_ROOT) env DEBIAN_FRONTEND=noninteractive apt-get install -y -qq --no-install-recommends $$missing >/dev/null; fi

packages:
	@$(call INSTALL_MISSING,$(PACKAGES))
packages-extra:
	@$(call INSTALL_MISSING,$(PACKAGES_EXTRA))

help: ## this list
	@awk -F ':.*## ' '/^[a-z-]+:.*## / { printf "  make %-10s %s\n", $$1, $$2 }' Makefile

-include $(OBJECTS:.o=.d) $(BUILD)/src/main.d $(wildcard $(BUILD)/tests/*.d $(BUILD)/tests/support/*.d)
