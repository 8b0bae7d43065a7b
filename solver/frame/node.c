/* node.c - libyaml events to a tree, with the limits that the frame file has.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "frame/node.h"

#include <stdarg.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <yaml.h>

enum { DEEPEST = 32, MOST_NODES = 20000000 };

/* ---- faults ------------------------------------------------------------------------------------------------------- */

static bool room_for(Faults *f, size_t more)
{
    if (f->used + more < f->room) return true;
    const size_t room = 2 * (f->used + more) + 1024;
    char *text = core_malloc(f->cx, room, 1);
    if (!text) return false;
    if (f->text) memcpy(text, f->text, f->used + 1);
    else text[0] = 0;
    free(f->text);
    f->text = text;
    f->room = room;
    return true;
}

void fault_at(Faults *f, const char *file, EfMark mark, const char *format, ...)
{
    if (++f->count > MOST_FAULTS) return;
    char message[600];
    va_list ap;
    va_start(ap, format);
    vsnprintf(message, sizeof message, format, ap);
    va_end(ap);
    for (char *c = message; *c; c++)
        if ((unsigned char)*c < 32) *c = ' '; /* one fault, one line */
    const char *name = file ? file : f->file;
    const size_t more = strlen(name) + strlen(message) + 40;
    if (!room_for(f, more)) return;
    f->used += (size_t)snprintf(f->text + f->used, f->room - f->used, "%s%s:%d:%d: %s", f->used ? "\n" : "", name, mark.line,
                                mark.column, message);
}

/* ---- events to tree -------------------------------------------------------------------------------------------------- */

typedef struct Builder {
    Faults *faults;
    yaml_parser_t parser;
    Node *stack[DEEPEST + 1];
    int depth, nodes;
    Node *root;
    const char *key; /* waiting for its value */
    EfMark key_mark;
    bool stopped;
} Builder;

static EfMark mark_of(yaml_mark_t m)
{
    const size_t most = 1000000000;
    return (EfMark){(int)(m.line < most ? m.line : most) + 1, (int)(m.column < most ? m.column : most) + 1};
}

static void stop(Builder *b) { b->stopped = true; }

static Node *new_node(Builder *b, NodeKind kind, yaml_mark_t mark)
{
    EfContext *cx = b->faults->cx;
    if (++b->nodes > MOST_NODES) {
        fault_at(b->faults, NULL, mark_of(mark), "The file has too many entries.");
        stop(b);
        return NULL;
    }
    Node *n = arena_take(cx, &cx->tmp, 1, sizeof *n);
    if (!n) {
        stop(b);
        return NULL;
    }
    n->kind = kind;
    n->mark = mark_of(mark);
    return n;
}

/* Hangs the node into the collection that is open. */
static void hang(Builder *b, Node *n)
{
    if (b->depth == 0) {
        b->root = n;
        return;
    }
    Node *parent = b->stack[b->depth - 1];
    if (parent->kind == NODE_MAP) n->key = b->key, n->key_mark = b->key_mark, b->key = NULL;
    if (parent->last) parent->last->next = n;
    else parent->first = n;
    parent->last = n;
    parent->count++;
}

static void push(Builder *b, NodeKind kind, yaml_mark_t mark)
{
    if (b->depth > 0 && b->stack[b->depth - 1]->kind == NODE_MAP && !b->key) {
        fault_at(b->faults, NULL, mark_of(mark), "A list or map cannot be a key.");
        stop(b);
        return;
    }
    Node *n = new_node(b, kind, mark);
    if (!n) return;
    hang(b, n);
    if (b->depth == DEEPEST) {
        fault_at(b->faults, NULL, n->mark, "Nested more than %d deep.", DEEPEST);
        stop(b);
        return;
    }
    b->stack[b->depth++] = n;
}

static char *copy_scalar(Builder *b, const yaml_event_t *e)
{
    EfContext *cx = b->faults->cx;
    const size_t n = e->data.scalar.length;
    if (memchr(e->data.scalar.value, 0, n)) {
        fault_at(b->faults, NULL, mark_of(e->start_mark), "A zero byte inside a text.");
        stop(b);
        return NULL;
    }
    char *text = arena_take(cx, &cx->tmp, n + 1, 1);
    if (!text) stop(b);
    else memcpy(text, e->data.scalar.value, n);
    return text;
}

static void scalar(Builder *b, const yaml_event_t *e)
{
    char *text = copy_scalar(b, e);
    if (!text) return;
    if (b->depth > 0 && b->stack[b->depth - 1]->kind == NODE_MAP && !b->key) {
        b->key = text;
        b->key_mark = mark_of(e->start_mark);
        return;
    }
    Node *n = new_node(b, NODE_SCALAR, e->start_mark);
    if (!n) return;
    n->text = text;
    n->quoted = e->data.scalar.style != YAML_PLAIN_SCALAR_STYLE;
    hang(b, n);
}

