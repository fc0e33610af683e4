/* families.h - the rows that the files of this directory define. */
#ifndef FAMILIES_H
#define FAMILIES_H

#include "../draw.h"
#include "../family.h"

extern const family independent_family, gaussian_family, t_family;
extern const family clayton_family, gumbel_family, frank_family, joe_family;
extern const family amh_family, plackett_family, fgm_family;

#endif
