/* families.c - the list of copula families. */
#include "families.h"

#include <string.h>

const family *const families[] = {
    &independent_family, &gaussian_family, &t_family,
    &clayton_family, &gumbel_family, &frank_family, &joe_family,
    &amh_family, &plackett_family, &fgm_family,
    NULL
};

const char family_words[] = "independent gaussian t clayton gumbel frank joe "
                            "amh plackett fgm";

const family *family_named(const char *word)
{
    for (const family *const *f = families; *f; f++)
        if (!strcmp((*f)->word, word)) return *f;
    return NULL;
}
