/* tubes.c - joints, tubes and guys.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "frame/reader.h"

/* The table that a section points to, or the section itself. NULL with faults. */
static Node *or_table(Reader *rd, Node *n, const char *what, const char *const *columns, int required)
{
    if (!need_map(rd, n, what)) return NULL;
    if (n->count != 1 || strcmp(n->first->key, "table") != 0 || n->first->kind != NODE_SCALAR) return n;
    return read_csv(rd, n->first, columns, required);
}

void read_joints(Reader *rd, Node *n)
{
    static const char *const columns[] = {"x", "y", "z", NULL};
    EfFrame *f = rd->frame;
    n = n ? or_table(rd, n, "`joints`", columns, 3) : NULL;
    if (!n) return;
    f->joint = arena_take(rd->cx, &rd->cx->keep, (size_t)n->count, sizeof *f->joint);
    if (!names_new(rd, &rd->joints, "joint", n->count) || !f->joint) return;
    for (Node *c = n->first; c; c = c->next) {
        if (!check_name(rd, c->key, c->key_mark, "joint")) continue;
        EfJoint *j = &f->joint[f->njoint];
        j->name = keep_text(rd->cx, c->key);
        j->mark = c->key_mark;
        rd->joints.name[f->njoint++] = c->key;
        read_vector(rd, c, DIM_LENGTH, j->x);
    }
    rd->joints.n = f->njoint;
    names_sort(&rd->joints);
}

/* ---- tubes ------------------------------------------------------------------------------------------------------------- */

static void short_tube(Reader *rd, Node *n, EfTube *t)
{
    if (n->count < 3 || n->count > 4) {
        FAULT(rd, n->mark, "A tube is [from, to, size], or a map with these keys.");
        return;
    }
    const Node *from = n->first, *to = from->next, *size = to->next, *group = size->next;
    t->end[0] = names_need(rd, &rd->joints, from);
    t->end[1] = names_need(rd, &rd->joints, to);
    t->size = names_need(rd, &rd->sizes, size);
    if (group && group->kind == NODE_SCALAR && group->text[0]) t->group = keep_text(rd->cx, group->text);
}

/* Releases and springs of one end. */
static void tube_end_parts(Reader *rd, Node *n, int e, EfTube *t)
{
    static const char *const release[2] = {"release from", "release to"}, *const spring[2] = {"spring from", "spring to"};
    Node *v = node_get(n, release[e]);
    if (v) read_directions(rd, v, false, &t->release[e]);
    v = node_get(n, spring[e]);
    if (v) read_by_direction(rd, v, DIM_STIFFNESS, DIM_ROTATION_STIFFNESS, t->spring[e]);
    for (int i = 0; v && i < EF_DIRECTIONS; i++)
        if (!(t->spring[e][i] > 0)) FAULT(rd, v->mark, "A spring must be stiffer than zero. For none at all use `%s`.", release[e]);
}

static void long_tube(Reader *rd, Node *n, EfTube *t)
{
    static const char *const offset[2] = {"offset from", "offset to"};
    if (!check_keys(rd, n, keys_tube, "A tube")) return;
    t->end[0] = names_need(rd, &rd->joints, node_get(n, "from"));
    t->end[1] = names_need(rd, &rd->joints, node_get(n, "to"));
    t->size = names_need(rd, &rd->sizes, node_get(n, "size"));
    Node *v = node_get(n, "up");
    if (v) read_direction(rd, v, t->up);
    for (int e = 0; e < 2; e++) {
        if ((v = node_get(n, offset[e]))) read_vector(rd, v, DIM_LENGTH, t->offset[e]);
        tube_end_parts(rd, n, e, t);
    }
    Node *pinned = node_get(n, "pinned");
    bool yes = false;
    if (pinned && read_bool(rd, pinned, &yes) && yes) {
        if (node_get(n, "release from") || node_get(n, "release to"))
            FAULT(rd, pinned->key_mark, "`pinned` and `release` do not stand on one tube. Say all of it by `release`.");
        t->release[0] = t->release[1] = 1u << EF_RY | 1u << EF_RZ;
    }
    get_number(rd, n, "bow", DIM_NUMBER, &t->bow);
    if ((v = node_get(n, "bow toward"))) read_direction(rd, v, t->bow_toward);
    if ((v = node_get(n, "group"))) t->group = read_text(rd, v);
    if (t->bow < 0 || t->bow > 0.1) FAULT(rd, node_get(n, "bow")->mark, "A bow is a part of the length, such as 1/500.");
}

