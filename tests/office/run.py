"""The tests that need an office, in one start of it (and one of an office without the extension).

    tests/office/run.py --out build [--only NAME]... [--sanitized]

With --sanitized the extension in OUT was built with address and undefined-behaviour sanitizers: the
office is started with their run-time libraries, and what they report of our own files is a failure.
Each check that fails prints a line; the last line counts them.
"""
import argparse
import glob
import os
import re
import shutil
import subprocess
import sys
import time
import traceback

HERE = os.path.dirname(os.path.abspath(__file__))
OURS = re.compile(r'\b(addin|src)/\S+\.c:|jointsheet\.uno\.so')
NOT_SANITIZED = ('package', 'long')      # another library is measured there, or slowness


def know_types(library):
    """This process must know our interface too, to call it from outside the office."""
    known = os.path.join(os.environ.get('PROGRAM', '/usr/lib/libreoffice/program'),
                         'types', 'offapi.rdb')
    os.environ['URE_MORE_TYPES'] = 'file://%s file://%s' % (known, os.path.abspath(library))
    import uno
    uno.getComponentContext()
    del os.environ['URE_MORE_TYPES']


def sanitizers(folder):
    """What the office needs in its environment to run a library built with sanitizers. The office's
    own leaks are none of ours: leaks change no exit code and are looked for in the report.
    """
    libraries = [subprocess.run(['gcc', '-print-file-name=' + name], stdout=subprocess.PIPE,
                                text=True, check=True).stdout.strip()
                 for name in ('libasan.so', 'libubsan.so')]
    report = 'log_path=' + os.path.join(folder, 'sanitizer')
    return {'LD_PRELOAD': ':'.join(libraries),
            'ASAN_OPTIONS': 'exitcode=99:detect_leaks=1:fast_unwind_on_malloc=0:' + report,
            'LSAN_OPTIONS': 'exitcode=0',
            'UBSAN_OPTIONS': 'print_stacktrace=1:' + report}


def reported(folder):
    """Stacks in the sanitizers' reports that pass through our library."""
    found = []
    for name in sorted(os.listdir(folder)):
        if name.startswith('sanitizer'):
            with open(os.path.join(folder, name), errors='replace') as report:
                found += [part for part in report.read().split('\n\n') if OURS.search(part)]
    return found


def swap_library(profile, library):
    """Puts a library built otherwise in the place of the installed one."""
    for place in glob.glob(os.path.join(profile, 'user', 'uno_packages', '**', 'jointsheet.uno.so'),
                           recursive=True):
        shutil.copy(library, place)


def guarded(checks, name, test, *arguments):
    """A test that breaks is a failed check, and the others still run."""
    start = time.monotonic()
    before = checks.passed, checks.failed
    try:
        test(*arguments)
    except Exception:
        traceback.print_exc(file=sys.stdout)
        checks.check(False, '%s broke off' % name)
    print('office %-10s %5d passed %4d failed %7.1f s' % (
        name, checks.passed - before[0], checks.failed - before[1], time.monotonic() - start),
        flush=True)


def main():
    parser = argparse.ArgumentParser()
    parser.add_argument('--out', required=True)
    parser.add_argument('--only', action='append')
    parser.add_argument('--sanitized', action='store_true')
    given = parser.parse_args()
    given.out = os.path.abspath(given.out)
    given.package = os.path.join(given.out, 'jointsheet.oxt')
    given.examples = os.path.join(given.out, 'generated', 'examples.tsv')
    given.parameters = os.path.join(given.out, 'generated', 'parameters.tsv')
    given.sheets = os.path.join(HERE, '..', '..', 'sample-sheets')

    know_types(os.path.join(given.out, 'oxt', 'types.rdb'))
    from checks import Checks, Desk
    from office import Office, OfficeError, add_extension
    import fixture
    import test_api, test_errors, test_examples, test_files, test_language
    import test_long, test_package, test_sheets, test_sweep

    checks = Checks()
    folder = os.path.join(given.out, 'office')
    shutil.rmtree(folder, ignore_errors=True)
    os.makedirs(folder)
    add_extension(os.path.join(folder, 'profile'), given.package)
    english = {'LC_ALL': 'C.UTF-8'}
    ours = dict(english)
    if given.sanitized:
        ours.update(sanitizers(folder))
        swap_library(os.path.join(folder, 'profile'), os.path.join(given.out, 'jointsheet.uno.so'))
    try:
        with Office(os.path.join(folder, 'profile'), ours, patience=120) as office, \
                Office(os.path.join(folder, 'without'), english) as without:
            desk = Desk(office)
            fixture.lay_out(desk.document)
            tests = {
                'package': (test_package.run, given),
                'examples': (test_examples.run, desk, given),
                'errors': (test_errors.run, desk, given),
                'sweep': (test_sweep.run, desk, given),
                'long': (test_long.run, desk, given),
                'api': (test_api.run, desk, office, given),
                'language': (test_language.run, desk, office, given),
                'files': (test_files.run, desk, office, without, given),
                'sheets': (test_sheets.run, office, given),
            }
            left_out = NOT_SANITIZED if given.sanitized else ()
            for name, (test, *arguments) in tests.items():
                if name in (given.only or tests) and name not in left_out:
                    guarded(checks, name, test, checks, *arguments)
            desk.close()
        checks.check(True, 'both offices ended with 0')
    except OfficeError as problem:
        checks.check(False, str(problem))
    if given.sanitized:
        stacks = reported(folder)
        checks.check(not stacks, 'sanitizers: %s' % '\n\n'.join(stacks[:5]))
    print('%d passed, %d failed' % (checks.passed, checks.failed), flush=True)
    return 1 if checks.failed else 0


sys.exit(main())
