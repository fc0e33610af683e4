# Jointsheet - see `make help`
#
# Sources are found by wildcard: a new file in src/, addin/functions/ or tests/ needs no edit here.

OUT     = build
CC      = gcc
PYTHON  = /usr/bin/python3
OFFICE  = /usr/lib/libreoffice
PROGRAM = $(OFFICE)/program
SDK     = $(OFFICE)/sdk
export PROGRAM

CFLAGS  = -std=c11 -O2 -g -Wall -Wextra -Wpedantic -Wconversion -Wshadow -Wstrict-prototypes \
          -Wmissing-prototypes -ffp-contract=off -fno-math-errno -fvisibility=hidden -fPIC
EXTRA   =
DEFINED = -Wl,-z,defs
SECTION = -ffunction-sections -fdata-sections
COMPILE = $(CC) $(CFLAGS) $(SECTION) $(EXTRA) -MMD -MP

# Everything numeric is linked in, so that the add-in needs nothing of the user's system but the
# office itself, libm and libc. OpenBLAS stands for BLAS and LAPACK.
NUMERIC = -l:libgsl.a -L/usr/lib/$$($(CC) -print-multiarch)/openblas-serial -l:libopenblas.a -lm

PACKAGES = gcc libc6-dev make libreoffice-calc libreoffice-dev python3-uno python3 libgsl-dev \
           libopenblas-serial-dev libcmocka-dev zip fonts-dejavu-core
CHECK_PACKAGES = valgrind libasan8 libubsan1
BENCH_PACKAGES = python3-numpy python3-scipy python3-statsmodels

version = $(shell sed -n 's/.*JOINTSHEET_VERSION "\(.*\)"/\1/p' addin/version.h)