static void refuse_markup(Builder *b, const yaml_event_t *e)
{
    const yaml_char_t *anchor = NULL, *tag = NULL;
    if (e->type == YAML_SCALAR_EVENT) anchor = e->data.scalar.anchor, tag = e->data.scalar.tag;
    if (e->type == YAML_SEQUENCE_START_EVENT) anchor = e->data.sequence_start.anchor, tag = e->data.sequence_start.tag;
    if (e->type == YAML_MAPPING_START_EVENT) anchor = e->data.mapping_start.anchor, tag = e->data.mapping_start.tag;
    if (anchor) fault_at(b->faults, NULL, mark_of(e->start_mark), "Anchors (&%s) are not used in frame files. Write the value out.", (const char *)anchor);
    if (tag) fault_at(b->faults, NULL, mark_of(e->start_mark), "Tags (%s) are not used in frame files. Leave it out.", (const char *)tag);
}

/* Returns false at the end of the file. */
static bool take_event(Builder *b, const yaml_event_t *e, int *documents)
{
    refuse_markup(b, e);
    switch (e->type) {
    case YAML_DOCUMENT_START_EVENT:
        if (++*documents > 1) {
            fault_at(b->faults, NULL, mark_of(e->start_mark), "A second document starts here. One frame, one file.");
            return false;
        }
        return true;
    case YAML_ALIAS_EVENT:
        fault_at(b->faults, NULL, mark_of(e->start_mark), "Aliases (*%s) are not used in frame files. Write the value out, or quote the pattern.",
                 (const char *)e->data.alias.anchor);
        return false;
    case YAML_SCALAR_EVENT: scalar(b, e); return true;
    case YAML_SEQUENCE_START_EVENT: push(b, NODE_LIST, e->start_mark); return true;
    case YAML_MAPPING_START_EVENT: push(b, NODE_MAP, e->start_mark); return true;
    case YAML_SEQUENCE_END_EVENT:
    case YAML_MAPPING_END_EVENT: b->depth--; return true;
    case YAML_STREAM_END_EVENT: return false;
    default: return true;
    }
}

static void read_events(Builder *b)
{
    int documents = 0;
    bool more = true;
    while (more && !b->stopped) {
        yaml_event_t e;
        if (!yaml_parser_parse(&b->parser, &e)) {
            const yaml_parser_t *p = &b->parser;
            if (p->error == YAML_MEMORY_ERROR) fail(b->faults->cx, EF_E_MEMORY, "Out of memory while reading %s.", b->faults->file);
            else fault_at(b->faults, NULL, mark_of(p->problem_mark), "Not readable here: %s%s%s.", p->problem ? p->problem : "bad character",
                          p->context ? ", " : "", p->context ? p->context : "");
            return;
        }
        more = take_event(b, &e, &documents);
        yaml_event_delete(&e);
    }
}

/* Keys that stand twice in one map. Maps may be large, so all keys are sorted once. */
static int by_key(const void *a, const void *b)
{
    const Node *x = *(Node *const *)a, *y = *(Node *const *)b;
    const int c = strcmp(x->key, y->key);
    if (c) return c;
    return x->key_mark.line != y->key_mark.line ? (x->key_mark.line > y->key_mark.line) - (x->key_mark.line < y->key_mark.line)
                                                : (x->key_mark.column > y->key_mark.column) - (x->key_mark.column < y->key_mark.column);
}

static void find_doubles(Faults *f, Node *n)
{
    EfContext *cx = f->cx;
    if (n->kind == NODE_MAP && n->count > 1) {
        const ArenaMark mark = arena_mark(&cx->tmp);
        Node **child = arena_take(cx, &cx->tmp, (size_t)n->count, sizeof *child);
        if (!child) return;
        int i = 0;
        for (Node *c = n->first; c; c = c->next) child[i++] = c;
        qsort(child, (size_t)n->count, sizeof *child, by_key);
        for (i = 1; i < n->count; i++)
            if (strcmp(child[i]->key, child[i - 1]->key) == 0)
                fault_at(f, NULL, child[i]->key_mark, "`%s` stands twice; the first is in line %d. Take one out or rename it.",
                         child[i]->key, child[i - 1]->key_mark.line);
        arena_rewind(&cx->tmp, mark);
    }
    for (Node *c = n->first; c; c = c->next)
        if (c->kind != NODE_SCALAR) find_doubles(f, c);
}

Node *node_parse(Faults *faults, const char *text, size_t length)
{
    Builder b = {.faults = faults};
    if (!yaml_parser_initialize(&b.parser)) {
        fail(faults->cx, EF_E_MEMORY, "Out of memory while reading %s.", faults->file);
        return NULL;
    }
    yaml_parser_set_encoding(&b.parser, YAML_UTF8_ENCODING);
    yaml_parser_set_input_string(&b.parser, (const unsigned char *)text, length);
    read_events(&b);
    yaml_parser_delete(&b.parser);
    if (faults->count > 0 || faults->cx->status != EF_OK) return NULL;
    if (!b.root || b.root->kind != NODE_MAP) {
        fault_at(faults, NULL, b.root ? b.root->mark : (EfMark){1, 1}, "A frame file is a map: `joints:`, `tubes:` and so on. `endfix new` writes one to start from.");
        return NULL;
    }
    find_doubles(faults, b.root);
    return b.root;
}

Node *node_get(Node *map, const char *key)
{
    if (map->kind != NODE_MAP) return NULL;
    for (Node *c = map->first; c; c = c->next)
        if (strcmp(c->key, key) == 0) {
            c->seen = true;
            return c;
        }
    return NULL;
}
