/* uno.c - the object through which LibreOffice calls the functions of the tables.
 *
 * It is a binary UNO object (environment "uno"): a struct of three function pointers, so that no
 * C++ and no exception comes in. The office calls every method of every interface through
 * dispatch(); of our own interface, whose definition is generated from the same tables, method
 * 3 + i is function i.
 */
#include "uno_cells.h"
#include "uno_types.h"
#include "function.h"

#include <fenv.h>
#include <stdlib.h>

#define SERVICE "org.jointsheet.Functions"
#define IMPLEMENTATION "org.jointsheet.FunctionsImpl"

static const char *const interfaces[] = {
    "com.sun.star.lang.XTypeProvider",
    "com.sun.star.lang.XServiceInfo",
    "org.jointsheet.XFunctions",
};

enum { N_INTERFACES = sizeof interfaces / sizeof *interfaces, INHERITED_METHODS = 3 };

/* ---- calling a cell function ---- */

static const function *function_at(size_t position)
{
    for (const function *const *group = function_tables; *group; group++)
        for (const function *f = *group; f->name; f++)
            if (position-- == 0) return f;
    return NULL;
}

/* The arguments as values. Those of a function with a rest end in a sequence of any. */
static status read_arguments(const function *f, void **slots, report *r, size_t *n, value **in)
{
    size_t named = count_params(f) - (f->rest ? 1 : 0);
    const uno_Sequence *rest = f->rest ? *(uno_Sequence **)slots[named] : NULL;
    *n = named + (rest ? (size_t)rest->nElements : 0);
    *in = pool_take_zeroed(r->pool, *n + 1, sizeof **in);
    if (!*in) return NO_MEMORY;
    for (size_t i = 0; i < *n; i++) {
        const uno_Any *more = rest ? (const uno_Any *)(const void *)rest->elements : NULL;
        const uno_Any *any = i < named ? slots[i] : more + (i - named);
        status s = value_from_any(any, *in + i, r->pool);
        if (s != OK) return refuse(r, s, "argument %zu is no number, text or table of them", i + 1);
    }
    return OK;
}

/* The office's floating-point environment is set aside, since other libraries in the same process
 * may have changed rounding or switched small numbers off. */
static void call_cell_function(const function *f, void **slots, uno_Any *ret)
{
    fenv_t environment;
    fegetenv(&environment);
    fesetenv(FE_DFL_ENV);

    pool memory = { 0 };
    report r = { .pool = &memory };
    value out = { .is = IS_NOTHING }, *in;
    size_t n;
    status s = read_arguments(f, slots, &r, &n, &in);
    if (s == OK) s = call_function(f, in, n, &out, &r);
    answer_any(ret, s, &out);
    pool_empty(&memory);

    fesetenv(&environment);
}

/* ---- the object ---- */

struct object {
    uno_Interface interface;             /* first: a pointer to it is one to the object */
    oslInterlockedCount references;
};

static void SAL_CALL object_acquire(uno_Interface *self)
{
    osl_atomic_increment(&((struct object *)self)->references);
}

static void SAL_CALL object_release(uno_Interface *self)
{
    if (osl_atomic_decrement(&((struct object *)self)->references) == 0) free(self);
}

static void query_interface(uno_Interface *self, uno_type *wanted, uno_Any *ret)
{
    bool known = same_text(wanted->pTypeName, "com.sun.star.uno.XInterface");
    for (size_t i = 0; i < N_INTERFACES; i++)
        known = known || same_text(wanted->pTypeName, interfaces[i]);
    if (known) uno_type_any_construct(ret, &self, wanted, NULL);
    else uno_any_construct(ret, NULL, NULL, NULL);
}

static uno_Sequence *own_types(void)
{
    uno_Sequence *types = NULL;
    uno_type_sequence_construct(&types, types_type(), NULL, N_INTERFACES, NULL);
    for (size_t i = 0; types && i < N_INTERFACES; i++) {
        uno_type **place = (uno_type **)(void *)types->elements + i;
        rtl_uString *name = office_text(interfaces[i]);
        if (!name) continue;
        typelib_typedescriptionreference_release(*place);
        *place = NULL;
        typelib_typedescriptionreference_new(place, typelib_TypeClass_INTERFACE, name);
        rtl_uString_release(name);
    }
    return types;
}

static uno_Sequence *own_services(void)
{
    rtl_uString *name = office_text(SERVICE);
    uno_Sequence *services = NULL;
    uno_type_sequence_construct(&services, strings_type(), &name, 1, NULL);
    rtl_uString_release(name);
    return services;
}

/* ---- the methods of the interfaces that every component has ---- */

static void base_method(uno_Interface *self, sal_Int32 position, void *ret, void **slots)
{
    if (position == 0) query_interface(self, *(uno_type **)slots[0], ret);
    else if (position == 1) object_acquire(self);
    else object_release(self);
}

static void type_provider_method(const rtl_uString *name, void *ret)
{
    if (same_text(name, "getTypes")) *(uno_Sequence **)ret = own_types();
    else uno_type_sequence_construct(ret, bytes_type(), NULL, 0, NULL);   /* getImplementationId */
}

static void service_info_method(const rtl_uString *name, void *ret, void **slots)
{
    if (same_text(name, "getImplementationName"))
        *(rtl_uString **)ret = office_text(IMPLEMENTATION);
    else if (same_text(name, "supportsService"))
        *(sal_Bool *)ret = same_text(*(rtl_uString **)slots[0], SERVICE);
    else
        *(uno_Sequence **)ret = own_services();                    /* getSupportedServiceNames */
}

static void own_method(sal_Int32 position, void *ret, void **slots)
{
    const function *f = function_at((size_t)(position - INHERITED_METHODS));
    if (f) call_cell_function(f, slots, ret);
    else answer_any(ret, BAD_KIND, NULL);
}

/* The return slot is raw memory, arguments are borrowed, and there never is an exception. */
static void SAL_CALL dispatch(uno_Interface *self, const typelib_TypeDescription *description,
                              void *ret, void **slots, uno_Any **exception)
{
    const void *member = description;
    const typelib_InterfaceMemberTypeDescription *m = member;
    const typelib_InterfaceMethodTypeDescription *method = member;
    *exception = NULL;
    if (m->nPosition < INHERITED_METHODS) {
        base_method(self, m->nPosition, ret, slots);
        return;
    }
    const rtl_uString *interface = method->pInterface->aBase.pTypeName;
    if (same_text(interface, interfaces[0])) type_provider_method(m->pMemberName, ret);
    else if (same_text(interface, interfaces[1])) service_info_method(m->pMemberName, ret, slots);
    else own_method(m->nPosition, ret, slots);
}

/* What jointsheet.components names as the constructor: a new object, held once for the caller. */
void *jointsheet_create(uno_Interface *context, uno_Sequence **arguments);

__attribute__((visibility("default")))
void *jointsheet_create(uno_Interface *context, uno_Sequence **arguments)
{
    (void)context;
    (void)arguments;
    struct object *o = calloc(1, sizeof *o);
    if (!o) return NULL;
    *o = (struct object){ { object_acquire, object_release, dispatch }, 1 };
    return &o->interface;
}