static void read_tube(Reader *rd, Node *n, EfTube *t)
{
    *t = (EfTube){.name = keep_text(rd->cx, n->key), .mark = n->key_mark, .end = {-1, -1}, .size = -1};
    for (int e = 0; e < 2; e++)
        for (int i = 0; i < EF_DIRECTIONS; i++) t->spring[e][i] = INFINITY;
    if (n->kind == NODE_LIST) short_tube(rd, n, t);
    else if (n->kind == NODE_MAP) long_tube(rd, n, t);
    else FAULT(rd, n->mark, "A tube is [from, to, size], or a map with these keys.");
    if (t->end[0] < 0 || t->end[1] < 0) return;
    const double *a = rd->frame->joint[t->end[0]].x, *b = rd->frame->joint[t->end[1]].x;
    double d[3], length = 0;
    for (int i = 0; i < 3; i++) d[i] = b[i] + t->offset[1][i] - a[i] - t->offset[0][i], length += d[i] * d[i];
    if (t->end[0] == t->end[1]) FAULT(rd, n->mark, "Tube `%s` starts and ends at the same joint.", n->key);
    else if (!(length > 0)) FAULT(rd, n->mark, "Tube `%s` has no length: its ends lie on one another.", n->key);
}

void read_tubes(Reader *rd, Node *n)
{
    static const char *const columns[] = {"from", "to", "size", "group", NULL};
    EfFrame *f = rd->frame;
    n = n ? or_table(rd, n, "`tubes`", columns, 3) : NULL;
    if (!n) return;
    f->tube = arena_take(rd->cx, &rd->cx->keep, (size_t)n->count, sizeof *f->tube);
    if (!names_new(rd, &rd->tubes, "tube", n->count) || !f->tube) return;
    if (n->count == 0) FAULT(rd, n->mark, "The frame has no tubes.");
    for (Node *c = n->first; c; c = c->next) {
        if (!check_name(rd, c->key, c->key_mark, "tube")) continue;
        rd->tubes.name[f->ntube] = c->key;
        read_tube(rd, c, &f->tube[f->ntube++]);
    }
    rd->tubes.n = f->ntube;
    names_sort(&rd->tubes);
}

/* ---- guys --------------------------------------------------------------------------------------------------------------- */

void read_guys(Reader *rd, Node *n)
{
    EfFrame *f = rd->frame;
    if (!n || !need_map(rd, n, "`guys`")) return;
    f->guy = arena_take(rd->cx, &rd->cx->keep, (size_t)n->count, sizeof *f->guy);
    if (!f->guy) return;
    for (Node *c = n->first; c; c = c->next) {
        if (!check_name(rd, c->key, c->key_mark, "guy") || !check_keys(rd, c, keys_guy, "A guy")) continue;
        EfGuy *g = &f->guy[f->nguy++];
        *g = (EfGuy){.name = keep_text(rd->cx, c->key), .mark = c->key_mark, .breaking_load = NAN};
        g->end[0] = names_need(rd, &rd->joints, node_get(c, "from"));
        g->end[1] = names_need(rd, &rd->joints, node_get(c, "to"));
        get_number(rd, c, "EA", DIM_FORCE, &g->EA);
        get_number(rd, c, "pretension", DIM_FORCE, &g->pretension);
        get_number(rd, c, "mass per length", DIM_MASS_PER_LENGTH, &g->mass_per_length);
        get_number(rd, c, "breaking load", DIM_FORCE, &g->breaking_load);
        if (!(g->EA > 0)) FAULT(rd, c->mark, "`EA` must be greater than zero.");
        if (g->pretension < 0 || g->mass_per_length < 0) FAULT(rd, c->mark, "Pretension and mass of a guy cannot be negative.");
        if (g->end[0] >= 0 && g->end[0] == g->end[1]) FAULT(rd, c->mark, "Guy `%s` starts and ends at the same joint.", c->key);
    }
}
