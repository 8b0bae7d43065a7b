/* materials.c - units, materials and tube sizes.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <stdio.h>
#include <string.h>

#include "frame/reader.h"
#include "material/material.h"
#include "section/section.h"

void read_units(Reader *rd, Node *n)
{
    static const struct {
        const char *key;
        Dimension dimension;
    } kinds[] = {{"length", DIM_LENGTH}, {"force", DIM_FORCE}, {"stress", DIM_STRESS}, {"mass", DIM_MASS}};
    if (!check_keys(rd, n, keys_units, "`units`")) return;
    for (size_t i = 0; i < sizeof kinds / sizeof *kinds; i++) {
        const Node *v = node_get(n, kinds[i].key);
        const char *unit = v ? scalar_text(rd, v, "unit") : NULL;
        if (!unit) continue;
        const double factor = unit_factor(kinds[i].dimension, unit);
        if (factor == 0) FAULT(rd, v->mark, "`%s` is not a unit of %s (%s).", unit, dimension_name(kinds[i].dimension), dimension_units(kinds[i].dimension));
        else units_set(&rd->units, kinds[i].dimension, factor);
    }
}

/* ---- materials ------------------------------------------------------------------------------------------------------- */

static const EfMaterial nothing = {.E = NAN, .E_compression = NAN, .G = NAN, .nu = NAN, .density = NAN, .expansion = NAN,
                                   .yield = NAN, .yield_compression = NAN, .ultimate = NAN, .welded_yield = NAN,
                                   .welded_ultimate = NAN, .ramberg_osgood_n = NAN, .weldable = true, .status = "user"};

static void positive(Reader *rd, Node *n, const char *key, double value)
{
    const Node *v = node_get(n, key);
    if (v && !(value > 0)) FAULT(rd, v->mark, "`%s` must be greater than zero.", key);
}

static void read_material(Reader *rd, Node *n, EfMaterial *m)
{
    const struct {
        const char *key;
        Dimension dimension;
        double *to;
    } values[] = {{"E", DIM_STRESS, &m->E}, {"E compression", DIM_STRESS, &m->E_compression}, {"G", DIM_STRESS, &m->G},
                  {"nu", DIM_NUMBER, &m->nu}, {"density", DIM_DENSITY, &m->density}, {"expansion", DIM_EXPANSION, &m->expansion},
                  {"yield", DIM_STRESS, &m->yield}, {"yield compression", DIM_STRESS, &m->yield_compression},
                  {"ultimate", DIM_STRESS, &m->ultimate}, {"welded yield", DIM_STRESS, &m->welded_yield},
                  {"welded ultimate", DIM_STRESS, &m->welded_ultimate}, {"Ramberg-Osgood n", DIM_NUMBER, &m->ramberg_osgood_n}};
    *m = nothing;
    m->name = keep_text(rd->cx, n->key);
    m->mark = n->key_mark;
    if (!check_keys(rd, n, keys_material, "A material")) return;
    const int before = rd->faults.count;
    for (size_t i = 0; i < sizeof values / sizeof *values; i++) {
        if (!get_number(rd, n, values[i].key, values[i].dimension, values[i].to)) continue;
        if (strcmp(values[i].key, "nu") != 0 && strcmp(values[i].key, "expansion") != 0) positive(rd, n, values[i].key, *values[i].to);
    }
    Node *v = node_get(n, "weldable");
    if (v) read_bool(rd, v, &m->weldable);
    if ((v = node_get(n, "source"))) m->source = read_text(rd, v);
    if ((v = node_get(n, "column rule"))) m->column_rule = read_text(rd, v);
    if (rd->faults.count > before) return;
    if (!isnan(m->nu) && !(m->nu > -1 && m->nu < 0.5)) FAULT(rd, n->mark, "nu must lie between -1 and 0.5.");
    if (isnan(m->G) && isnan(m->nu)) FAULT(rd, n->mark, "Give `G` or `nu`: torsion needs one of them.");
    if (isnan(m->E_compression)) m->E_compression = m->E;
    if (isnan(m->G)) m->G = m->E / (2 * (1 + m->nu));
    if (isnan(m->nu)) m->nu = m->E / (2 * m->G) - 1;
    if (isnan(m->yield_compression)) m->yield_compression = m->yield;
}

