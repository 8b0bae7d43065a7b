/* cases.c - load cases, their loads, and combinations.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "frame/reader.h"

static const EfRequired not_given = {NAN, NAN, NAN, NAN};

/* ---- loads -------------------------------------------------------------------------------------------------------------- */

static void joint_load(Reader *rd, Node *n, EfLoad *l)
{
    Node *force = node_get(n, "force"), *moment = node_get(n, "moment");
    l->kind = EF_LOAD_JOINT;
    names_list(rd, &rd->joints, node_get(n, "at"), &l->njoint, &l->joint);
    if (force) read_vector(rd, force, DIM_FORCE, l->force);
    if (moment) read_vector(rd, moment, DIM_MOMENT, l->moment);
    if (!force && !moment) FAULT(rd, n->mark, "A load `at` a joint needs `force`, `moment` or both.");
}

static void tube_load_line(Reader *rd, Node *n, EfLoad *l)
{
    Node *q = node_get(n, "force per length");
    l->kind = EF_LOAD_TUBE;
    names_list(rd, &rd->tubes, node_get(n, "along"), &l->ntube, &l->tube);
    if (q) read_vector(rd, q, DIM_FORCE_PER_LENGTH, l->force);
    else FAULT(rd, n->mark, "A load `along` a tube needs `force per length`.");
}

static void warm_load(Reader *rd, Node *n, EfLoad *l)
{
    l->kind = EF_LOAD_WARM;
    names_list(rd, &rd->tubes, node_get(n, "warm"), &l->ntube, &l->tube);
    if (!node_get(n, "by")) FAULT(rd, n->mark, "`warm` needs `by`: kelvin.");
    else get_number(rd, n, "by", DIM_KELVIN, &l->warm);
}

static void inertia_load(Reader *rd, Node *n, EfLoad *l)
{
    l->kind = EF_LOAD_INERTIA;
    read_vector(rd, node_get(n, "inertia"), DIM_NUMBER, l->force);
}

/* A load is told by the one key that says what it acts on; a new kind is a row here. */
static const struct {
    const char *key, *others; /* keys that may stand beside it */
    void (*read)(Reader *rd, Node *n, EfLoad *l);
} load_kinds[] = {{"at", "force, moment", joint_load}, {"along", "force per length", tube_load_line},
                  {"warm", "by", warm_load}, {"inertia", "", inertia_load}};
enum { LOAD_KINDS = sizeof load_kinds / sizeof load_kinds[0] };

static void read_load(Reader *rd, Node *n, EfLoad *l)
{
    int kind = -1, found = 0;
    *l = (EfLoad){.mark = n->mark};
    if (!check_keys(rd, n, keys_load, "A load")) return;
    for (int i = 0; i < LOAD_KINDS; i++)
        if (node_get(n, load_kinds[i].key)) kind = i, found++;
    if (found != 1) {
        FAULT(rd, n->mark, "A load has one of the keys at, along, inertia, warm; here are %d.", found);
        return;
    }
    Node *steady = node_get(n, "steady");
    for (const Node *c = n->first; c; c = c->next)
        if (c != steady && strcmp(c->key, load_kinds[kind].key) != 0 && !strstr(load_kinds[kind].others, c->key))
            FAULT(rd, c->key_mark, "`%s` does not belong to a load with `%s`.", c->key, load_kinds[kind].key);
    if (steady) read_bool(rd, steady, &l->steady);
    load_kinds[kind].read(rd, n, l);
}

/* ---- what cases and combinations share ------------------------------------------------------------------------------------ */

static void read_level(Reader *rd, Node *n, EfLevel *level, double *factor)
{
    Node *v = node_get(n, "level"), *u = node_get(n, "ultimate factor");
    const char *word = scalar_text(rd, v, "level (limit or ultimate)");
    *factor = 1;
    if (!word) return;
    *level = strcmp(word, "ultimate") == 0 ? EF_LEVEL_ULTIMATE : EF_LEVEL_LIMIT;
    if (*level == EF_LEVEL_LIMIT && strcmp(word, "limit") != 0) {
        FAULT(rd, v->mark, "`%s` is not a level. Write limit or ultimate.", word);
        return;
    }
    if (u) read_number(rd, u, DIM_NUMBER, factor);
    if (u && *level == EF_LEVEL_ULTIMATE) FAULT(rd, u->key_mark, "The loads of an ultimate case are final: leave `ultimate factor` out.");
    if (u && !(*factor >= 1)) FAULT(rd, u->mark, "An ultimate factor is at least 1.");
    if (!u && *level == EF_LEVEL_LIMIT) FAULT(rd, n->mark, "A limit case needs `ultimate factor`, such as 1.5.");
}

static void read_common(Reader *rd, Node *n, EfLevel *level, double *factor, bool *both_ways, EfRequired *required)
{
    Node *v = node_get(n, "both ways");
    read_level(rd, n, level, factor);
    if (v) read_bool(rd, v, both_ways);
    *required = not_given;
    if ((v = node_get(n, "required"))) read_required(rd, v, required);
}

