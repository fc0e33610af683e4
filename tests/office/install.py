"""Installs the extension into the user's own office, or takes it out again.

    tests/office/install.py add build/jointsheet.oxt
    tests/office/install.py remove
"""
import os
import sys

import office


def own_profile():
    config = os.environ.get('XDG_CONFIG_HOME') or os.path.join(os.path.expanduser('~'), '.config')
    return os.path.join(config, 'libreoffice', '4')


def in_use(profile):
    """Whether an office runs on the profile. Its lock outlives it when it was killed."""
    if not os.path.exists(os.path.join(profile, '.lock')):
        return False
    for pid in filter(str.isdigit, os.listdir('/proc')):
        try:
            if os.stat('/proc/' + pid).st_uid == os.geteuid() \
                    and os.path.basename(os.readlink('/proc/%s/exe' % pid)) == 'soffice.bin':
                return True
        except OSError:
            pass
    return False


def main(what, *package):
    profile = own_profile()
    if in_use(profile):
        print('please close LibreOffice first', file=sys.stderr)
        return 1
    if what == 'add':
        office.add_extension(profile, *package)
        print('installed; start LibreOffice Calc and type =JOINT. in a cell')
    else:
        print('removed' if office.remove_extension(profile) else 'it was not installed')
    return 0


sys.exit(main(*sys.argv[1:]))
