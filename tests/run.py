"""Runs everything that `make test` runs and sums it up in the last line of output.

    tests/run.py --out build [--tests FOLDER] [--fresh GENERATED COMMITTED]... [--office]

The executables of tests/core are run one after the other, each with cmocka's own output; files
that are generated and committed are compared; then comes the office.
"""
import argparse
import filecmp
import os
import re
import subprocess
import sys

HERE = os.path.dirname(os.path.abspath(__file__))
PATIENCE = 600


def run_core(program):
    """One executable: what it printed, and how many of its tests passed and failed."""
    name = os.path.basename(program)
    try:
        done = subprocess.run([program], stdin=subprocess.DEVNULL, stdout=subprocess.PIPE,
                              stderr=subprocess.STDOUT, text=True, errors='replace',
                              timeout=PATIENCE)
    except subprocess.TimeoutExpired as late:
        print('%s: not done after %d s\n%s' % (name, PATIENCE, late.stdout or ''))
        return 0, 1
    passed = sum(map(int, re.findall(r'^\[  PASSED  \] (\d+) test', done.stdout, re.M)))
    failed = sum(map(int, re.findall(r'^\[  FAILED  \] (\d+) test', done.stdout, re.M)))
    if done.returncode == 0 and failed == 0 and passed > 0:
        print('%-24s %4d passed' % (name, passed))
        return passed, 0
    print(done.stdout)
    print('%s: ended with %d' % (name, done.returncode))
    return passed, max(failed, 1)


def check_fresh(generated, committed):
    if os.path.exists(committed) and filecmp.cmp(generated, committed, shallow=False):
        return 1, 0
    print('%s is stale: it follows from the function tables; run make generate' % committed)
    return 0, 1


def run_office(out):
    """The office tests print their own count in their last line."""
    command = [sys.executable, os.path.join(HERE, 'office', 'run.py'), '--out', out]
    done = subprocess.Popen(command, stdin=subprocess.DEVNULL, stdout=subprocess.PIPE, text=True,
                            errors='replace')
    count = None
    for line in done.stdout:
        found = re.fullmatch(r'(\d+) passed, (\d+) failed\n', line)
        if found:
            count = int(found[1]), int(found[2])
        else:
            print(line, end='', flush=True)
    code = done.wait()
    if count is None or (code != 0 and count[1] == 0):
        print('the office tests ended with %d' % code)
        return (count or (0, 0))[0], 1
    return count


def main():
    parser = argparse.ArgumentParser()
    parser.add_argument('--out', required=True)
    parser.add_argument('--fresh', nargs=2, action='append', default=[])
    parser.add_argument('--office', action='store_true')
    parser.add_argument('programs', nargs='*')
    given = parser.parse_args()
    counts = [run_core(program) for program in given.programs]
    counts += [check_fresh(*pair) for pair in given.fresh]
    sys.stdout.flush()
    if given.office:
        counts.append(run_office(given.out))
    passed, failed = (sum(c) for c in zip(*counts)) if counts else (0, 1)
    print('%d passed, %d failed' % (passed, failed), flush=True)
    return 1 if failed or not passed else 0


sys.exit(main())
