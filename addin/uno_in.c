/* uno_in.c - what the office passes, as values. One pass over a range, no
 * allocation for a cell: ranges of a million cells are usual.
 */
#include "uno_cells.h"
#include "uno_types.h"

/* A range: rows of cells, one row of cells, or rows that stand in anys. */
struct range {
    enum { ROWS_OF_CELLS, ONE_ROW, ROWS_IN_ANYS } shape;
    typelib_TypeClass of;
    const uno_Sequence *all;
};

/* A row of cells of one UNO type. */
struct cells {
    typelib_TypeClass of;
    const uno_Sequence *row;
};

/* The table that is being filled. */
struct filling {
    table *to;
    struct letters letters;
    pool *pool;
};

static bool number_of(typelib_TypeClass class, const void *at, double *x)
{
    switch (class) {
    case typelib_TypeClass_DOUBLE:         *x = own_number(*(const double *)at); return true;
    case typelib_TypeClass_FLOAT:          *x = (double)*(const float *)at; return true;
    case typelib_TypeClass_BOOLEAN:        *x = *(const sal_Bool *)at != 0; return true;
    case typelib_TypeClass_BYTE:           *x = *(const sal_Int8 *)at; return true;
    case typelib_TypeClass_SHORT:          *x = *(const sal_Int16 *)at; return true;
    case typelib_TypeClass_UNSIGNED_SHORT: *x = *(const sal_uInt16 *)at; return true;
    case typelib_TypeClass_LONG:           *x = *(const sal_Int32 *)at; return true;
    case typelib_TypeClass_UNSIGNED_LONG:  *x = *(const sal_uInt32 *)at; return true;
    case typelib_TypeClass_HYPER:          *x = (double)*(const sal_Int64 *)at; return true;
    case typelib_TypeClass_UNSIGNED_HYPER: *x = (double)*(const sal_uInt64 *)at; return true;
    default: return false;
    }
}

/* The bytes that a cell takes in a sequence; 0 for types that are no cells. */
static size_t cell_size(typelib_TypeClass class)
{
    switch (class) {
    case typelib_TypeClass_ANY:            return sizeof(uno_Any);
    case typelib_TypeClass_STRING:         return sizeof(rtl_uString *);
    case typelib_TypeClass_DOUBLE:         return sizeof(double);
    case typelib_TypeClass_FLOAT:          return sizeof(float);
    case typelib_TypeClass_BOOLEAN:
    case typelib_TypeClass_BYTE:           return 1;
    case typelib_TypeClass_SHORT:
    case typelib_TypeClass_UNSIGNED_SHORT: return 2;
    case typelib_TypeClass_LONG:
    case typelib_TypeClass_UNSIGNED_LONG:  return 4;
    case typelib_TypeClass_HYPER:
    case typelib_TypeClass_UNSIGNED_HYPER: return 8;
    default: return 0;
    }
}

/* The class that stands after so many "[]" in the name of a type; VOID when it is no cell's. */
static typelib_TypeClass element_class(const uno_type *type, int depth)
{
    if (type->eTypeClass != typelib_TypeClass_SEQUENCE) return typelib_TypeClass_VOID;
    const sal_Unicode *element = type->pTypeName->buffer + 2 * depth;
    for (int class = typelib_TypeClass_BOOLEAN; class <= (int)typelib_TypeClass_ANY; class++) {
        if (!cell_size((typelib_TypeClass)class)) continue;
        uno_type *known = simple_type((typelib_TypeClass)class);
        if (!rtl_ustr_compare(element, known->pTypeName->buffer)) return (typelib_TypeClass)class;
    }
    return typelib_TypeClass_VOID;
}

static status put_word(struct filling *f, size_t place, const rtl_uString *text)
{
    table *t = f->to;
    t->at[place] = gap();
    if (text->length == 0) return OK;
    if (!t->words) {
        t->words = pool_take_zeroed(f->pool, t->rows * t->cols, sizeof *t->words);
        if (!t->words) return NO_MEMORY;
    }
    t->words[place] = plain_text(text, &f->letters, f->pool);
    return t->words[place] ? OK : NO_MEMORY;
}

