# gridleak. The two commands of the README: make demo, make check.
VERSION = 0.1.0
BUILD = build
PREFIX = /usr/local
CC = gcc
OPTIMISE = -O2 -g
WARNINGS = -Wall -Wextra -Wconversion -Wshadow -Werror=switch
EXTRA =
CFLAGS = -std=c11 -D_GNU_SOURCE -DGRIDLEAK_VERSION='"$(VERSION)"' $(OPTIMISE) $(WARNINGS) $(EXTRA) \
         -Isrc $(PACKAGE_CFLAGS)
# Empty on a bare machine, where the first make only installs and calls make again.
PACKAGE_CFLAGS := $(shell pkg-config --cflags harfbuzz-subset yaml-0.1 libcmark cminpack libcjson 2>/dev/null)
LDLIBS := $(shell pkg-config --libs yaml-0.1 libcmark harfbuzz-subset libpng libturbojpeg cminpack nettle \
         libcjson 2>/dev/null) -lutf8proc -lhpdf -ldeflate -lpthread -lm

# What a bare Debian 12 needs to build and run, and what it needs besides to check.
BUILD_PACKAGES = gcc make libc6-dev pkg-config libyaml-dev libcmark-dev libhpdf-dev libharfbuzz-dev \
    libdeflate-dev libpng-dev libturbojpeg0-dev libcminpack-dev nettle-dev libcjson-dev libutf8proc-dev \
    fonts-open-sans fonts-dejavu-core fonts-dejavu-extra icc-profiles-free
CHECK_PACKAGES = libcmocka-dev clang-format clang-tidy cppcheck valgrind jq ngspice qpdf poppler-utils \
    openjdk-17-jre-headless libpdfbox2-java libactivation-java libjaxb-api-java nodejs npm chromium \
    python3 python3-yaml python3-jsonschema git openssh-client

