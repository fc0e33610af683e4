/* uno_c.h - the headers of the office's binary UNO interface, made to compile
 * as C. Built against LibreOffice 7.4; the interface has not changed since
 * OpenOffice 3.0, and only symbols of that age are used.
 */
#ifndef UNO_C_H
#define UNO_C_H

#ifndef LINUX
#define LINUX                                     /* sal/types.h asks for it */
#endif

#include <stdbool.h>

#include <typelib/typeclass.h>
#define _typelib_TypeClass typelib_TypeClass      /* typedescription.h forgets the tag */
#include <typelib/typedescription.h>

#include <osl/interlck.h>
#include <rtl/ustring.h>
#include <uno/any2.h>
#include <uno/data.h>
#include <uno/dispatcher.h>
#include <uno/sequence2.h>

#endif
