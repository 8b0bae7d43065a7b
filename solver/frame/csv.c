/* csv.c - tables of joints and tubes beside the frame file, as nodes like those of the file itself.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <errno.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "frame/reader.h"

enum { MOST_COLUMNS = 16 };

EfStatus read_bytes(EfContext *cx, const char *path, char **bytes, size_t *length)
{
    enum { MOST = 1 << 30 };
    FILE *f = fopen(path, "rb");
    if (!f) return fail(cx, EF_E_IO, "Cannot read %s: %s.", path, strerror(errno));
    size_t room = 1 << 16, n = 0;
    char *text = core_malloc(cx, room, 1);
    while (text) {
        n += fread(text + n, 1, room - n - 1, f);
        if (n < room - 1 || room >= MOST) break;
        char *more = core_malloc(cx, 2 * room, 1);
        if (more) memcpy(more, text, n);
        free(text);
        text = more;
        room *= 2;
    }
    const bool bad = ferror(f) != 0;
    fclose(f);
    *bytes = text ? arena_take(cx, &cx->tmp, n + 1, 1) : NULL;
    if (*bytes) memcpy(*bytes, text, n);
    free(text);
    *length = n;
    if (!*bytes) return cx->status;
    return bad ? fail(cx, EF_E_IO, "Cannot read %s: %s.", path, strerror(errno)) : EF_OK;
}

/* One line cut at commas in place; blanks and a pair of quotes around a cell go. Returns how many. */
static int cells_of(char *line, char *cell[MOST_COLUMNS], int column[MOST_COLUMNS])
{
    int n = 0;
    for (char *start = line, *c = line;; c++) {
        if (*c != ',' && *c != 0) continue;
        const bool last = *c == 0;
        *c = 0;
        while (*start == ' ' || *start == '\t') start++;
        char *end = start + strlen(start);
        while (end > start && (end[-1] == ' ' || end[-1] == '\t')) *--end = 0;
        if (end - start >= 2 && *start == '"' && end[-1] == '"') *--end = 0, start++;
        if (n < MOST_COLUMNS) cell[n] = start, column[n++] = (int)(start - line) + 1;
        if (last) return n;
        start = c + 1;
    }
}

typedef struct Table {
    Reader *rd;
    const char *file;
    int line, ncolumn;
    int place[MOST_COLUMNS]; /* of the wanted columns, [0] the name's; -1: not there */
    int wanted;
} Table;

static bool read_head(Table *t, char *line, const char *const *columns, int required)
{
    char *cell[MOST_COLUMNS];
    int column[MOST_COLUMNS];
    bool good = true;
    t->ncolumn = cells_of(line, cell, column);
    for (int w = 0; w == 0 || columns[w - 1]; w++, t->wanted = w) {
        const char *name = w == 0 ? "name" : columns[w - 1];
        t->place[w] = -1;
        for (int c = 0; c < t->ncolumn; c++)
            if (strcmp(cell[c], name) == 0) t->place[w] = c;
        if (t->place[w] >= 0 || w > required) continue;
        fault_at(&t->rd->faults, t->file, (EfMark){1, 1}, "The head line has no column `%s`.", name);
        good = false;
    }
    return good;
}

static Node *new_child(Table *t, Node *parent, NodeKind kind, EfMark mark)
{
    Node *n = arena_take(t->rd->cx, &t->rd->cx->tmp, 1, sizeof *n);
    if (!n) return NULL;
    n->kind = kind;
    n->mark = mark;
    if (parent->last) parent->last->next = n;
    else parent->first = n;
    parent->last = n;
    parent->count++;
    return n;
}

/* A row: the first cell's name with a list of the rest. Marks point to the table's line. */
static bool read_row(Table *t, char *line, Node *map)
{
    char *cell[MOST_COLUMNS];
    int column[MOST_COLUMNS];
    const int n = cells_of(line, cell, column);
    if (n != t->ncolumn) {
        fault_at(&t->rd->faults, t->file, (EfMark){t->line, 1}, "%d cells where the head line has %d.", n, t->ncolumn);
        return true;
    }
    Node *row = new_child(t, map, NODE_LIST, (EfMark){t->line, 1});
    if (!row) return false;
    row->key = cell[t->place[0]];
    row->key_mark = (EfMark){t->line, column[t->place[0]]};
    for (int w = 1; w < t->wanted; w++) {
        if (t->place[w] < 0) continue;
        Node *v = new_child(t, row, NODE_SCALAR, (EfMark){t->line, column[t->place[w]]});
        if (!v) return false;
        v->text = cell[t->place[w]];
    }
    return true;
}

static Node *rows_of(Table *t, char *text, const char *const *columns, int required)
{
    Node *map = arena_take(t->rd->cx, &t->rd->cx->tmp, 1, sizeof *map);
    bool head = false;
    if (!map) return NULL;
    map->kind = NODE_MAP;
    map->mark = (EfMark){1, 1};
    for (char *line = text; line && *line;) {
        char *end = strchr(line, '\n'), *next = end ? end + 1 : NULL;
        if (end) *end = 0;
        if (end > line && end[-1] == '\r') end[-1] = 0;
        t->line++;
        if (*line && *line != '#') {
            if (!head && !read_head(t, line, columns, required)) return NULL;
            if (head && !read_row(t, line, map)) return NULL;
            head = true;
        }
        line = next;
    }
    if (!head) fault_at(&t->rd->faults, t->file, (EfMark){1, 1}, "The table is empty.");
    return map;
}

/* A name in a table stands once, as a key in the file does. */
static void find_doubles(Table *t, const Node *map)
{
    Names names;
    if (!names_new(t->rd, &names, "name", map->count)) return;
    for (const Node *c = map->first; c; c = c->next) names.name[names.n++] = c->key;
    names_sort(&names);
    for (int i = 1; i < names.n; i++)
        if (strcmp(names.name[names.sorted[i]], names.name[names.sorted[i - 1]]) == 0)
            fault_at(&t->rd->faults, t->file, (EfMark){1, 1}, "`%s` stands twice.", names.name[names.sorted[i]]);
}

Node *read_csv(Reader *rd, const Node *file, const char *const *columns, int required)
{
    char *text;
    size_t length;
    if (!rd->folder) {
        FAULT(rd, file->mark, "A frame that does not come from a file cannot have tables.");
        return NULL;
    }
    if (!file->text[0] || strchr(file->text, '/') || strcmp(file->text, "..") == 0) {
        FAULT(rd, file->mark, "A table lies in the folder of the frame file: write its file name only.");
        return NULL;
    }
    const char *path = keep_format(rd->cx, "%s/%s", rd->folder, file->text);
    if (!path || read_bytes(rd->cx, path, &text, &length) != EF_OK) return NULL;
    sha256_add(&rd->digest, text, length);
    if (memchr(text, 0, length)) {
        FAULT(rd, file->mark, "Table `%s` holds a zero byte: it is not a text.", file->text);
        return NULL;
    }
    Table t = {.rd = rd, .file = file->text};
    Node *map = rows_of(&t, text, columns, required);
    if (map) find_doubles(&t, map);
    return map;
}