# From low to high: a module may use those before it and no other.
MODULES = base quantity reference job assess report write archive
objects_of = $(patsubst src/%.c,$(BUILD)/src/%.o,$(wildcard src/$(1)/*.c))
library_of = $(BUILD)/lib$(1).a
# The libraries of a module and of all below it, highest first, as the linker wants them.
down_from = $(call reverse,$(call up_to,$(1),$(MODULES)))
up_to = $(if $(filter $(1),$(firstword $(2))),$(1),$(if $(2),$(firstword $(2)) $(call up_to,$(1),$(wordlist 2,99,$(2)))))
reverse = $(if $(1),$(call reverse,$(wordlist 2,99,$(1))) $(firstword $(1)))
libraries_from = $(foreach module,$(call down_from,$(1)),$(call library_of,$(module)))

FONTS = OpenSans-Regular OpenSans-Semibold OpenSans-Italic OpenSans-SemiboldItalic DejaVuSansCondensed \
    DejaVuSansCondensed-Bold DejaVuSansCondensed-Oblique DejaVuSansMono
SHARE = $(BUILD)/share/gridleak
TEMPLATES = $(wildcard templates/*)
SHARE_FILES = $(patsubst templates/%,$(SHARE)/templates/%,$(TEMPLATES)) \
    $(patsubst %,$(SHARE)/fonts/%.ttf,$(FONTS)) $(SHARE)/fonts/sRGB.icc

all: $(BUILD)/gridleak $(SHARE_FILES) man schema

man: $(BUILD)/gridleak.1
$(BUILD)/gridleak.1: $(BUILD)/gridleak
	@$< --man-page >$@

# For editors: the YAML language server reads it.
schema: $(SHARE)/job.schema.json
$(SHARE)/job.schema.json: $(BUILD)/gridleak
	@mkdir -p $(@D)
	@$< fields --schema >$@

$(BUILD)/gridleak: $(BUILD)/src/main.o $(call libraries_from,archive)
	@echo "  link    $@"
	@$(CC) $(CFLAGS) $^ $(LDLIBS) -o $@

$(BUILD)/src/%.o: src/%.c
	@mkdir -p $(@D)
	@echo "  cc      $<"
	@$(CC) $(CFLAGS) -MMD -MP -c $< -o $@

define library
$(call library_of,$(1)): $(call objects_of,$(1))
	@mkdir -p $$(@D)
	@rm -f $$@
	@ar rcs $$@ $$^
endef
$(foreach module,$(MODULES),$(eval $(call library,$(module))))

$(SHARE)/templates/%: templates/%
	@mkdir -p $(@D)
	@cp $< $@

$(SHARE)/fonts/%.ttf:
	@mkdir -p $(@D)
	@cp $$(find /usr/share/fonts -name $*.ttf | head -n 1) $@

$(SHARE)/fonts/sRGB.icc:
	@mkdir -p $(@D)
	@cp /usr/share/color/icc/sRGB.icc $@

# ---- tests: tests/unit/<module>/<name>_test.c is a program of its own, linked with its module and
# those below only.
UNIT_SOURCES = $(wildcard tests/unit/*/*_test.c)
UNIT_TESTS = $(patsubst %.c,$(BUILD)/%,$(UNIT_SOURCES))

define unit_rule
$(BUILD)/tests/unit/$(1)/%_test: tests/unit/$(1)/%_test.c $(wildcard tests/*.h tests/unit/$(1)/*.h) \
    $(call libraries_from,$(1))
	@mkdir -p $$(@D)
	@echo "  link    $$@"
	@$(CC) $(CFLAGS) -Itests $$(filter-out %.h,$$^) $(LDLIBS) -lcmocka -o $$@
endef
$(foreach module,$(MODULES),$(eval $(call unit_rule,$(module))))

unit: $(UNIT_TESTS)
	tests/run-unit.sh $(UNIT_TESTS)

FUZZERS = $(patsubst %.c,$(BUILD)/%,$(wildcard tests/fuzz/*_fuzz.c))
fuzzers: $(FUZZERS)
$(FUZZERS): $(BUILD)/%: %.c $(wildcard tests/fuzz/*.h) $(call libraries_from,write)
	@mkdir -p $(@D)
	@echo "  link    $@"
	@$(CC) $(CFLAGS) -Itests $(filter-out %.h,$^) $(LDLIBS) -o $@

packages:
	@tests/packages.sh $(BUILD_PACKAGES)

check-packages:
	@tests/packages.sh $(BUILD_PACKAGES) $(CHECK_PACKAGES)

demo: packages
	$(MAKE) all
	$(BUILD)/gridleak publish jobs-example -o output

check: check-packages
	$(MAKE) all $(UNIT_TESTS)
	tests/run.sh $(BUILD) $(UNIT_TESTS)

# What publishing SPEED_N synthetic jobs costs, beside what the libraries alone need.
SPEED_N = 1000
speed: check-packages
	$(MAKE) all
	tests/speed/speed.sh $(BUILD) $(SPEED_N)

# One row for each check against something outside the project.
oracle: all
	DRAWS=1000000 tests/oracle/run.sh $(BUILD)

# Jobs whose physics is known to the check alone: SEED and COUNT may be given.
SEED = 20310203
COUNT = 500
blind: all
	@mkdir -p $(BUILD)/oracle/blind
	python3 tests/oracle/blind/blind.py $(BUILD)/gridleak $(BUILD)/oracle/blind $(SEED) $(COUNT)

lint:
	tests/lint/run.sh

# The same with the static analyser as deep as it goes.
analyse:
	LINT=deep tests/lint/run.sh

# By time instead of a count, and more calls than the sample, of make check.
fuzz:
	@mkdir -p $(BUILD)
	FUZZ_SECONDS=$(or $(FUZZ_SECONDS),300) tests/fuzz/run.sh $(BUILD)

fault: all
	FAULT_RUNS=$(or $(FAULT_RUNS),2000) tests/fault/run.sh $(BUILD)

check-memory: all
	MEMORY=all tests/memory/run.sh $(BUILD)

coverage:
	tests/coverage.sh $(BUILD)

golden-update: all
	UPDATE=1 tests/golden/run.sh $(BUILD)

format:
	clang-format -i $$(git ls-files 'src/*.[ch]' 'tests/*.[ch]')

install: all
	install -d $(DESTDIR)$(PREFIX)/bin $(DESTDIR)$(PREFIX)/share/gridleak/templates \
	    $(DESTDIR)$(PREFIX)/share/gridleak/fonts $(DESTDIR)$(PREFIX)/share/man/man1
	install -m 755 $(BUILD)/gridleak $(DESTDIR)$(PREFIX)/bin/gridleak
	install -m 644 $(SHARE)/templates/* $(DESTDIR)$(PREFIX)/share/gridleak/templates
	install -m 644 $(SHARE)/fonts/* $(DESTDIR)$(PREFIX)/share/gridleak/fonts
	install -m 644 $(SHARE)/job.schema.json $(DESTDIR)$(PREFIX)/share/gridleak
	install -m 644 $(BUILD)/gridleak.1 $(DESTDIR)$(PREFIX)/share/man/man1

uninstall:
	rm -f $(DESTDIR)$(PREFIX)/bin/gridleak $(DESTDIR)$(PREFIX)/share/man/man1/gridleak.1
	rm -rf $(DESTDIR)$(PREFIX)/share/gridleak

clean:
	rm -rf $(BUILD)

-include $(shell find $(BUILD)/src -name '*.d' 2>/dev/null)
.PHONY: fuzzers oracle blind all man schema unit packages check-packages demo check lint analyse fuzz fault check-memory coverage golden-update format install uninstall clean
