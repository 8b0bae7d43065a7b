/* node.h - inside frame: a frame file as a tree of marked nodes.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef FRAME_NODE_H
#define FRAME_NODE_H

#include "core/core.h"
#include "endfix/frame.h"

typedef enum NodeKind { NODE_SCALAR, NODE_LIST, NODE_MAP } NodeKind;

/* Children of a list: values. Of a map: pairs, key in `key`. In file order, by `next`. */
typedef struct Node {
    NodeKind kind;
    EfMark mark;
    const char *text;   /* scalars */
    bool quoted;
    const char *key;    /* of a map's child */
    EfMark key_mark;
    struct Node *first, *last, *next;
    int count;
    bool seen;          /* a reader asked for this key */
} Node;

/* All faults of a file, in the order of the file as far as they were met. */
typedef struct Faults {
    EfContext *cx;
    const char *file;
    int count;
    char *text; /* heap */
    size_t used, room;
} Faults;

enum { MOST_FAULTS = 20 };

/* Adds "file:line:column: message". file NULL: the frame file. */
void fault_at(Faults *faults, const char *file, EfMark mark, const char *format, ...) __attribute__((format(printf, 4, 5)));

/* Parses the text; NULL with faults, or with cx->status set. */
Node *node_parse(Faults *faults, const char *text, size_t length);

/* Child with the key, marked as seen; NULL. */
Node *node_get(Node *map, const char *key);

#endif
