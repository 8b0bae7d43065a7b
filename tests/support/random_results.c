/* random_results.c - results with a random value in every field, and a comparison of every field bit for bit.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "support/check.h"

#include <string.h>

#include "store/store.h"
#include "support/random_results.h"

enum { MOST_ARRAYS = 40 };

typedef struct Source {
    EfContext *cx;
    uint64_t stream, i;
    int n[COUNTERS];
} Source;

/* An array in a struct and what may stand in it. */
typedef struct Array {
    void *pointer; /* where the pointer stands */
    ValueType type;
    int n, least, below;
} Array;

static int pick(Source *s, int least, int below)
{
    return below <= least ? least : (int)floor(test_uniform(s->stream, s->i++, least, below));
}

static double any_double(Source *s)
{
    switch (pick(s, 0, 12)) {
    case 0: return NAN;
    case 1: return INFINITY;
    case 2: return -0.0;
    case 3: return -NAN;
    default: return test_uniform(s->stream, s->i++, -1e6, 1e6);
    }
}

static const char *any_text(Source *s)
{
    static const char *const text[] = {"", "a", "leg 1", "Stütze λ = 1.5", "unsafe by 14 %",
                                       "a longer line, as a caution or a reason would be; it goes on for a while and then ends."};
    return text[pick(s, 0, 6)];
}

static void any_value(Source *s, ValueType type, int least, int below, void *at)
{
    const double d = any_double(s);
    const int i = pick(s, least, below);
    const bool b = pick(s, 0, 2) == 1;
    const char *text = any_text(s);
    if (type == T_NAME && !text[0]) text = NULL;
    switch (type) {
    case T_DOUBLE: memcpy(at, &d, sizeof d); break;
    case T_INT: case T_WORD: memcpy(at, &i, sizeof i); break;
    case T_BOOL: memcpy(at, &b, sizeof b); break;
    case T_TEXT: case T_NAME: memcpy(at, &text, sizeof text); break;
    case T_HASH: memset(at, 'a' + i % 6, HASH_SIZE - 1); break;
    }
}

static int words(const Row *row)
{
    int n = 0;
    while (row->words[n]) n++;
    return n;
}

static int limit(const Source *s, const Row *row)
{
    if (row->type == T_WORD) return words(row);
    if (row->below == NRUN) return s->n[-NCASE] + s->n[-NCOMBINATION];
    if (row->below < 0) return s->n[-row->below];
    return row->below > 0 ? row->below : 4;
}

static size_t values_inside(const Row *row)
{
    size_t n = 1;
    for (int i = 0; i < ROW_DIMS && row->dim[i] > 0; i++) n *= (size_t)row->dim[i];
    return n;
}

/* All values inside a struct, and its ragged lists. */
static void fill_struct(Source *s, const Table *table, char *base)
{
    for (int r = 0; r < table->nrow; r++) {
        const Row *row = &table->row[r];
        const int least = row->least, below = limit(s, row->type == T_WORD || row->kind == ROW_IN || row->kind == ROW_RAGGED
                                                          ? row : &(Row){.below = 1});
        if (row->kind == ROW_IN)
            for (size_t k = 0; k < values_inside(row); k++)
                any_value(s, row->type, least, below, base + row->offset + k * value_size(row->type));
        if (row->kind != ROW_RAGGED && row->kind != ROW_RAGGED_LIST) continue;
        int n;
        memcpy(&n, base + row->count, sizeof n);
        const size_t each = row->table ? row->table->size : value_size(row->type);
        char *values = arena_take(s->cx, &s->cx->keep, (size_t)n, each);
        assert_non_null(values);
        for (int k = 0; k < n; k++) {
            if (row->table) fill_struct(s, row->table, values + (size_t)k * each);
            else any_value(s, row->type, least, below, values + (size_t)k * each);
        }
        memcpy(base + row->offset, &values, sizeof values);
    }
}

/* Lists of structs and groups of a struct that the tables describe; counts are set before. */
static void fill_lists(Source *s, const Table *table, char *base)
{
    fill_struct(s, table, base);
    for (int r = 0; r < table->nrow; r++) {
        const Row *row = &table->row[r];
        if (row->kind == ROW_COUNT) memcpy(base + row->offset, &s->n[-row->dim[0]], sizeof(int));
        if (row->kind == ROW_GROUP) fill_struct(s, row->table, base + row->offset);
        if (row->kind != ROW_LIST || row->dim[0] == NRESULT) continue;
        const int n = s->n[-row->dim[0]];
        char *list = arena_take(s->cx, &s->cx->keep, (size_t)n, row->table->size);
        assert_non_null(list);
        for (int k = 0; k < n; k++) fill_struct(s, row->table, list + (size_t)k * row->table->size);
        memcpy(base + row->offset, &list, sizeof list);
    }
}

/* ---- arrays, with their lengths as results.h states them ------------------------------------------------------------ */

#define D(field, n_) a[k++] = (Array){.pointer = &(field), .type = T_DOUBLE, .n = (n_)}
#define I(field, n_, least_, below_) \
    a[k++] = (Array){.pointer = &(field), .type = T_INT, .n = (n_), .least = (least_), .below = (below_)}
#define T(field, n_) a[k++] = (Array){.pointer = &(field), .type = T_TEXT, .n = (n_)}

static int critical_arrays(EfCritical *c, int nj, int nt, int np, Array *a)
{
    const int nm = c->nmode;
    int k = 0;
    D(c->factor, nm), D(c->residual, nm), D(c->mesh_error, nm), D(c->shape, nm * nj * 6), D(c->line, nm * np * 3);
    D(c->lost, nm * nt), D(c->stored, nm * nt), D(c->lost_others, nm), D(c->stored_others, nm);
    I(c->role, nm * nt, 0, 4), I(c->family, nm, 0, nm), T(c->kind, nm);
    return k;
}

static int fixity_arrays(EfFixity *f, int nt, int nm, Array *a)
{
    int k = 0;
    D(f->frame_c, nt), D(f->own_critical, nt), D(f->own_c, nt), D(f->own_plane, nt * 3), D(f->second_c, nt), D(f->clear_c, nt);
    D(f->reserve, nt), D(f->safe_c, nt), D(f->safe_at, nt), D(f->end_stiffness, nt * 8);
    I(f->role, nt, 0, 4), I(f->shape_of, nt, -1, nm), T(f->note, nt);
    return k;
}

static int case_arrays(EfCaseResult *r, int nj, int nt, Array *a)
{
    int k = 0;
    D(r->displacement, nj * 6), I(r->reaction_joint, r->nreaction, 0, nj), D(r->reaction, r->nreaction * 6);
    D(r->axial, nt), D(r->axial_min, nt), D(r->axial_growing, nt), D(r->end_force, nt * 12), D(r->end_force_limit, nt * 12);
    D(r->station_moment, nt * 10);
    return k;
}

static int result_arrays(EfResults *r, Array *a)
{
    const int nt = r->frame->ntube;
    int k = 0;
    D(r->length, nt), D(r->clear_length, nt), D(r->tube_mass, nt);
    D(r->point_position, r->npoint * 3), I(r->point_tube, r->npoint, 0, nt), D(r->point_station, r->npoint);
    T(r->notes.caution, r->notes.ncaution), T(r->notes.default_used, r->notes.ndefault), T(r->notes.source, r->notes.nsource);
    T(r->notes.not_checked, r->notes.nnot_checked), T(r->notes.draft, r->notes.ndraft);
    return k;
}

static void fill_arrays(Source *s, int n, const Array *a)
{
    for (int i = 0; i < n; i++) {
        const size_t each = value_size(a[i].type);
        char *values = arena_take(s->cx, &s->cx->keep, (size_t)a[i].n, each);
        assert_non_null(values);
        for (int k = 0; k < a[i].n; k++) any_value(s, a[i].type, a[i].least, a[i].below, values + (size_t)k * each);
        memcpy(a[i].pointer, &values, sizeof values);
    }
}

static void fill_case(Source *s, EfResults *r, int number)
{
    const int nj = r->frame->njoint, nt = r->frame->ntube;
    EfCaseResult *c = &r->cases[number];
    Array a[MOST_ARRAYS];
    s->n[-NREACTION] = pick(s, 0, 4), s->n[-NMARGIN] = pick(s, 0, 9), s->n[-NLEDGER] = pick(s, 0, 9), s->n[-NM] = pick(s, 0, 4);
    fill_lists(s, results_table.row[results_table.nrow - 1].table, (char *)c);
    c->name = keep_format(s->cx, "@%d @ 3 g%s", number, c->reversed ? " reversed" : "");
    c->critical.nmode = s->n[-NM];
    c->negative.nmode = pick(s, 0, 3);
    fill_arrays(s, case_arrays(c, nj, nt, a), a);
    fill_arrays(s, critical_arrays(&c->critical, nj, nt, r->npoint, a), a);
    fill_arrays(s, critical_arrays(&c->negative, nj, nt, r->npoint, a), a);
    fill_arrays(s, fixity_arrays(&c->fixity, nt, c->critical.nmode, a), a);
}

EfResults *random_results(EfContext *cx, uint64_t stream, int joints)
{
    Source s = {.cx = cx, .stream = stream};
    for (int i = 0; i < COUNTERS; i++) s.n[i] = pick(&s, 0, 4);
    const int least_one[] = {NMATERIAL, NSIZE, NCASE};
    for (int i = 0; i < 3; i++) s.n[-least_one[i]]++;
    s.n[-NJ] = joints, s.n[-NT] = joints - 1, s.n[-NP] = 3 * s.n[-NT];
    EfFrame *f = arena_take(cx, &cx->keep, 1, sizeof *f);
    EfResults *r = arena_take(cx, &cx->keep, 1, sizeof *r);
    assert_true(f && r);
    fill_lists(&s, &frame_table, (char *)f);
    fill_lists(&s, &results_table, (char *)r);
    f->path = "frame.yaml";
    r->frame = f;
    Array a[MOST_ARRAYS];
    fill_arrays(&s, result_arrays(r, a), a);
    if (stream % 2 == 0) /* in the order of the tubes, as a run leaves them */
        for (int i = 0; i < r->npoint; i++) r->point_tube[i] = i / 3;
    r->cases = arena_take(cx, &cx->keep, (size_t)r->ncase, sizeof *r->cases);
    assert_non_null(r->cases);
    for (int i = 0; i < r->ncase; i++) fill_case(&s, r, i);
    return r;
}

/* ---- comparison ---------------------------------------------------------------------------------------------------------- */

static void same_values(const char *what, ValueType type, size_t n, const void *a, const void *b)
{
    const size_t each = value_size(type);
    bool same = true;
    for (size_t i = 0; same && i < n; i++) {
        const char *x = (const char *)a + i * each, *y = (const char *)b + i * each, *s, *t;
        memcpy(&s, x, type == T_TEXT || type == T_NAME ? sizeof s : 0);
        memcpy(&t, y, type == T_TEXT || type == T_NAME ? sizeof t : 0);
        if (type != T_TEXT && type != T_NAME) same = memcmp(x, y, each) == 0;
        else same = (!s && !t) || (s && t && strcmp(s, t) == 0);
    }
    if (!same) FAIL("%s differs", what);
}

static void same_struct(const Table *table, const char *a, const char *b)
{
    for (int r = 0; r < table->nrow; r++) {
        const Row *row = &table->row[r];
        if (row->kind == ROW_IN) same_values(row->path, row->type, values_inside(row), a + row->offset, b + row->offset);
        if (row->kind == ROW_GROUP) same_struct(row->table, a + row->offset, b + row->offset);
        if (row->kind == ROW_COUNT) same_values("a count", T_INT, 1, a + row->offset, b + row->offset);
        const bool ragged = row->kind == ROW_RAGGED || row->kind == ROW_RAGGED_LIST;
        if (!ragged && (row->kind != ROW_LIST || row->dim[0] == NRESULT)) continue;
        int n = 0;
        for (int k = 0; k < table->nrow; k++)
            if (table->row[k].kind == ROW_COUNT && table->row[k].dim[0] == row->dim[0]) memcpy(&n, a + table->row[k].offset, sizeof n);
        if (ragged) memcpy(&n, a + row->count, sizeof n);
        const char *x, *y;
        memcpy(&x, a + row->offset, sizeof x);
        memcpy(&y, b + row->offset, sizeof y);
        if (!row->table) same_values(row->path, row->type, (size_t)n, x, y);
        else for (size_t k = 0; k < (size_t)n; k++) same_struct(row->table, x + k * row->table->size, y + k * row->table->size);
    }
}

static void same_arrays(int n, const Array *a, const Array *b)
{
    for (int i = 0; i < n; i++) {
        void *x, *y;
        char what[40];
        memcpy(&x, a[i].pointer, sizeof x);
        memcpy(&y, b[i].pointer, sizeof y);
        snprintf(what, sizeof what, "array number %d of %d", i, n);
        assert_int_equal(a[i].n, b[i].n);
        same_values(what, a[i].type, (size_t)a[i].n, x, y);
    }
}

void check_same_results(const EfResults *left, const EfResults *right)
{
    EfResults *x = (EfResults *)(uintptr_t)left, *y = (EfResults *)(uintptr_t)right; /* only read */
    Array a[MOST_ARRAYS], b[MOST_ARRAYS];
    const Table *of_case = results_table.row[results_table.nrow - 1].table;
    const int nj = x->frame->njoint, nt = x->frame->ntube, np = x->npoint;
    same_struct(&frame_table, (const char *)x->frame, (const char *)y->frame);
    same_struct(&results_table, (const char *)x, (const char *)y);
    same_arrays(result_arrays(x, a), a, (result_arrays(y, b), b));
    for (int i = 0; i < x->ncase; i++) {
        EfCaseResult *c = &x->cases[i], *d = &y->cases[i];
        assert_string_equal(c->name, d->name);
        same_struct(of_case, (const char *)c, (const char *)d);
        same_arrays(case_arrays(c, nj, nt, a), a, (case_arrays(d, nj, nt, b), b));
        same_arrays(critical_arrays(&c->critical, nj, nt, np, a), a, (critical_arrays(&d->critical, nj, nt, np, b), b));
        same_arrays(critical_arrays(&c->negative, nj, nt, np, a), a, (critical_arrays(&d->negative, nj, nt, np, b), b));
        same_arrays(fixity_arrays(&c->fixity, nt, c->critical.nmode, a), a, (fixity_arrays(&d->fixity, nt, d->critical.nmode, b), b));
    }
}
