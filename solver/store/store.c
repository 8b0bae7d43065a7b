/* store.c - ef_write_results and ef_read_results; what writing and reading share.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "store/store.h"

#include <string.h>

#include "endfix/run.h"
#include "store/file.h"

static const char seal_letters[8] = {'e', 'n', 'd', 'f', 'i', 'x', '.', '1'};
static const unsigned char hdf5_letters[8] = {0x89, 'H', 'D', 'F', '\r', '\n', 0x1a, '\n'};

/* FNV-1a over words of eight bytes, the last filled up with zeros; finds accidents, not forgers.
 * Fowler, Noll, Vo: "The FNV Non-Cryptographic Hash Algorithm" (constants from memory). */
static uint64_t check_sum(const unsigned char *bytes, size_t n)
{
    uint64_t sum = 14695981039346656037u;
    for (size_t i = 0; i < n; i += 8) {
        uint64_t word = 0;
        memcpy(&word, bytes + i, n - i < 8 ? n - i : 8);
        sum = (sum ^ word) * 1099511628211u;
        sum ^= sum >> 32; /* carries the high bits of a word down */
    }
    return sum;
}

void store_seal(unsigned char *bytes, size_t n)
{
    const uint64_t sum = check_sum(bytes, n);
    memcpy(bytes + n, seal_letters, sizeof seal_letters);
    memcpy(bytes + n + sizeof seal_letters, &sum, sizeof sum);
}

static EfStatus check_seal(EfContext *cx, const char *name, const unsigned char *bytes, size_t n)
{
    if (n < sizeof hdf5_letters || memcmp(bytes, hdf5_letters, sizeof hdf5_letters) != 0)
        return fail(cx, EF_E_IO, "%s: not a results file of endfix", name);
    const unsigned char *seal = bytes + n - SEAL_SIZE;
    if (n < SEAL_SIZE || memcmp(seal, seal_letters, sizeof seal_letters) != 0)
        return fail(cx, EF_E_IO, "%s: cut short, changed, or not written by endfix: run endfix again", name);
    const uint64_t sum = check_sum(bytes, n - SEAL_SIZE);
    if (memcmp(seal + sizeof seal_letters, &sum, sizeof sum) == 0) return EF_OK;
    return fail(cx, EF_E_IO, "%s: damaged or changed since it was written: run endfix again", name);
}

char *item_pointer(const Items *items, int i, size_t offset)
{
    char *p;
    memcpy(&p, items->base + (size_t)i * items->stride + offset, sizeof p);
    return p;
}

int item_int(const Items *items, int i, size_t offset)
{
    int value;
    memcpy(&value, items->base + (size_t)i * items->stride + offset, sizeof value);
    return value;
}

Shape row_shape(const Store *s, const Row *row, const Items *items)
{
    Shape shape = {0};
    if (items->counter != 0) {
        shape.at[0] = (hsize_t)items->n;
        shape.counter[shape.rank++] = items->counter;
    }
    for (int i = 0; i < ROW_DIMS && row->dim[i] != 0; i++) {
        const int counter = row->dim[i] < 0 ? row->dim[i] : 0;
        shape.at[shape.rank] = (hsize_t)(counter ? s->n[-counter] : row->dim[i]);
        shape.counter[shape.rank++] = counter;
    }
    return shape;
}

EfStatus check_group_name(Store *s, const char *name)
{
    if (name && name[0] && !strchr(name, '/') && strcmp(name, ".") != 0 && strcmp(name, "..") != 0) return EF_OK;
    return fail(s->cx, EF_E_IO, "%s: a case cannot be called \"%s\" in a results file", s->name, name ? name : "");
}

/* ---- layout: the first attribute to look at ---------------------------------------------------------------------- */

typedef struct Layout {
    int layout;
} Layout;
static const Row layout_row = IN("@layout", Layout, layout, T_INT, "1", "layout of this file");

static EfStatus check_layout(Store *s)
{
    static const Shape one = {0};
    int layout;
    TRY(hdf_get(s, layout_row.path, &layout_row, &one, &layout));
    if (layout == STORE_LAYOUT) return EF_OK;
    return fail(s->cx, EF_E_IO, "%s: layout %d of the file is unknown; this program reads layout %d", s->name, layout, STORE_LAYOUT);
}

/* ---- whole files ------------------------------------------------------------------------------------------------------ */

static EfStatus write_all(Store *s, const EfResults *results)
{
    static const Shape one = {0};
    const int layout = STORE_LAYOUT;
    /* Without its folder: the same input gives the same bytes wherever it lies. */
    EfFrame frame = *results->frame;
    const char *slash = frame.path ? strrchr(frame.path, '/') : NULL;
    if (slash) frame.path = slash + 1;
    const Items frame_item = {.base = (char *)&frame, .n = 1};
    const Items results_item = {.base = (char *)(uintptr_t)results, .n = 1}; /* only read */
    TRY(hdf_put(s, layout_row.path, &layout_row, &one, &layout));
    TRY(write_table(s, "", &frame_table, &frame_item));
    TRY(write_table(s, "", &results_table, &results_item));
    return write_views(s, results);
}

EfStatus store_pack(EfContext *cx, const char *name, const EfResults *results, unsigned char **bytes, size_t *n)
{
    Store s;
    EfStatus st = hdf_create(cx, name, &s);
    if (st == EF_OK) st = write_all(&s, results);
    if (st == EF_OK) st = hdf_image(&s, SEAL_SIZE, bytes, n);
    hdf_close(&s);
    if (st != EF_OK) return st;
    store_seal(*bytes, *n);
    *n += SEAL_SIZE;
    return EF_OK;
}

static EfStatus read_everything(Store *s, EfResults **out)
{
    EfFrame *frame;
    EfResults *results;
    ALLOC(s->cx, keep, frame, 1);
    ALLOC(s->cx, keep, results, 1);
    const Items frame_item = {.base = (char *)frame, .n = 1}, results_item = {.base = (char *)results, .n = 1};
    TRY(check_layout(s));
    TRY(read_table(s, "", &frame_table, &frame_item));
    TRY(read_table(s, "", &results_table, &results_item));
    results->frame = frame;
    *out = results;
    return EF_OK;
}

EfStatus store_unpack(EfContext *cx, const char *name, const unsigned char *bytes, size_t n, EfResults **results)
{
    Store s;
    TRY(check_seal(cx, name, bytes, n));
    EfStatus st = hdf_open(cx, name, bytes, n - SEAL_SIZE, &s);
    if (st == EF_OK) st = read_everything(&s, results);
    hdf_close(&s);
    return st;
}

EfStatus ef_write_results(EfContext *cx, const EfResults *results, const char *path)
{
    const ArenaMark mark = arena_mark(&cx->tmp);
    unsigned char *bytes;
    size_t n;
    EfStatus st = store_pack(cx, path, results, &bytes, &n);
    if (st == EF_OK) st = file_replace(cx, path, bytes, n);
    arena_rewind(&cx->tmp, mark);
    return st;
}

EfStatus ef_read_results(EfContext *cx, const char *path, EfResults **results)
{
    const ArenaMark mark = arena_mark(&cx->tmp);
    unsigned char *bytes;
    size_t n;
    EfStatus st = file_read(cx, path, &bytes, &n);
    if (st == EF_OK) st = store_unpack(cx, path, bytes, n, results);
    arena_rewind(&cx->tmp, mark);
    return st;
}