void read_materials(Reader *rd, Node *n)
{
    EfFrame *f = rd->frame;
    int builtin = 0;
    while (material_builtin((size_t)builtin)) builtin++;
    const int own = n && n->kind == NODE_MAP ? n->count : 0;
    f->material = arena_take(rd->cx, &rd->cx->keep, (size_t)(own + builtin), sizeof *f->material);
    if (!names_new(rd, &rd->materials, "material", own + builtin) || !f->material) return;
    if (n && !need_map(rd, n, "`materials`")) return;
    for (Node *c = n ? n->first : NULL; c; c = c->next) {
        if (!check_name(rd, c->key, c->key_mark, "material")) continue;
        rd->materials.name[f->nmaterial] = c->key;
        read_material(rd, c, &f->material[f->nmaterial++]);
    }
    rd->materials.n = f->nmaterial;
    names_sort(&rd->materials);
}

int need_material(Reader *rd, const Node *n)
{
    const char *name = scalar_text(rd, n, "material");
    if (!name || rd->cx->status != EF_OK) return -1;
    int i = names_find(&rd->materials, name);
    if (i >= 0) return i;
    const EfMaterial *m = material_named(name);
    if (m) {
        i = rd->frame->nmaterial++;
        rd->frame->material[i] = *m;
        rd->materials.name[i] = m->name;
        rd->materials.n = rd->frame->nmaterial;
        names_sort(&rd->materials);
        return i;
    }
    const char *known[64];
    size_t count = 0;
    for (int k = 0; k < rd->materials.n && count < 40; k++) known[count++] = rd->materials.name[k];
    for (size_t k = 0; material_builtin(k) && count < 64; k++) known[count++] = material_builtin(k)->name;
    const char *near = nearest_word(name, count, known);
    FAULT(rd, n->mark, "There is no material `%s`.%s%s%s", name, near ? " Did you mean `" : " Add it under `materials`", near ? near : "", near ? "`?" : ".");
    return -1;
}

/* ---- sizes -------------------------------------------------------------------------------------------------------------- */

/* Splits "a x b x c" in place at the x between blanks or digits; returns the parts. */
static int split_trade(char *text, char *part[EF_SECTION_PARAMETERS + 1])
{
    int n = 0;
    part[n++] = text;
    for (char *c = text; *c; c++) {
        const bool cross = (*c == 'x' || *c == 'X') && c > text;
        if (!cross || n > EF_SECTION_PARAMETERS) continue;
        *c = 0;
        part[n++] = c + 1;
    }
    for (int i = 0; i < n; i++) { /* blanks at both ends */
        while (*part[i] == ' ') part[i]++;
        for (size_t k = strlen(part[i]); k > 0 && part[i][k - 1] == ' '; k--) part[i][k - 1] = 0;
    }
    return n;
}

/* Trade form: one scalar "a x b", or a list of lengths. Returns how many, -1 with a fault. */
static int read_trade(Reader *rd, const Node *v, double *p)
{
    char why[300], *part[EF_SECTION_PARAMETERS + 1];
    int n = 0;
    if (v->kind == NODE_LIST) {
        for (const Node *c = v->first; c; c = c->next) {
            if (n == EF_SECTION_PARAMETERS) break;
            if (!read_number(rd, c, DIM_LENGTH, &p[n++])) return -1;
        }
        return n;
    }
    if (v->kind == NODE_MAP) {
        FAULT(rd, v->mark, "Write the sizes as `25 x 1.5` or [25, 1.5].");
        return -1;
    }
    const size_t length = strlen(v->text);
    char *text = arena_take(rd->cx, &rd->cx->tmp, length + 1, 1);
    if (!text) return -1;
    memcpy(text, v->text, length);
    const int parts = split_trade(text, part);
    for (; n < parts && n < EF_SECTION_PARAMETERS; n++)
        if (!read_quantity(&rd->units, DIM_LENGTH, part[n], &p[n], why, sizeof why)) {
            FAULT(rd, v->mark, "In `%s`: %s.", v->text, why);
            return -1;
        }
    return parts;
}