TABLES   := $(sort $(wildcard addin/functions/*.c)) $(MORE_TABLES)
GROUPS   := $(basename $(notdir $(TABLES)))
UNO      := $(wildcard addin/uno*.c)
CORE     := $(wildcard src/*.c src/*/*.c) $(TABLES) \
            $(filter-out $(UNO) addin/generate.c,$(wildcard addin/*.c))
LINK     := $(wildcard addin/link/*.c)
WITHMAIN := $(shell grep -ls '^int main' tests/core/*.c)
HELPERS  := $(filter-out $(WITHMAIN),$(wildcard tests/core/*.c))

objects       = $(patsubst %.c,$(OUT)/obj/%.o,$(1))
CORE_OBJECTS := $(call objects,$(CORE)) $(OUT)/obj/tables.o
LINK_OBJECTS := $(call objects,$(LINK))
TESTS        := $(patsubst tests/core/%.c,$(OUT)/tests/%,$(WITHMAIN))
GENERATED     = idl/XFunctions.idl addin/package/CalcAddIns.xcu addin/reference.md \
                tests/office/examples.tsv sample-sheets/stop-loss.fods

all: oxt ## build the extension, build/jointsheet.oxt

help: ## this list
	@sed -n 's/^\([a-z-]*\):.*## \(.*\)/make \1\t\2/p' Makefile | expand -t 20

setup: ## install what is missing (Debian packages)
	@addin/setup $(PACKAGES)

setup-check: setup
	@addin/setup $(PACKAGES) $(CHECK_PACKAGES)

setup-bench: setup
	@addin/setup $(PACKAGES) $(BENCH_PACKAGES)

oxt: $(OUT)/jointsheet.oxt ## the extension

# ---- objects ----

$(OUT)/obj/%.o: %.c | setup
	@mkdir -p $(@D)
	@echo '  cc   $<'
	@$(COMPILE) -c $< -o $@

$(call objects,$(UNO)): COMPILE += -isystem /usr/include/libreoffice

$(OUT)/obj/tests/%.o: tests/%.c | setup
	@mkdir -p $(@D)
	@echo '  cc   $<'
	@$(COMPILE) -DVALUES_DIR='"$(CURDIR)/tests/values"' -c $< -o $@

# function_tables[], from the names of the files that hold tables
$(OUT)/tables.c: always
	@mkdir -p $(@D)
	@{ echo '/* Written by the Makefile from the names of addin/functions. */'; \
	   echo '#include "$(CURDIR)/addin/function.h"'; \
	   for t in $(GROUPS); do echo "extern const function $${t}_functions[];"; done; \
	   echo 'const function *const function_tables[] = {'; \
	   for t in $(GROUPS); do echo "    $${t}_functions,"; done; \
	   echo '    0,'; echo '};'; } > $@.new
	@cmp -s $@.new $@ && rm $@.new || mv $@.new $@

$(OUT)/obj/tables.o: $(OUT)/tables.c | setup
	@mkdir -p $(@D)
	@echo '  cc   $<'
	@$(COMPILE) -c $< -o $@

$(OUT)/core.a: $(CORE_OBJECTS)
	@rm -f $@
	@echo '  ar   $@'
	@ar qcs $@ $^       # q, not r: files of different folders share names

-include $(shell find $(OUT)/obj -name '*.d' 2>/dev/null)

# ---- the extension ----

EXPORTS = addin/link/exports.map
CLOSED  = -Wl,--version-script=$(EXPORTS) -Wl,--exclude-libs,ALL -Wl,--gc-sections $(DEFINED) \
          -Wl,-z,relro -Wl,-z,now

$(OUT)/jointsheet.uno.so: $(call objects,$(UNO)) $(CORE_OBJECTS) $(LINK_OBJECTS) $(EXPORTS)
	@echo '  link $@'
	@$(CC) $(EXTRA) -shared -o $@ $(filter %.o,$^) -L$(SDK)/lib -luno_cppu -luno_sal \
	    $(NUMERIC) $(CLOSED)

$(OUT)/generate: $(OUT)/obj/addin/generate.o $(OUT)/core.a $(LINK_OBJECTS)
	@echo '  link $@'
	@$(CC) $(EXTRA) -o $@ $^ $(NUMERIC) -Wl,--gc-sections

$(OUT)/generated/XFunctions.idl: $(OUT)/generate
	@mkdir -p $(@D)
	@$< idl > $@

$(OUT)/generated/CalcAddIns.xcu: $(OUT)/generate
	@mkdir -p $(@D)
	@$< xcu > $@

$(OUT)/generated/reference.md: $(OUT)/generate
	@mkdir -p $(@D)
	@$< reference > $@

$(OUT)/generated/examples.tsv: $(OUT)/generate
	@mkdir -p $(@D)
	@$< examples > $@

$(OUT)/generated/parameters.tsv: $(OUT)/generate
	@mkdir -p $(@D)
	@$< parameters > $@

$(OUT)/generated/%.fods: $(wildcard tests/generators/*.py)
	@mkdir -p $(@D)
	@$(PYTHON) -B tests/generators/$(subst -,_,$*).py $@

FRESH = $(addprefix $(OUT)/generated/,$(notdir $(GENERATED)))

generate: $(FRESH) ## write the committed files that follow from the function tables
	@for f in $(GENERATED); do \
	    fresh=$(OUT)/generated/$${f##*/}; \
	    cmp -s $$fresh $$f || { cp $$fresh $$f; echo "wrote $$f"; }; \
	done

$(OUT)/oxt/types.rdb: $(OUT)/generated/XFunctions.idl
	@mkdir -p $(@D)
	@$(SDK)/bin/unoidl-write $(PROGRAM)/types.rdb $(PROGRAM)/types/offapi.rdb $< $@

$(OUT)/jointsheet.oxt: $(OUT)/jointsheet.uno.so $(OUT)/oxt/types.rdb \
                       $(OUT)/generated/CalcAddIns.xcu $(shell find addin/package -type f) \
                       LICENSE addin/version.h
	@cp -r addin/package/. LICENSE $(OUT)/generated/CalcAddIns.xcu $(OUT)/oxt/
	@sed 's/@VERSION@/$(version)/' addin/package/description.xml > $(OUT)/oxt/description.xml
	@strip --strip-unneeded -o $(OUT)/oxt/jointsheet.uno.so $(OUT)/jointsheet.uno.so
	@rm -f $@
	@echo '  zip  $@'
	@cd $(OUT)/oxt && zip -qrX $(abspath $@) .

# ---- tests ----

$(OUT)/tests/%: $(OUT)/obj/tests/core/%.o $(call objects,$(HELPERS)) $(OUT)/core.a $(LINK_OBJECTS)
	@mkdir -p $(@D)
	@echo '  link $@'
	@$(CC) $(EXTRA) -o $@ $^ -lcmocka $(NUMERIC) -Wl,--gc-sections

tests: $(TESTS) ## build the unit tests, one executable a file of tests/core

core-test: $(TESTS) ## run the unit tests only
	@$(PYTHON) tests/run.py --out $(OUT) $(TESTS)

pairs = $(foreach f,$(GENERATED),--fresh $(OUT)/generated/$(notdir $(f)) $(f))

for-office: oxt $(FRESH) $(OUT)/generated/parameters.tsv

test: for-office $(TESTS) ## every test; the last line of output counts them
	@$(PYTHON) tests/run.py --out $(OUT) $(pairs) --office $(TESTS)

# ---- the workbook, the user's own office ----

demo: oxt ## price the sample workbook in a headless office; PDF and CSV in build/demo
	@$(PYTHON) tests/office/demo.py --out $(OUT) sample-sheets/stop-loss.fods

install: oxt ## install into your own LibreOffice
	@$(PYTHON) tests/office/install.py add $(OUT)/jointsheet.oxt

uninstall: setup ## take it out of your own LibreOffice
	@$(PYTHON) tests/office/install.py remove

# ---- benchmarks ----

BENCHES = $(patsubst tests/bench/%.c,$(OUT)/bench/%,$(wildcard tests/bench/*.c))
BENCHED = $(filter-out run,$(sort $(basename $(notdir $(wildcard tests/bench/*.c tests/bench/*.py)))))

$(OUT)/bench/%: $(OUT)/obj/tests/bench/%.o $(OUT)/core.a $(LINK_OBJECTS)
	@mkdir -p $(@D)
	@echo '  link $@'
	@$(CC) $(EXTRA) -o $@ $^ $(NUMERIC) -Wl,--gc-sections

bench: setup-bench oxt $(BENCHES) ## how fast it is, beside what users have
	@$(MAKE) --no-print-directory OUT=$(OUT)/bench-build \
	    MORE_TABLES=tests/bench/functions/noop.c oxt
	@$(PYTHON) tests/bench/run.py $(OUT) $(BENCHED)

# ---- slow checks ----

SANITIZE     = -fsanitize=address,undefined -fno-sanitize-recover=undefined -fno-omit-frame-pointer
SANITIZED    = OUT=$(OUT)/sanitized EXTRA="$(SANITIZE)" DEFINED=
FUZZ_SECONDS = 60

$(OUT)/fuzz/%: $(OUT)/obj/tests/fuzz/%.o $(OUT)/core.a $(LINK_OBJECTS)
	@mkdir -p $(@D)
	@echo '  link $@'
	@$(CC) $(EXTRA) -o $@ $^ $(NUMERIC) -Wl,--gc-sections

FUZZERS = $(patsubst tests/fuzz/%.c,$(OUT)/fuzz/%,$(wildcard tests/fuzz/*.c))

fuzz: $(FUZZERS)
	@for f in $(FUZZERS); do $$f --seconds $(FUZZ_SECONDS) || exit 1; done

# Valgrind has no 80-bit long double, so some values of the tests come out wrong there, and a test
# that fails leaks. Only what it says of memory accesses counts (99), and a crash or no end (124 and
# more); leaks are for the address sanitizer.
VALGRIND = timeout 1800 valgrind -q --error-exitcode=99 --leak-check=no

valgrind: $(TESTS)
	@printf '%s\n' $(TESTS) | xargs -P 2 -I {} sh -c '$(VALGRIND) {} > {}.valgrind 2>&1; \
	    if [ $$? -lt 99 ]; then echo "valgrind: {}"; \
	    else cat {}.valgrind; echo "FAILED: valgrind {}"; exit 1; fi'

check-all: setup-check test ## test, and sanitizers, fuzzing, valgrind, sanitizers in the office
	@$(MAKE) --no-print-directory $(SANITIZED) core-test
	@$(MAKE) --no-print-directory $(SANITIZED) fuzz
	@$(MAKE) --no-print-directory valgrind
	@$(MAKE) --no-print-directory $(SANITIZED) for-office
	@$(PYTHON) tests/office/run.py --out $(OUT)/sanitized --sanitized

clean: ## remove what was built
	rm -rf $(OUT)

.PHONY: all always help setup setup-check setup-bench oxt generate tests core-test for-office test \
        demo install uninstall bench fuzz valgrind check-all clean
.SECONDARY:
