/* Texts: words, what reads as a number, formatting. The rules are those of the reference. */
#include "table.h"

#include "../../addin/words.h"

#include <locale.h>

static void format(char *to, size_t n, const char *format, ...)
{
    va_list rest;
    va_start(rest, format);
    format_text(to, n, format, rest);
    va_end(rest);
}

static void words_are_the_same_whatever_case_and_blanks(void **state)
{
    (void)state;
    assert_true(same_word("Gumbel", " gumbel\t"));
    assert_false(same_word("gumbel", "gumbe"));
    assert_false(same_word("", "a"));
    assert_true(same_word("", "  "));
    assert_int_equal(word_in("pairs rows", "ROWS"), 1);
    assert_int_equal(word_in("pairs rows", "row"), -1);
    assert_int_equal(word_in("pairs rows", ""), -1);
    assert_string_equal(without_prefix("JOINT.TAU", "joint."), "TAU");
    assert_string_equal(without_prefix("JOIN", "joint."), "JOIN");
}

static void texts_that_read_as_numbers(void **state)
{
    (void)state;
    static const char *const numbers[] = { "12",  " 3,5 ", "1.234,5", "-2e3",
                                           "7 %", "+1E-5", "1'000",   ".5" };
    static const char *const others[] = { "",   "motor", "Q1",  "1a",  "-",
                                          "e5", "2e",    "1e+", "n/a", "1 000 kg" };
    for (size_t i = 0; i < sizeof numbers / sizeof *numbers; i++)
        assert_true(reads_as_number(numbers[i]));
    for (size_t i = 0; i < sizeof others / sizeof *others; i++)
        assert_false(reads_as_number(others[i]));
}

/* A header is text with a letter: a sum of money, a date or a dash above numbers is no name. */
static void texts_that_read_as_names(void **state)
{
    (void)state;
    static const char *const names[] = { "motor", "Q1", "5 EUR", "2018 motor", "\xc3\xa9t\xc3\xa9",
                                         "\xe6\x90\x8d" };
    static const char *const others[] = { "", " ", "(7)", "$5", "\xe2\x82\xac 5", "\xe2\x88\x92"
                                          "5", "12-", "1/2", "2020-01-01", "1\xc2\xa0" "234,5",
                                          "5\xc2\xa0%", "-", "1e5" };
    for (size_t i = 0; i < sizeof names / sizeof *names; i++) assert_true(reads_as_name(names[i]));
    for (size_t i = 0; i < sizeof others / sizeof *others; i++)
        assert_false(reads_as_name(others[i]));
}

static void lists_and_tidy_words(void **state)
{
    (void)state;
    pool p = { 0 };
    assert_string_equal(listed(&p, "a b c"), "a, b or c");
    assert_string_equal(listed(&p, "a b"), "a or b");
    assert_string_equal(listed(&p, "a"), "a");
    assert_string_equal(tidy_words(&p, "  Gumbel   FRANK "), "gumbel frank");
    assert_string_equal(tidy_words(&p, " "), "");
    pool_empty(&p);
}

static void numbers_have_a_point_and_are_not_rounded_to_whole_ones(void **state)
{
    (void)state;
    char to[64];
    setlocale(LC_NUMERIC, "de_DE.UTF-8");
    format(to, sizeof to, "%g %g %g", 0.5, 1.0 / 3, -1e-9);
    assert_string_equal(to, "0.5 0.333333 -1e-09");
    format(to, sizeof to, "%g %g %g", 0.99999999, 1048577.0, 2.5);
    assert_string_equal(to, "0.99999999 1048577 2.5");
    format(to, sizeof to, "%g %g", 1e300, 123456789.0);
    assert_string_equal(to, "1e+300 123456789");
    format(to, sizeof to, "%s %zu %d 100%%", "x", (size_t)7, -3);
    assert_string_equal(to, "x 7 -3 100%");
    setlocale(LC_NUMERIC, "C");
}

static void cut_off_between_letters(void **state)
{
    (void)state;
    char to[6];
    format(to, sizeof to, "%s", "abcd\xc3\xa9z");
    assert_string_equal(to, "abcd");
    format(to, sizeof to, "%s", "abcdefgh");
    assert_string_equal(to, "abcde");
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(words_are_the_same_whatever_case_and_blanks),
        cmocka_unit_test(texts_that_read_as_numbers),
        cmocka_unit_test(texts_that_read_as_names),
        cmocka_unit_test(lists_and_tidy_words),
        cmocka_unit_test(numbers_have_a_point_and_are_not_rounded_to_whole_ones),
        cmocka_unit_test(cut_off_between_letters),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
