"""A real office in a profile of its own: install the extension, start, connect, end.

As root, unopkg does not run: the extension is then installed as the user nobody into a
temporary profile, which is copied to where it is wanted. Every start ends with the office gone
and its exit code looked at: a damaged heap has shown itself there and nowhere else.
"""
import os
import shutil
import signal
import subprocess
import sys
import tempfile
import time
import uuid

import uno
from com.sun.star.beans import PropertyValue
from com.sun.star.connection import NoConnectException
from com.sun.star.lang import DisposedException

PROGRAM = os.environ.get('PROGRAM', '/usr/lib/libreoffice/program')
IDENTIFIER = 'org.jointsheet'
RESTART = 81                     # the office asks to be started again after an install


class OfficeError(Exception):
    pass


def url(path):
    return uno.systemPathToFileUrl(os.path.abspath(path))


def prop(name, value):
    direct = uno.Enum('com.sun.star.beans.PropertyState', 'DIRECT_VALUE')
    return PropertyValue(name, 0, value, direct)


def profile_argument(profile):
    return '-env:UserInstallation=' + url(profile)


def unopkg(profile, *arguments, user=()):
    """Runs unopkg on a profile; raises with what it said when it fails. It changes to the folder it
    was started in, which nobody may not be allowed to enter: the root's own home, for one.
    """
    command = [*user, os.path.join(PROGRAM, 'unopkg'), arguments[0], profile_argument(profile),
               *arguments[1:]]
    done = subprocess.run(command, stdin=subprocess.DEVNULL, stdout=subprocess.PIPE,
                          stderr=subprocess.STDOUT, text=True, timeout=180, cwd='/')
    if done.returncode != 0:
        raise OfficeError('%s failed with %d: %s'
                          % (' '.join(command), done.returncode, done.stdout))
    return done.stdout


def as_nobody(home):
    return ['setpriv', '--reuid=nobody', '--regid=nogroup', '--clear-groups',
            'env', 'HOME=' + home, 'TMPDIR=' + home]


def add_extension(profile, package, *more):
    """Leaves a profile in which the packages are installed, made anew unless it is the user's."""
    if os.geteuid() != 0:
        for each in (package, *more):
            unopkg(profile, 'add', '-f', os.path.abspath(each))
        return
    place = tempfile.mkdtemp(prefix='jointsheet-')
    try:
        os.chmod(place, 0o755)
        inner = os.path.join(place, 'profile')
        if os.path.isdir(profile):
            shutil.copytree(profile, inner, symlinks=True)
        else:
            os.mkdir(inner)
        for each in (package, *more):
            shutil.copy(each, place)
        give_to_nobody(place)
        for each in (package, *more):
            unopkg(inner, 'add', '-f', os.path.join(place, os.path.basename(each)),
                   user=as_nobody(place))
        bring_back(inner, profile)
    finally:
        shutil.rmtree(place, ignore_errors=True)


def remove_extension(profile):
    """Takes the extension out of a profile; False when it is not there."""
    if not os.path.isdir(profile):
        return False
    if os.geteuid() != 0:
        there = IDENTIFIER in unopkg(profile, 'list')
        if there:
            unopkg(profile, 'remove', IDENTIFIER)
        return there
    place = tempfile.mkdtemp(prefix='jointsheet-')
    try:
        os.chmod(place, 0o755)
        inner = os.path.join(place, 'profile')
        shutil.copytree(profile, inner, symlinks=True)
        give_to_nobody(place)
        there = IDENTIFIER in unopkg(inner, 'list', user=as_nobody(place))
        if there:
            unopkg(inner, 'remove', IDENTIFIER, user=as_nobody(place))
            bring_back(inner, profile)
        return there
    finally:
        shutil.rmtree(place, ignore_errors=True)


def give_to_nobody(place):
    for folder, folders, files in os.walk(place):
        for name in folders + files:
            shutil.chown(os.path.join(folder, name), 'nobody', 'nogroup')
    shutil.chown(place, 'nobody', 'nogroup')


