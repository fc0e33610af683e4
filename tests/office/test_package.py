"""What is in the extension: its files, what the library needs and what it shows to others."""
import re
import subprocess
import xml.etree.ElementTree as tree
import zipfile

FILES = {'META-INF/manifest.xml', 'description.xml', 'description.txt', 'jointsheet.components',
         'jointsheet.uno.so', 'types.rdb', 'CalcAddIns.xcu', 'LICENSE', 'NOTICES'}
NEEDED = {'libuno_cppu.so.3', 'libuno_sal.so.3', 'libm.so.6', 'libc.so.6'}


WIZARD = 130                         # letters of a parameter's help that the wizard shows


def helps(package):
    """Function, parameter and help of every parameter."""
    name = '{http://openoffice.org/2001/registry}name'
    root = tree.fromstring(zipfile.ZipFile(package).read('CalcAddIns.xcu'))
    for function in root.iter('node'):
        for part in function.findall('node'):
            for param in part.findall('node') if part.get(name) == 'Parameters' else ():
                help_ = [p.find('value').text for p in param.findall('prop')
                         if p.get(name) == 'Description']
                yield function.get(name), param.get(name), help_[0]


def wizard(checks, package):
    texts = list(helps(package))
    checks.check(len(texts) > 50, 'package: %d parameters have help' % len(texts))
    for function, param, text in texts:
        checks.check(len(text) <= WIZARD, 'package: the wizard cuts the help of %s of %s'
                     % (param, function))
        if param == 'family':
            checks.check(' gumbel ' in text,
                         'package: the wizard names no family for %s' % function)


def said(*command):
    return subprocess.run(command, check=True, stdout=subprocess.PIPE, text=True).stdout


def run(checks, given):
    files = {f for f in zipfile.ZipFile(given.package).namelist() if not f.endswith('/')}
    checks.check(files == FILES, 'package: holds %s' % ' '.join(sorted(files ^ FILES)))
    library = given.out + '/oxt/jointsheet.uno.so'
    needed = set(re.findall(r'NEEDED.*\[(.*)\]', said('readelf', '-d', library)))
    checks.check(needed == NEEDED, 'package: the library needs %s' % ' '.join(sorted(needed)))
    exported = re.findall(r' [A-Z] (\S+)', said('nm', '-D', '--defined-only', library))
    checks.check(exported == ['jointsheet_create'],
                 'package: the library exports %s' % ' '.join(exported))
    versions = set(re.findall(r'UDK_\w+', said('objdump', '-T', library)))
    checks.check(versions == {'UDK_3_0_0'},
                 'package: symbols of %s are used' % ' '.join(sorted(versions)))
    wizard(checks, given.package)
