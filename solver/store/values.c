/* values.c - values between structs and HDF5: types, text of fixed length, words.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "store/values.h"

#include <string.h>

enum { LONGEST_TEXT = 1 << 16 };

size_t value_size(ValueType type)
{
    static const size_t size[] = {
        [T_DOUBLE] = sizeof(double), [T_INT] = sizeof(int), [T_BOOL] = sizeof(bool), [T_TEXT] = sizeof(char *),
        [T_NAME] = sizeof(char *), [T_HASH] = HASH_SIZE, [T_WORD] = sizeof(int)};
    return size[type];
}

static hid_t text_type(size_t size)
{
    const hid_t type = H5Tcopy(H5T_C_S1);
    if (type < 0) return -1;
    if (H5Tset_size(type, size) >= 0 && H5Tset_cset(type, H5T_CSET_UTF8) >= 0 && H5Tset_strpad(type, H5T_STR_NULLPAD) >= 0) return type;
    H5Tclose(type);
    return -1;
}

static int word_count(const char *const *words)
{
    int n = 0;
    while (words[n]) n++;
    return n;
}

static EfStatus bad_value(Store *s, const char *path)
{
    return fail(s->cx, EF_E_IO, "%s: damaged: a value of %s is out of range", s->name, path);
}

/* The i-th text; NULL stands for "". */
static const char *text_at(const Row *row, const void *values, size_t i)
{
    if (row->type == T_WORD) return row->words[((const int *)values)[i]];
    const char *text;
    memcpy(&text, (const char *)values + i * sizeof text, sizeof text);
    return text ? text : "";
}

static EfStatus encode_text(Store *s, const char *path, const Row *row, size_t n, const void *values, hid_t *type, const void **bytes)
{
    size_t longest = 1;
    if (row->type == T_WORD) {
        const int words = word_count(row->words);
        for (size_t i = 0; i < n; i++) {
            const int word = ((const int *)values)[i];
            if (word < 0 || word >= words) return bad_value(s, path);
        }
    }
    for (size_t i = 0; i < n; i++) {
        const size_t length = strlen(text_at(row, values, i));
        if (length > longest) longest = length;
    }
    if (longest > LONGEST_TEXT) return fail(s->cx, EF_E_IO, "%s: a text of %s is too long", s->name, path);
    char *flat;
    ALLOC(s->cx, tmp, flat, n * longest);
    for (size_t i = 0; i < n; i++) {
        const char *text = text_at(row, values, i);
        memcpy(flat + i * longest, text, strlen(text));
    }
    *bytes = flat;
    *type = text_type(longest);
    return EF_OK;
}

EfStatus values_encode(Store *s, const char *path, const Row *row, size_t n, const void *values, hid_t *type, const void **bytes)
{
    *type = -1;
    *bytes = values;
    switch (row->type) {
    case T_DOUBLE: *type = H5Tcopy(H5T_NATIVE_DOUBLE); break;
    case T_INT: *type = H5Tcopy(H5T_NATIVE_INT); break;
    case T_BOOL: *type = H5Tcopy(H5T_NATIVE_UCHAR); break;
    case T_HASH: *type = text_type(HASH_SIZE); break;
    case T_TEXT: case T_NAME: case T_WORD: TRY(encode_text(s, path, row, n, values, type, bytes)); break;
    }
    return *type < 0 ? fail(s->cx, EF_E_IO, "%s: HDF5 cannot make the type of %s", s->name, path) : EF_OK;
}

bool values_fit(hid_t type, ValueType wanted)
{
    const H5T_class_t kind = H5Tget_class(type);
    const size_t size = H5Tget_size(type);
    switch (wanted) {
    case T_DOUBLE: return kind == H5T_FLOAT && size == sizeof(double);
    case T_INT: return kind == H5T_INTEGER && size == sizeof(int);
    case T_BOOL: return kind == H5T_INTEGER && size == 1;
    case T_HASH: return kind == H5T_STRING && H5Tis_variable_str(type) == 0 && size == HASH_SIZE;
    default: return kind == H5T_STRING && H5Tis_variable_str(type) == 0 && size > 0 && size <= LONGEST_TEXT;
    }
}

hid_t values_read_type(hid_t in_file, ValueType wanted)
{
    switch (wanted) {
    case T_DOUBLE: return H5Tcopy(H5T_NATIVE_DOUBLE);
    case T_INT: return H5Tcopy(H5T_NATIVE_INT);
    case T_BOOL: return H5Tcopy(H5T_NATIVE_UCHAR);
    default: return H5Tcopy(in_file);
    }
}

/* Texts of at most `each` bytes, one after the other in one block; "" becomes NULL where the row says so. */
static EfStatus decode_text(Store *s, const Row *row, size_t n, const char *bytes, size_t each, void *values)
{
    size_t total = 0;
    for (size_t i = 0; i < n; i++) total += strnlen(bytes + i * each, each) + 1;
    char *block;
    ALLOC(s->cx, keep, block, total);
    for (size_t i = 0; i < n; i++) {
        const size_t length = strnlen(bytes + i * each, each);
        const char *text = row->type == T_NAME && length == 0 ? NULL : block;
        memcpy((char *)values + i * sizeof text, &text, sizeof text);
        memcpy(block, bytes + i * each, length);
        block += length + 1;
    }
    return EF_OK;
}

static EfStatus decode_words(Store *s, const char *path, const Row *row, size_t n, const char *bytes, size_t each, int *values)
{
    for (size_t i = 0; i < n; i++) {
        const char *text = bytes + i * each;
        const size_t length = strnlen(text, each);
        int k = 0;
        while (row->words[k] && (strlen(row->words[k]) != length || memcmp(row->words[k], text, length) != 0)) k++;
        if (!row->words[k]) return bad_value(s, path);
        values[i] = k;
    }
    return EF_OK;
}

static EfStatus decode_ints(Store *s, const char *path, const Row *row, size_t n, int *values)
{
    int below = row->below;
    if (below == NRUN) below = s->n[-NCASE] + s->n[-NCOMBINATION];
    else if (below < 0) below = s->n[-below];
    for (size_t i = 0; i < n; i++)
        if (values[i] < row->least || (row->below != 0 && values[i] >= below)) return bad_value(s, path);
    return EF_OK;
}

EfStatus values_decode(Store *s, const char *path, const Row *row, size_t n, const void *bytes, size_t each, void *values)
{
    switch (row->type) {
    case T_DOUBLE: memcpy(values, bytes, n * sizeof(double)); return EF_OK;
    case T_INT: memcpy(values, bytes, n * sizeof(int)); return decode_ints(s, path, row, n, values);
    case T_BOOL:
        for (size_t i = 0; i < n; i++) ((bool *)values)[i] = ((const unsigned char *)bytes)[i] != 0;
        return EF_OK;
    case T_HASH:
        memcpy(values, bytes, n * HASH_SIZE);
        for (size_t i = 0; i < n; i++) ((char *)values)[i * HASH_SIZE + HASH_SIZE - 1] = 0;
        return EF_OK;
    case T_TEXT: case T_NAME: return decode_text(s, row, n, bytes, each, values);
    case T_WORD: return decode_words(s, path, row, n, bytes, each, values);
    }
    return EF_OK;
}