def bring_back(inner, profile):
    """Puts the profile made as nobody in the place of another, owned by whom it belongs to."""
    owner = os.stat(profile) if os.path.isdir(profile) else None
    fresh = profile + '.new'
    shutil.rmtree(fresh, ignore_errors=True)
    os.makedirs(os.path.dirname(os.path.abspath(profile)), exist_ok=True)
    shutil.copytree(inner, fresh, symlinks=True)
    uid, gid = (owner.st_uid, owner.st_gid) if owner else (os.geteuid(), os.getegid())
    for folder, folders, files in os.walk(fresh):
        for name in folders + files:
            os.chown(os.path.join(folder, name), uid, gid, follow_symlinks=False)
    os.chown(fresh, uid, gid)
    if owner:
        shutil.rmtree(profile)
    os.rename(fresh, profile)


class Office:
    """One headless office: with Office(profile) as office: office.desktop ..."""

    def __init__(self, profile, environment=None, wrapper=(), patience=60):
        self.profile = os.path.abspath(profile)
        self.environment = dict(os.environ, **(environment or {}))
        self.wrapper = list(wrapper)
        self.patience = patience
        self.process = None
        self.exit_code = None

    def __enter__(self):
        for _ in range(3):
            self.launch()
            if self.connect():
                return self
        raise OfficeError('the office asks again and again to be restarted')

    def launch(self):
        lock = os.path.join(self.profile, '.lock')
        if os.path.exists(lock):
            os.remove(lock)              # left by an office that was killed
        self.pipe = 'jointsheet' + uuid.uuid4().hex
        command = ['setpriv', '--pdeathsig', 'TERM',      # an office must not outlive its test
                   *self.wrapper, os.path.join(PROGRAM, 'soffice.bin'),
                   profile_argument(self.profile), '--headless', '--invisible', '--norestore',
                   '--nodefault', '--nologo',
                   '--accept=pipe,name=%s;urp' % self.pipe]
        self.log = tempfile.TemporaryFile()
        self.process = subprocess.Popen(command, stdin=subprocess.DEVNULL, stdout=self.log,
                                        stderr=subprocess.STDOUT, env=self.environment,
                                        start_new_session=True)

    def said(self):
        self.log.seek(0)
        return self.log.read().decode(errors='replace')

    def connect(self):
        """True when connected, False when the office ended itself to be started again."""
        local = uno.getComponentContext()
        resolver = local.ServiceManager.createInstanceWithContext(
            'com.sun.star.bridge.UnoUrlResolver', local)
        end = time.monotonic() + self.patience
        while time.monotonic() < end:
            try:
                self.context = resolver.resolve(
                    'uno:pipe,name=%s;urp;StarOffice.ComponentContext' % self.pipe)
                self.desktop = self.service('com.sun.star.frame.Desktop')
                return True
            except NoConnectException:
                pass
            code = self.process.poll()
            if code == RESTART:
                return False
            if code is not None:
                raise OfficeError('the office ended with %d: %s' % (code, self.said()))
            time.sleep(0.05)
        self.kill()
        raise OfficeError('no connection to the office in %d s: %s' % (self.patience, self.said()))

    def service(self, name):
        return self.context.ServiceManager.createInstanceWithContext(name, self.context)

    def new_sheet(self):
        return self.desktop.loadComponentFromURL('private:factory/scalc', '_blank', 0,
                                                 (prop('Hidden', True),))

    def open(self, path):
        document = self.desktop.loadComponentFromURL(url(path), '_blank', 0,
                                                     (prop('Hidden', True),))
        if document is None:
            raise OfficeError('%s cannot be opened' % path)
        return document

    def store(self, document, path, filter_name, *options):
        os.makedirs(os.path.dirname(os.path.abspath(path)), exist_ok=True)
        document.storeToURL(url(path), (prop('FilterName', filter_name), prop('Overwrite', True),
                                        *options))

    def kill(self):
        if self.process and self.process.poll() is None:
            try:
                os.killpg(self.process.pid, signal.SIGKILL)
            except ProcessLookupError:
                pass
            self.process.wait()

    def __exit__(self, kind, error, trace):
        try:
            self.desktop.terminate()
        except DisposedException:
            pass                         # it ends while it answers
        except Exception as problem:
            print('ending the office: %s' % problem, file=sys.stderr)
        try:
            self.exit_code = self.process.wait(timeout=self.patience)
        except subprocess.TimeoutExpired:
            self.kill()
            self.exit_code = None
        if self.exit_code != 0 and kind is None:
            raise OfficeError('the office ended with %s: %s'
                              % (self.exit_code, self.said()[-4000:]))
        return False
