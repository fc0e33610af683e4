/* openblas.c - tells OpenBLAS which kernels to take.
 *
 * The packaged OpenBLAS does not know processors younger than itself and falls back to slow
 * kernels there. Where the processor has AVX2 and FMA the ones for Haswell are right. It must be
 * said before OpenBLAS' own constructor runs, hence the priority. What the user has set stands.
 */
#define _POSIX_C_SOURCE 200112L      /* setenv */

#include <stdlib.h>

#if defined(__x86_64__)
__attribute__((constructor(101)))
static void choose_kernels(void)
{
    __builtin_cpu_init();
    if (__builtin_cpu_supports("avx2") && __builtin_cpu_supports("fma"))
        setenv("OPENBLAS_CORETYPE", "Haswell", 0);
}
#endif
