"""The same workbook gives the same in a German office: neither words nor numbers in texts depend on
the language, while the cells around them do.
"""
from checks import Desk, same, shown, to_stored
from office import prop
from test_sweep import examples_of

SETTING = '/org.openoffice.Setup/L10N'


def set_language(office, name):
    provider = office.service('com.sun.star.configuration.ConfigurationProvider')
    access = provider.createInstanceWithArguments(
        'com.sun.star.configuration.ConfigurationUpdateAccess', (prop('nodepath', SETTING),))
    access.setPropertyValue('ooSetupSystemLocale', name)
    access.commitChanges()


def in_german(checks, office, stored):
    desk = Desk(office)
    try:
        desk.cell.Value = 0.5
        if not checks.check(desk.cell.String == '0,5', 'language: the office is not German'):
            return
        for formula, expected in stored:
            desk.cell.Formula = formula
            result = shown(desk.cell)
            checks.check(same(result, expected),
                         'language: %s gives %r, not %s' % (formula, result, expected))
    finally:
        desk.close()


def run(checks, desk, office, given):
    stored = [(to_stored(desk, formula), gives)
              for examples in examples_of(given).values() for formula, gives in examples]
    stored += [('=ORG.JOINTSHEET.FUNCTIONS.GREINER("0,5")', '#VALUE!'),
               ('=ORG.JOINTSHEET.FUNCTIONS.GREINER("0.5")', '#VALUE!'),
               ('=ISNUMBER(SEARCH("1.5";ORG.JOINTSHEET.FUNCTIONS.WHY("GREINER";1.5)))', '1')]
    set_language(office, 'de-DE')
    try:
        in_german(checks, office, stored)
    finally:
        set_language(office, '')
