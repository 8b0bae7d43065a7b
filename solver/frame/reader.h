/* reader.h - inside frame: what the parts of the reader share.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef FRAME_READER_H
#define FRAME_READER_H

#include "frame/keys.h"
#include "frame/node.h"
#include "frame/sha256.h"
#include "frame/units.h"

/* Names of a section in the order of their indices, and the same sorted for look-up. */
typedef struct Names {
    const char *what; /* "joint", "tube", ... for messages */
    int n;
    const char **name;
    int *sorted;
} Names;

typedef struct Reader {
    EfContext *cx;
    EfFrame *frame;
    Faults faults;
    Units units;
    const char *folder; /* of CSV tables; NULL: tables are not allowed */
    Sha256 digest;
    Names materials, sizes, joints, tubes, runs; /* runs: cases, then combinations */
} Reader;

#define FAULT(rd, mark, ...) fault_at(&(rd)->faults, NULL, (mark), __VA_ARGS__)

/* ---- values.c: typed values of nodes; a fault and false when they are not what is wanted --------------------------- */

bool read_number(Reader *rd, const Node *n, Dimension d, double *value);
bool read_vector(Reader *rd, const Node *n, Dimension d, double v[3]);
bool read_direction(Reader *rd, const Node *n, double v[3]); /* not zero */
bool read_bool(Reader *rd, const Node *n, bool *value);
const char *read_text(Reader *rd, const Node *n); /* kept copy; NULL for an empty value */
const char *scalar_text(Reader *rd, const Node *n, const char *wanted);
bool need_map(Reader *rd, const Node *n, const char *what);
/* Every key of the map is in the table, and the required ones are there. */
bool check_keys(Reader *rd, Node *map, const Key *keys, const char *what);
/* The same with the value of the key read when present: returns true when it was read. */
bool get_number(Reader *rd, Node *map, const char *key, Dimension d, double *value);
/* Directions: a word (fixed, pinned) or a list of x y z rx ry rz. */
bool read_directions(Reader *rd, const Node *n, bool words, unsigned *mask);
/* Numbers by direction: {rx: 3 kN m/rad, z: ...}. */
bool read_by_direction(Reader *rd, Node *n, Dimension move, Dimension turn, double v[EF_DIRECTIONS]);
bool check_name(Reader *rd, const char *name, EfMark mark, const char *what);

/* ---- names.c ---------------------------------------------------------------------------------------------------------- */

bool names_new(Reader *rd, Names *names, const char *what, int n);
void names_sort(Names *names);
int names_find(const Names *names, const char *name); /* -1 */
/* Index of the named thing; a fault with the nearest known name and -1. */
int names_need(Reader *rd, const Names *names, const Node *n);
/* Indices of a name, a list of names, or patterns with * and ?; kept array. */
bool names_list(Reader *rd, const Names *names, const Node *n, int *count, const int **index);

/* ---- the sections of the file ------------------------------------------------------------------------------------------- */

void read_units(Reader *rd, Node *n);
void read_materials(Reader *rd, Node *n);
void read_sizes(Reader *rd, Node *n);
void read_joints(Reader *rd, Node *n);
void read_tubes(Reader *rd, Node *n);
void read_guys(Reader *rd, Node *n);
void read_supports(Reader *rd, Node *n);
void read_equipment(Reader *rd, Node *n);
void read_cases(Reader *rd, Node *cases, Node *combinations);
void read_required(Reader *rd, Node *n, EfRequired *required);
void read_hand_sheet(Reader *rd, Node *n);

/* Index of a built-in or own material; adds a built-in one when it is first used. -1 with a fault. */
int need_material(Reader *rd, const Node *n);

/* ---- csv.c: a CSV table as a map of nodes: first column the name, values a list in the order of `columns` -------------- */

/* columns: names wanted after `name`; a trailing NULL; those after `required` may be missing (their values are then
 * NULL texts). Returns a map node like the one in the file, or NULL with faults. */
Node *read_csv(Reader *rd, const Node *file, const char *const *columns, int required);

/* Bytes of a file, kept in cx->tmp with a zero behind. */
EfStatus read_bytes(EfContext *cx, const char *path, char **bytes, size_t *length);

#endif
