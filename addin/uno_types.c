/* uno_types.c - types and texts of UNO. */
#include "uno_types.h"

#include <stdint.h>
#include <string.h>

enum { REPLACEMENT = 0xfffd, TEXT_BLOCK = 1 << 16 };

uno_type *simple_type(typelib_TypeClass class)
{
    return *typelib_static_type_getByTypeClass(class);
}

/* typelib fills the cache once, under its own lock, so that threads may meet here */
static uno_type *sequence_of(uno_type *element, uno_type **cache)
{
    typelib_static_sequence_type_init(cache, element);
    return *cache;
}

uno_type *strings_type(void)
{
    static uno_type *cache;
    return sequence_of(simple_type(typelib_TypeClass_STRING), &cache);
}

uno_type *types_type(void)
{
    static uno_type *cache;
    return sequence_of(simple_type(typelib_TypeClass_TYPE), &cache);
}

uno_type *bytes_type(void)
{
    static uno_type *cache;
    return sequence_of(simple_type(typelib_TypeClass_BYTE), &cache);
}

uno_type *anys_type(void)
{
    static uno_type *cache;
    return sequence_of(simple_type(typelib_TypeClass_ANY), &cache);
}

uno_type *any_rows_type(void)
{
    static uno_type *cache;
    return sequence_of(anys_type(), &cache);
}

uno_type *numbers_type(void)
{
    static uno_type *cache;
    return sequence_of(simple_type(typelib_TypeClass_DOUBLE), &cache);
}

uno_type *number_rows_type(void)
{
    static uno_type *cache;
    return sequence_of(numbers_type(), &cache);
}

bool same_text(const rtl_uString *text, const char *ascii)
{
    return rtl_ustr_ascii_compare(text->buffer, ascii) == 0;
}

/* ---- UTF-8 to the office's UTF-16 ---- */

/* Reads one character at *s and moves past it. */
static unsigned long next_of_utf8(const unsigned char **s)
{
    static const unsigned long least[] = { 0, 0x80, 0x800, 0x10000 };
    unsigned char first = *(*s)++;
    if (first < 0x80) return first;
    int more = first >= 0xf0 && first < 0xf5 ? 3 : first >= 0xe0 && first < 0xf0 ? 2
             : first >= 0xc2 && first < 0xe0 ? 1 : 0;
    if (more == 0) return REPLACEMENT;
    unsigned long c = first & (0x3fu >> more);
    const unsigned char *t = *s;
    for (int i = 0; i < more; i++, t++) {
        if ((*t & 0xc0) != 0x80) return REPLACEMENT;
        c = c << 6 | (*t & 0x3fu);
    }
    if (c < least[more] || c > 0x10ffff || (c >= 0xd800 && c < 0xe000)) return REPLACEMENT;
    *s = t;
    return c;
}

rtl_uString *office_text(const char *utf8)
{
    size_t bytes = strlen(utf8);
    if (bytes > INT32_MAX / 4) return NULL;
    rtl_uString *text = NULL;
    rtl_uString_new(&text);                     /* the office's one empty text, not to be written */
    if (!bytes) return text;
    rtl_uString_new_WithLength(&text, (sal_Int32)bytes);        /* never more units than bytes */
    if (!text) return NULL;
    sal_Int32 n = 0;
    for (const unsigned char *s = (const unsigned char *)utf8; *s; ) {
        unsigned long c = next_of_utf8(&s);
        if (c < 0x10000) {
            text->buffer[n++] = (sal_Unicode)c;
        } else {
            text->buffer[n++] = (sal_Unicode)(0xd7c0 + (c >> 10));
            text->buffer[n++] = (sal_Unicode)(0xdc00 + (c & 0x3ff));
        }
    }
    text->buffer[n] = 0;
    text->length = n;
    return text;
}

/* ---- the office's UTF-16 to UTF-8 ---- */

static bool is_high(unsigned long unit) { return unit >= 0xd800 && unit < 0xdc00; }
static bool is_low(unsigned long unit) { return unit >= 0xdc00 && unit < 0xe000; }

static char *put_utf8(char *out, unsigned long c)
{
    if (c < 0x80) {
        *out++ = (char)c;
        return out;
    }
    if (c < 0x800) {
        *out++ = (char)(0xc0 | c >> 6);
    } else {
        if (c < 0x10000) {
            *out++ = (char)(0xe0 | c >> 12);
        } else {
            *out++ = (char)(0xf0 | c >> 18);
            *out++ = (char)(0x80 | (c >> 12 & 0x3f));
        }
        *out++ = (char)(0x80 | (c >> 6 & 0x3f));
    }
    *out++ = (char)(0x80 | (c & 0x3f));
    return out;
}

static bool make_room(struct letters *into, size_t bytes, pool *p)
{
    if (bytes <= into->left) return true;
    size_t block = bytes > TEXT_BLOCK ? bytes : TEXT_BLOCK;
    into->at = pool_take(p, block, 1);
    into->left = into->at ? block : 0;
    return into->at != NULL;
}

const char *plain_text(const rtl_uString *text, struct letters *into, pool *p)
{
    if (!make_room(into, 3 * (size_t)text->length + 1, p)) return NULL;
    char *out = into->at;
    for (sal_Int32 i = 0; i < text->length; i++) {
        unsigned long c = text->buffer[i];
        if (is_high(c) && i + 1 < text->length && is_low(text->buffer[i + 1]))
            c = 0x10000 + ((c - 0xd800) << 10) + (text->buffer[++i] - 0xdc00UL);
        else if (c == 0 || is_high(c) || is_low(c))
            c = REPLACEMENT;
        out = put_utf8(out, c);
    }
    *out++ = 0;
    const char *start = into->at;
    into->left -= (size_t)(out - start);
    into->at = out;
    return start;
}
