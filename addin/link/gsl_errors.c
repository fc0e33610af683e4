/* gsl_errors.c - GSL's error functions, replaced.
 *
 * GSL's own print to stderr and call abort(), which would end the user's office. These let the
 * status come back to the caller and do nothing else. Defined here, they are what the linker
 * takes instead of those in libgsl.a, so nothing has to be switched off at run time.
 */
#include <gsl/gsl_errno.h>
#include <gsl/gsl_message.h>

void gsl_error(const char *reason, const char *file, int line, int gsl_errno)
{
    (void)reason;
    (void)file;
    (void)line;
    (void)gsl_errno;
}

gsl_error_handler_t *gsl_set_error_handler(gsl_error_handler_t *new_handler)
{
    (void)new_handler;
    return NULL;
}

gsl_error_handler_t *gsl_set_error_handler_off(void)
{
    return NULL;
}

void gsl_stream_printf(const char *label, const char *file, int line, const char *reason)
{
    (void)label;
    (void)file;
    (void)line;
    (void)reason;
}

void gsl_message(const char *message, const char *file, int line, unsigned int mask)
{
    (void)message;
    (void)file;
    (void)line;
    (void)mask;
}
