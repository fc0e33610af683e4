"""Runs the benchmarks: each OUT/bench/NAME into tests/bench/NAME.py, which sets what users have
beside it; those without a program, which measure the office, get OUT.

    tests/bench/run.py OUT NAME...
"""
import os
import subprocess
import sys

HERE = os.path.dirname(os.path.abspath(__file__))


def run(out, name):
    program, script = os.path.join(out, 'bench', name), os.path.join(HERE, name + '.py')
    print('== ' + name, flush=True)
    if not os.path.exists(program):
        return subprocess.run([sys.executable, script, out], stdin=subprocess.DEVNULL).returncode
    if not os.path.exists(script):
        return subprocess.run([program], stdin=subprocess.DEVNULL).returncode
    times = subprocess.run([program], stdin=subprocess.DEVNULL, stdout=subprocess.PIPE)
    beside = subprocess.run([sys.executable, script], input=times.stdout)
    return times.returncode or beside.returncode


out, *names = sys.argv[1:]
failed = [name for name in names if run(out, name)]
if failed:
    print('FAILED: ' + ' '.join(failed), file=sys.stderr)
sys.exit(1 if failed else 0)
