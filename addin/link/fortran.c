/* fortran.c - the one function of the Fortran run-time library that LAPACK asks for, so that
 * libgfortran need not travel with the add-in.
 *
 * target = a // b: copied, cut or padded with blanks to the length of the target.
 */
#include <string.h>

void _gfortran_concat_string(size_t target_length, char *target, size_t a_length, const char *a,
                             size_t b_length, const char *b);

void _gfortran_concat_string(size_t target_length, char *target, size_t a_length, const char *a,
                             size_t b_length, const char *b)
{
    size_t from_a = a_length < target_length ? a_length : target_length;
    memcpy(target, a, from_a);
    size_t room = target_length - from_a;
    size_t from_b = b_length < room ? b_length : room;
    memcpy(target + from_a, b, from_b);
    memset(target + from_a + from_b, ' ', room - from_b);
}