static int count_parameters(const SectionKind *k, int *required)
{
    int n = 0;
    *required = 0;
    for (; k->parameter[n].key; n++) *required += !k->parameter[n].optional;
    return n;
}

static bool trade_size(Reader *rd, const Node *v, const SectionKind *kind, EfSize *s)
{
    int required;
    const int most = count_parameters(kind, &required), n = read_trade(rd, v, s->parameter);
    if (n < 0) return false;
    if (n < required || n > most) {
        FAULT(rd, v->mark, "`%s` takes %s.", kind->name, kind->help);
        return false;
    }
    if (v->kind == NODE_SCALAR) s->text = keep_format(rd->cx, "%s %s", kind->name, v->text);
    return true;
}

static bool given_size(Reader *rd, Node *n, const SectionKind *kind, EfSize *s)
{
    static const Dimension of[] = {[UNIT_LENGTH] = DIM_LENGTH, [UNIT_AREA] = DIM_AREA, [UNIT_INERTIA] = DIM_INERTIA};
    bool good = true;
    for (int i = 0; kind->parameter[i].key; i++) {
        const Node *v = node_get(n, kind->parameter[i].key);
        if (v) good &= read_number(rd, v, of[kind->parameter[i].unit], &s->parameter[i]);
        else if (!kind->parameter[i].optional) {
            FAULT(rd, n->mark, "A size needs a shape (round, square, rectangle, ellipse, rod), or area, Iy, Iz and J; `%s` is missing.", kind->parameter[i].key);
            return false;
        }
    }
    return good;
}

static void describe(Reader *rd, const SectionKind *kind, EfSize *s)
{
    if (s->text) return;
    const double *p = s->parameter;
    if (!kind->trade_form) s->text = keep_format(rd->cx, "given, %.4g mm2", p[0] * 1e6);
    else if (isnan(p[1])) s->text = keep_format(rd->cx, "%s %.4g mm", kind->name, p[0] * 1e3);
    else if (isnan(p[2])) s->text = keep_format(rd->cx, "%s %.4g x %.4g mm", kind->name, p[0] * 1e3, p[1] * 1e3);
    else s->text = keep_format(rd->cx, "%s %.4g x %.4g x %.4g mm", kind->name, p[0] * 1e3, p[1] * 1e3, p[2] * 1e3);
}

static void read_size(Reader *rd, Node *n, EfSize *s)
{
    char why[200];
    const SectionKind *kind = NULL;
    Node *shape = NULL;
    *s = (EfSize){.name = keep_text(rd->cx, n->key), .mark = n->key_mark, .material = -1};
    for (int i = 0; i < EF_SECTION_PARAMETERS; i++) s->parameter[i] = NAN;
    if (!check_keys(rd, n, keys_size, "A size")) return;
    s->material = need_material(rd, node_get(n, "material"));
    for (size_t i = 0; section_kind(i); i++) {
        Node *v = section_kind(i)->trade_form ? node_get(n, section_kind(i)->name) : NULL;
        if (v && kind) {
            FAULT(rd, v->key_mark, "A size has one shape; this one is `%s` already.", kind->name);
            return;
        }
        if (v) kind = section_kind(i), shape = v;
    }
    if (!kind) kind = section_kind_named("given");
    s->kind = kind->name;
    if (!(shape ? trade_size(rd, shape, kind, s) : given_size(rd, n, kind, s))) return;
    if (!section_values(kind, s->parameter, &s->section, why, sizeof why)) FAULT(rd, shape ? shape->mark : n->mark, "Size `%s`: %s.", n->key, why);
    describe(rd, kind, s);
}

void read_sizes(Reader *rd, Node *n)
{
    EfFrame *f = rd->frame;
    if (!n || !need_map(rd, n, "`sizes`")) return;
    f->size = arena_take(rd->cx, &rd->cx->keep, (size_t)n->count, sizeof *f->size);
    if (!names_new(rd, &rd->sizes, "size", n->count) || !f->size) return;
    for (Node *c = n->first; c; c = c->next) {
        if (!check_name(rd, c->key, c->key_mark, "size")) continue;
        rd->sizes.name[f->nsize] = c->key;
        read_size(rd, c, &f->size[f->nsize++]);
    }
    rd->sizes.n = f->nsize;
    names_sort(&rd->sizes);
}