static status put_cell(struct filling *f, size_t place, typelib_TypeClass class, const void *at)
{
    if (class == typelib_TypeClass_ANY) {
        const uno_Any *any = at;
        class = any->pType->eTypeClass;
        at = any->pData;
    }
    if (number_of(class, at, f->to->at + place)) return OK;
    if (class == typelib_TypeClass_STRING)
        return put_word(f, place, *(rtl_uString *const *)at);
    if (class != typelib_TypeClass_VOID) return BAD_KIND;
    f->to->at[place] = gap();
    return OK;
}

/* Row i of a range. Only rows that come as anys of their own tell their type anew. */
static status row_of(const struct range *from, size_t i, struct cells *c)
{
    const void *elements = from->all->elements;
    *c = (struct cells){ from->of, from->all };
    if (from->shape == ROWS_OF_CELLS) c->row = ((uno_Sequence *const *)elements)[i];
    if (from->shape != ROWS_IN_ANYS) return OK;
    const uno_Any *row = (const uno_Any *)elements + i;
    c->of = element_class(row->pType, 1);
    if (c->of == typelib_TypeClass_VOID) return BAD_KIND;
    c->row = *(uno_Sequence *const *)row->pData;
    return OK;
}

static status range_from_any(const uno_Any *any, struct range *r)
{
    r->all = *(uno_Sequence *const *)any->pData;
    if (r->all->nElements == 0) return BAD_KIND;
    r->shape = ROWS_OF_CELLS;
    r->of = element_class(any->pType, 2);
    if (r->of != typelib_TypeClass_VOID) return OK;
    r->of = element_class(any->pType, 1);
    const uno_Any *first = (const void *)r->all->elements;
    bool nested = r->of == typelib_TypeClass_ANY &&
                  first->pType->eTypeClass == typelib_TypeClass_SEQUENCE;
    r->shape = nested ? ROWS_IN_ANYS : ONE_ROW;
    return r->of == typelib_TypeClass_VOID ? BAD_KIND : OK;
}

static status fill_row(struct filling *f, size_t i, const struct cells *c)
{
    size_t cols = f->to->cols, step = cell_size(c->of);
    if ((size_t)c->row->nElements != cols) return BAD_KIND;
    for (size_t j = 0; j < cols; j++) {
        status s = put_cell(f, i * cols + j, c->of, c->row->elements + j * step);
        if (s != OK) return s;
    }
    return OK;
}

static status table_from_any(const uno_Any *any, value *v, pool *p)
{
    struct range from;
    struct cells c;
    if (range_from_any(any, &from) != OK || row_of(&from, 0, &c) != OK || c.row->nElements == 0)
        return BAD_KIND;
    v->is = IS_TABLE;
    v->table = (table){ .rows = from.shape == ONE_ROW ? 1 : (size_t)from.all->nElements,
                        .cols = (size_t)c.row->nElements };
    table *t = &v->table;
    t->at = pool_take(p, t->rows * t->cols, sizeof *t->at);
    if (!t->at) return NO_MEMORY;
    struct filling f = { .to = t, .pool = p };
    status s = OK;
    for (size_t i = 0; i < t->rows && s == OK; i++) {
        s = row_of(&from, i, &c);
        if (s == OK) s = fill_row(&f, i, &c);
    }
    return s;
}

status value_from_any(const uno_Any *any, value *v, pool *p)
{
    typelib_TypeClass class = any->pType->eTypeClass;
    *v = (value){ .is = IS_NOTHING };
    if (class == typelib_TypeClass_VOID) return OK;
    if (class == typelib_TypeClass_SEQUENCE) return table_from_any(any, v, p);
    if (number_of(class, any->pData, &v->number)) {
        v->is = IS_NUMBER;
        return OK;
    }
    if (class != typelib_TypeClass_STRING) return BAD_KIND;
    struct letters letters = { 0 };
    v->is = IS_TEXT;
    v->text = plain_text(*(rtl_uString *const *)any->pData, &letters, p);
    return v->text ? OK : NO_MEMORY;
}