static bool case_name(Reader *rd, const Node *n)
{
    if (strcmp(n->key, ".") == 0 || strcmp(n->key, "..") == 0) {
        FAULT(rd, n->key_mark, "A case cannot be named `%s`.", n->key);
        return false;
    }
    return check_name(rd, n->key, n->key_mark, "case");
}

/* ---- cases ------------------------------------------------------------------------------------------------------------------ */

static void read_case(Reader *rd, Node *n, EfCase *c)
{
    *c = (EfCase){.name = keep_text(rd->cx, n->key), .mark = n->key_mark, .required = not_given, .ultimate_factor = 1};
    if (!check_keys(rd, n, keys_case, "A case")) return;
    read_common(rd, n, &c->level, &c->ultimate_factor, &c->both_ways, &c->required);
    Node *v = node_get(n, "source"), *loads = node_get(n, "loads");
    if (v) c->source = read_text(rd, v);
    if (loads->kind != NODE_LIST || loads->count == 0) {
        FAULT(rd, loads->mark, "`loads` is a list with at least one load: - {at: B, force: [0, 0, -3.2]}");
        return;
    }
    EfLoad *list = arena_take(rd->cx, &rd->cx->keep, (size_t)loads->count, sizeof *list);
    if (!list) return;
    for (Node *l = loads->first; l; l = l->next) read_load(rd, l, &list[c->nload++]);
    c->load = list;
}

static void read_combination(Reader *rd, Node *n, EfCombination *c)
{
    *c = (EfCombination){.name = keep_text(rd->cx, n->key), .mark = n->key_mark, .required = not_given, .ultimate_factor = 1};
    if (!check_keys(rd, n, keys_combination, "A combination")) return;
    read_common(rd, n, &c->level, &c->ultimate_factor, &c->both_ways, &c->required);
    Node *of = node_get(n, "of");
    if (!need_map(rd, of, "`of`")) return;
    int *part = arena_take(rd->cx, &rd->cx->keep, (size_t)of->count, sizeof *part);
    double *factor = arena_take(rd->cx, &rd->cx->keep, (size_t)of->count, sizeof *factor);
    if (!part || !factor) return;
    for (Node *v = of->first; v; v = v->next) {
        const Node name = {.kind = NODE_SCALAR, .text = v->key, .mark = v->key_mark};
        part[c->npart] = names_need(rd, &rd->runs, &name);
        if (part[c->npart] >= rd->frame->ncase) FAULT(rd, v->key_mark, "`%s` is a combination. Combine cases only.", v->key);
        if (read_number(rd, v, DIM_NUMBER, &factor[c->npart]) && part[c->npart] >= 0) c->npart++;
    }
    if (of->count == 0) FAULT(rd, of->mark, "A combination needs at least one case: {gust: 1.05}.");
    c->part = part;
    c->factor = factor;
}

/* All names first: a combination may stand before its cases in the file. */
static void name_runs(Reader *rd, Node *n, const char *what)
{
    for (Node *c = n ? n->first : NULL; c; c = c->next) {
        for (int i = 0; i < rd->runs.n; i++)
            if (strcmp(rd->runs.name[i], c->key) == 0) FAULT(rd, c->key_mark, "There is a case `%s` already; name the %s otherwise.", c->key, what);
        rd->runs.name[rd->runs.n++] = c->key;
    }
}

void read_cases(Reader *rd, Node *cases, Node *combinations)
{
    EfFrame *f = rd->frame;
    if (cases && !need_map(rd, cases, "`cases`")) return;
    if (combinations && !need_map(rd, combinations, "`combinations`")) return;
    const int nc = cases ? cases->count : 0, nm = combinations ? combinations->count : 0;
    f->cases = arena_take(rd->cx, &rd->cx->keep, (size_t)nc, sizeof *f->cases);
    f->combination = arena_take(rd->cx, &rd->cx->keep, (size_t)nm, sizeof *f->combination);
    if (!names_new(rd, &rd->runs, "case", nc + nm) || !f->cases || !f->combination) return;
    if (cases && nc == 0) FAULT(rd, cases->mark, "The frame has no load case.");
    for (Node *c = cases ? cases->first : NULL; c; c = c->next) case_name(rd, c);
    for (Node *c = combinations ? combinations->first : NULL; c; c = c->next) case_name(rd, c);
    name_runs(rd, cases, "case");
    f->ncase = nc;
    name_runs(rd, combinations, "combination");
    names_sort(&rd->runs);
    int i = 0;
    for (Node *c = cases ? cases->first : NULL; c; c = c->next) read_case(rd, c, &f->cases[i++]);
    for (Node *c = combinations ? combinations->first : NULL; c; c = c->next) read_combination(rd, c, &f->combination[f->ncombination++]);
}
