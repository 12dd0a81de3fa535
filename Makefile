# SPDX-License-Identifier: GPL-3.0-or-later
# make            the program, the Lua module, the shared and the static library, in build/
# make try        all that the main job needs, packages included, then the demo study and its report
# make check      all tests, then all again under the address and undefined-behaviour sanitizers
# make check-page what readers see: pages in headless Chromium, LaTeX compiled
# make bench      measures against what is required
# make docs       the guide, the reference manual and the manual pages, in build/docs/ (generated from the program's own tables)
# make install    PREFIX=/usr/local, DESTDIR= for packagers; make uninstall
# make packages   installs what try, check, check-page, docs and bench need (Debian); elsewhere names what is missing
# make clean
# V=1 shows the commands.

VERSION = 0.1.0
PREFIX = /usr/local
LIBDIR = $(PREFIX)/lib
LUADIR = $(LIBDIR)/lua/5.4
MANDIR = $(PREFIX)/share/man

CC = gcc
LUA = lua5.4
LUA_CFLAGS = -I/usr/include/lua5.4
LUA_LIBS = -llua5.4
CFLAGS = -g
# In the program, what would take a millisecond to load each time is linked statically; where there are only shared libraries:
# make STATIC_LIBS='-lreadline -lcsv -lnettle -lgsl -lgslcblas'
STATIC_LIBS = -l:libreadline.a -l:libtinfo.a -l:libcsv.a -l:libnettle.a -l:libgsl.a -l:libgslcblas.a -l:libgomp.a

build = build
demo = scripts/demo_study.lua
MAKEFLAGS += --no-builtin-rules
ifndef V
.SILENT:
endif

# ---- Flags ----

# No -ffast-math, and no contraction: results must not depend on the thread or the optimiser's mood.
optimise = -O3 -fno-math-errno -fno-trapping-math -ffp-contract=off -fno-semantic-interposition
warnings = -Wall -Wextra -Wconversion -Wsign-conversion -Wshadow -Wpedantic -Wstrict-prototypes -Wmissing-prototypes -Werror
ifdef sanitize
optimise = -O1 -fno-math-errno -fno-trapping-math -ffp-contract=off -fno-omit-frame-pointer -DLAC_ONE_CLONE
sanitizers = -fsanitize=address,undefined -fno-sanitize-recover=undefined
endif

compile = $(CC) -std=gnu11 $(optimise) -fPIC -fopenmp -fvisibility=hidden $(warnings) $(sanitizers) -MMD -MP -Iinclude -Icore $(CPPFLAGS) $(CFLAGS)
core_flags = -include core/exported.h
bindings_flags = -Ibindings $(LUA_CFLAGS) -DLAC_VERSION='"$(VERSION)"'
link = $(CC) -fopenmp $(sanitizers) $(CFLAGS) $(LDFLAGS) -Wl,--as-needed
# Worker threads wait inside the library, so the host must never unload it.
share = $(link) -shared -Wl,-z,nodelete -Wl,-z,relro

core_libs = -lgsl -lgslcblas -lm
module_libs = -lcsv -lnettle $(core_libs)
program_libs = $(LUA_LIBS) $(STATIC_LIBS) -lm

# ---- Files ----

