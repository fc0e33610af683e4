/* version.h - the version that ABOUT, a priced block and the package state. */
#ifndef VERSION_H
#define VERSION_H

#define JOINTSHEET_VERSION "0.1.0"

#endif
