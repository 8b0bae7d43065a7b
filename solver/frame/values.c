/* values.c - typed values from nodes, each fault with its place and what to write.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "frame/reader.h"

const char *scalar_text(Reader *rd, const Node *n, const char *wanted)
{
    if (n->kind == NODE_SCALAR && n->text && n->text[0]) return n->text;
    FAULT(rd, n->mark, "A %s is wanted here.", wanted);
    return NULL;
}

bool need_map(Reader *rd, const Node *n, const char *what)
{
    if (n->kind == NODE_MAP) return true;
    FAULT(rd, n->mark, "%s is a map here: `name: value` lines.", what);
    return false;
}

bool read_number(Reader *rd, const Node *n, Dimension d, double *value)
{
    char why[300];
    if (n->kind != NODE_SCALAR || !n->text || !n->text[0]) {
        FAULT(rd, n->mark, "%s is wanted here.", d == DIM_NUMBER ? "A number" : dimension_name(d));
        return false;
    }
    if (read_quantity(&rd->units, d, n->text, value, why, sizeof why)) return true;
    FAULT(rd, n->mark, "%s.", why);
    return false;
}

bool get_number(Reader *rd, Node *map, const char *key, Dimension d, double *value)
{
    const Node *n = node_get(map, key);
    return n && read_number(rd, n, d, value);
}

bool read_vector(Reader *rd, const Node *n, Dimension d, double v[3])
{
    if (n->kind != NODE_LIST || n->count != 3) {
        FAULT(rd, n->mark, "Three values [x, y, z] are wanted here.");
        return false;
    }
    bool good = true;
    int i = 0;
    for (const Node *c = n->first; c; c = c->next) good &= read_number(rd, c, d, &v[i++]);
    return good;
}

bool read_direction(Reader *rd, const Node *n, double v[3])
{
    if (!read_vector(rd, n, DIM_NUMBER, v)) return false;
    if (v[0] * v[0] + v[1] * v[1] + v[2] * v[2] > 0) return true;
    FAULT(rd, n->mark, "A direction cannot be zero.");
    return false;
}

bool read_bool(Reader *rd, const Node *n, bool *value)
{
    const char *t = n->kind == NODE_SCALAR ? n->text : "";
    *value = strcmp(t, "true") == 0;
    if (*value || strcmp(t, "false") == 0) return true;
    FAULT(rd, n->mark, "Write true or false here.");
    return false;
}

const char *read_text(Reader *rd, const Node *n)
{
    if (n->kind != NODE_SCALAR) {
        FAULT(rd, n->mark, "A text is wanted here. Quote it if it begins with a bracket.");
        return NULL;
    }
    return n->text[0] ? keep_text(rd->cx, n->text) : NULL;
}

static void unknown_key(Reader *rd, const Node *n, const Key *keys, const char *what)
{
    const char *known[32];
    size_t count = 0;
    while (keys[count].name && count < 32) known[count] = keys[count].name, count++;
    const char *near = nearest_word(n->key, count, known);
    if (near) FAULT(rd, n->key_mark, "%s has no key `%s`. Did you mean `%s`?", what, n->key, near);
    else FAULT(rd, n->key_mark, "%s has no key `%s`. It may have: %s, %s, ...", what, n->key, known[0], count > 1 ? known[1] : "");
}

bool check_keys(Reader *rd, Node *map, const Key *keys, const char *what)
{
    if (!need_map(rd, map, what)) return false;
    bool good = true;
    for (const Node *c = map->first; c; c = c->next) {
        size_t k = 0;
        while (keys[k].name && strcmp(keys[k].name, c->key) != 0) k++;
        if (!keys[k].name) unknown_key(rd, c, keys, what), good = false;
    }
    for (size_t k = 0; keys[k].name; k++) {
        if (!keys[k].required || node_get(map, keys[k].name)) continue;
        FAULT(rd, map->mark, "%s lacks `%s`: %s.", what, keys[k].name, keys[k].help);
        good = false;
    }
    return good;
}

static const char *const direction_words[EF_DIRECTIONS] = {"x", "y", "z", "rx", "ry", "rz"};

static int direction_of(const char *word)
{
    for (int i = 0; i < EF_DIRECTIONS; i++)
        if (strcmp(direction_words[i], word) == 0) return i;
    return -1;
}

bool read_directions(Reader *rd, const Node *n, bool words, unsigned *mask)
{
    *mask = 0;
    if (words && n->kind == NODE_SCALAR) {
        if (strcmp(n->text, "fixed") == 0) *mask = 63;
        else if (strcmp(n->text, "pinned") == 0) *mask = 7;
        else FAULT(rd, n->mark, "`%s` is not a support. Write fixed, pinned, or a list such as [x, y, rz].", n->text);
        return *mask != 0;
    }
    if (n->kind != NODE_LIST) {
        FAULT(rd, n->mark, "A list of directions is wanted here, such as [x, ry].");
        return false;
    }
    for (const Node *c = n->first; c; c = c->next) {
        const int d = c->kind == NODE_SCALAR ? direction_of(c->text) : -1;
        if (d < 0) {
            FAULT(rd, c->mark, "`%s` is not a direction. Directions are x y z rx ry rz.", c->kind == NODE_SCALAR ? c->text : "this");
            return false;
        }
        *mask |= 1u << d;
    }
    return true;
}

bool read_by_direction(Reader *rd, Node *n, Dimension move, Dimension turn, double v[EF_DIRECTIONS])
{
    if (!need_map(rd, n, "A value by direction")) return false;
    bool good = true;
    for (const Node *c = n->first; c; c = c->next) {
        const int d = direction_of(c->key);
        if (d < 0) {
            FAULT(rd, c->key_mark, "`%s` is not a direction. Directions are x y z rx ry rz.", c->key);
            good = false;
            continue;
        }
        good &= read_number(rd, c, d < 3 ? move : turn, &v[d]);
    }
    return good;
}

bool check_name(Reader *rd, const char *name, EfMark mark, const char *what)
{
    const size_t n = strlen(name);
    bool good = n > 0 && n <= 64 && name[0] != ' ' && name[n - 1] != ' ';
    for (size_t i = 0; i < n; i++) good &= (unsigned char)name[i] >= 32 && name[i] != '/' && name[i] != 127;
    if (!good) FAULT(rd, mark, "`%.70s` cannot be the name of a %s: 1 to 64 characters, no `/`, no blanks at its ends.", name, what);
    return good;
}