core_sources = $(wildcard core/*.c)
program_sources = $(addprefix bindings/,program.c options.c interrupt.c workers.c input.c repl.c prompt.c lines.c history.c completion.c)
module_sources = $(filter-out $(program_sources),$(wildcard bindings/*.c))
lua_sources = $(wildcard bindings/*.lua)
test_sources = $(wildcard tests/test_*.c)
bench_sources = $(wildcard tests/bench/*.c)

objects = $(patsubst %.c,$(build)/objects/%.o,$(1))
core_objects = $(call objects,$(core_sources))
module_objects = $(call objects,$(module_sources)) $(build)/objects/embedded.o
program_objects = $(call objects,$(program_sources))

soname = liblacuna.so.$(firstword $(subst ., ,$(VERSION)))
shared_library = $(build)/liblacuna.so.$(VERSION)
programs = $(patsubst tests/%.c,$(build)/tests/%,$(test_sources) $(bench_sources))
test_programs = $(patsubst tests/%.c,$(build)/tests/%,$(test_sources))
bench_programs = $(patsubst tests/%.c,$(build)/tests/%,$(bench_sources))

# ---- Targets ----

man_pages = $(build)/docs/lacuna.1 $(build)/docs/lacuna.3

.PHONY: all tests try check check-page docs bench packages install uninstall clean
.DELETE_ON_ERROR:
.SECONDARY:

all: $(build)/lacuna $(build)/lacuna.so $(build)/liblacuna.a $(build)/liblacuna.so $(build)/$(soname)

tests: $(build)/lacuna $(test_programs)

try:
	@.ci/packages try
	@$(MAKE) --no-print-directory all
	@echo
	$(build)/lacuna $(demo) --out $(build)/report --force

check:
	@.ci/packages try check
	@$(MAKE) --no-print-directory all tests
	@$(MAKE) --no-print-directory build=$(build)/san sanitize=yes tests
	@tests/run $(build) $(build)/san

check-page:
	@.ci/packages try check docs check-page
	@$(MAKE) --no-print-directory all docs
	@tests/run $(build) tests/page/test_*.py

docs:
	@.ci/packages try docs
	@$(MAKE) --no-print-directory $(man_pages)
	$(build)/lacuna docs/make/pages.lua $(build)/docs

bench:
	@.ci/packages try check bench
	@$(MAKE) --no-print-directory all $(bench_programs)
	@tests/bench/run $(build)

packages:
	@.ci/packages try check check-page docs bench

clean:
	rm -rf $(build)

# ---- Rules ----

# What else the files depend on: flags for the objects, the lists of objects for what is linked. Rewritten only when changed.
flags_file = $(build)/flags
parts_file = $(build)/parts
flags = $(compile) $(core_flags) $(bindings_flags)
parts = $(share) $(program_libs) $(core_sources) $(module_sources) $(program_sources) $(lua_sources)
remember = $(if $(findstring x$(strip $(2))x,x$(strip $(file <$(1)))x),,$(shell mkdir -p $(build))$(file >$(1),$(strip $(2))))
ifeq ($(filter clean uninstall packages,$(MAKECMDGOALS)),)
$(call remember,$(flags_file),$(flags))
$(call remember,$(parts_file),$(parts))
endif

$(build)/objects/core/%.o: core/%.c $(flags_file)
	@mkdir -p $(@D)
	@echo compiling $<
	$(compile) $(core_flags) -c $< -o $@

$(build)/objects/bindings/%.o: bindings/%.c $(flags_file)
	@mkdir -p $(@D)
	@echo compiling $<
	$(compile) $(bindings_flags) -c $< -o $@

$(build)/objects/embedded.c: bindings/build/embed.lua $(lua_sources) $(parts_file)
	@mkdir -p $(@D)
	$(LUA) $< $(lua_sources) > $@

$(build)/objects/embedded.o: $(build)/objects/embedded.c $(flags_file)
	@echo compiling $<
	$(compile) $(bindings_flags) -c $< -o $@

$(build)/liblacuna.a: $(core_objects) $(parts_file)
	@echo linking $@
	rm -f $@
	$(AR) rcs $@ $(core_objects)

$(shared_library): $(core_objects) core/exported.map $(parts_file)
	@echo linking $@
	$(share) -Wl,-soname,$(soname) -Wl,-z,defs -Wl,--version-script=core/exported.map -o $@ $(core_objects) $(core_libs)

$(build)/$(soname) $(build)/liblacuna.so: $(shared_library)
	ln -sf $(<F) $@

# The core inside and hidden; lua_* is left to the host.
$(build)/lacuna.so: $(module_objects) $(build)/liblacuna.a bindings/build/module.map
	@echo linking $@
	$(share) -Wl,--version-script=bindings/build/module.map -o $@ $(module_objects) $(build)/liblacuna.a $(module_libs)

# Not position-independent: thousands of pointers in the tables need no relocation at each start.
$(build)/lacuna: $(program_objects) $(module_objects) $(build)/liblacuna.a
	@echo linking $@
	$(link) -no-pie -o $@ $^ $(program_libs)

$(man_pages) &: $(build)/lacuna $(wildcard docs/make/*) $(wildcard include/lacuna/*.h)
	@mkdir -p $(@D)
	$(build)/lacuna docs/make/man_pages.lua $(@D) $(VERSION)

# Tests with Lua states of their own hold the binding too.
binding_tests = $(build)/tests/test_states $(build)/tests/test_lua_memory
$(binding_tests): $(module_objects)
$(binding_tests): binding = $(bindings_flags) $(module_objects) $(LUA_LIBS)

# For tests of the binding from C; the linker takes what a test asks for.
$(build)/objects/module.a: $(module_objects) $(parts_file)
	rm -f $@
	$(AR) rcs $@ $(module_objects)

$(build)/tests/%: tests/%.c $(build)/objects/module.a $(build)/liblacuna.a $(flags_file)
	@mkdir -p $(@D)
	@echo building $@
	$(compile) $(bindings_flags) -MF $@.d -MT $@ -Itests $< -o $@ -Wl,--as-needed $(build)/objects/module.a $(build)/liblacuna.a \
	  -lcmocka $(LUA_LIBS) $(module_libs)

-include $(patsubst %.o,%.d,$(core_objects) $(module_objects) $(program_objects)) $(addsuffix .d,$(programs))

# ---- Installation ----

define pkg_config
prefix=$(PREFIX)
libdir=$(LIBDIR)
includedir=$${prefix}/include

Name: lacuna
Description: What can be resolved around young stars
Version: $(VERSION)
License: GPL-3.0-or-later
Cflags: -I"$${includedir}"
Libs: -L"$${libdir}" -llacuna
Libs.private: $(core_libs) -lgomp
endef

into = '$(DESTDIR)$(1)'

install: all $(man_pages)
	install -d $(call into,$(PREFIX)/bin) $(call into,$(PREFIX)/include/lacuna) $(call into,$(LIBDIR)/pkgconfig) $(call into,$(LUADIR)) $(call into,$(MANDIR)/man1) $(call into,$(MANDIR)/man3)
	install $(build)/lacuna $(call into,$(PREFIX)/bin)
	install -m 644 include/lacuna.h $(call into,$(PREFIX)/include)
	install -m 644 include/lacuna/*.h $(call into,$(PREFIX)/include/lacuna)
	install -m 644 $(build)/lacuna.so $(call into,$(LUADIR))
	install -m 644 $(build)/liblacuna.a $(shared_library) $(call into,$(LIBDIR))
	ln -sf $(notdir $(shared_library)) $(call into,$(LIBDIR)/$(soname))
	ln -sf $(soname) $(call into,$(LIBDIR)/liblacuna.so)
	install -m 644 $(build)/docs/lacuna.1 $(call into,$(MANDIR)/man1)
	install -m 644 $(build)/docs/lacuna.3 $(call into,$(MANDIR)/man3)
	$(file >$(build)/lacuna.pc,$(pkg_config))install -m 644 $(build)/lacuna.pc $(call into,$(LIBDIR)/pkgconfig)
	@if [ -z "$(DESTDIR)" ] && [ "$$(id -u)" = 0 ]; then ldconfig; fi

uninstall:
	rm -f $(call into,$(PREFIX)/bin/lacuna) $(call into,$(PREFIX)/include/lacuna.h) $(call into,$(LUADIR)/lacuna.so) \
	  $(call into,$(LIBDIR))/liblacuna.* $(call into,$(MANDIR)/man1/lacuna.1) $(call into,$(MANDIR)/man3/lacuna.3) $(call into,$(LIBDIR)/pkgconfig/lacuna.pc)
	rm -rf $(call into,$(PREFIX)/include/lacuna)
