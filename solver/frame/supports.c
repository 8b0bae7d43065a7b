/* supports.c - supports, equipment, requirements and the hand sheet.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "frame/reader.h"

/* Axes from two directions: x, and another in the x-y plane. */
static void read_axes(Reader *rd, Node *n, EfSupport *s)
{
    Node *nx = need_map(rd, n, "`axes`") ? node_get(n, "x") : NULL, *ny = nx ? node_get(n, "y") : NULL;
    double x[3], y[3], size = 0, part = 0, rest = 0;
    if (!nx || !ny || n->count != 2) {
        FAULT(rd, n->mark, "Skew axes are written {x: [..], y: [..]}, two directions square to each other.");
        return;
    }
    if (!read_direction(rd, nx, x) || !read_direction(rd, ny, y)) return;
    for (int i = 0; i < 3; i++) size += x[i] * x[i];
    for (int i = 0; i < 3; i++) x[i] /= sqrt(size), part += x[i] * y[i];
    for (int i = 0; i < 3; i++) y[i] -= part * x[i], rest += y[i] * y[i];
    if (!(rest > 1e-6 * part * part) || rest == 0) {
        FAULT(rd, ny->mark, "The directions x and y of a support cannot lie in one line.");
        return;
    }
    for (int i = 0; i < 3; i++) y[i] /= sqrt(rest);
    memcpy(s->axes[0], x, sizeof x);
    memcpy(s->axes[1], y, sizeof y);
    for (int i = 0; i < 3; i++) s->axes[2][i] = x[(i + 1) % 3] * y[(i + 2) % 3] - x[(i + 2) % 3] * y[(i + 1) % 3];
    s->skew = true;
}

static void long_support(Reader *rd, Node *n, EfSupport *s)
{
    if (!check_keys(rd, n, keys_support, "A support")) return;
    Node *v = node_get(n, "held");
    if (v) read_directions(rd, v, true, &s->held);
    v = node_get(n, "spring");
    if (v) read_by_direction(rd, v, DIM_STIFFNESS, DIM_ROTATION_STIFFNESS, s->spring);
    for (int i = 0; v && i < EF_DIRECTIONS; i++)
        if (s->spring[i] < 0) FAULT(rd, v->mark, "A support's spring cannot be negative.");
        else if (s->spring[i] > 0 && (s->held >> i & 1)) FAULT(rd, v->mark, "A direction is held or sprung, not both.");
    v = node_get(n, "movement");
    if (v) read_by_direction(rd, v, DIM_LENGTH, DIM_ANGLE, s->movement);
    for (int i = 0; v && i < EF_DIRECTIONS; i++)
        if (s->movement[i] != 0 && !(s->held >> i & 1)) FAULT(rd, v->mark, "Only a held direction can be moved by a given amount.");
    v = node_get(n, "axes");
    if (v) read_axes(rd, v, s);
}

void read_supports(Reader *rd, Node *n)
{
    EfFrame *f = rd->frame;
    if (!n || (n->kind == NODE_SCALAR && !n->text[0]) || !need_map(rd, n, "`supports`")) return;
    f->support = arena_take(rd->cx, &rd->cx->keep, (size_t)n->count, sizeof *f->support);
    if (!f->support) return;
    for (Node *c = n->first; c; c = c->next) {
        EfSupport *s = &f->support[f->nsupport];
        const Node name = {.kind = NODE_SCALAR, .text = c->key, .mark = c->key_mark};
        *s = (EfSupport){.joint = names_need(rd, &rd->joints, &name), .mark = c->key_mark};
        if (c->kind == NODE_MAP) long_support(rd, c, s);
        else read_directions(rd, c, true, &s->held);
        if (s->joint >= 0) f->nsupport++;
    }
}

void read_equipment(Reader *rd, Node *n)
{
    EfFrame *f = rd->frame;
    if (!n || !need_map(rd, n, "`equipment`")) return;
    f->equipment = arena_take(rd->cx, &rd->cx->keep, (size_t)n->count, sizeof *f->equipment);
    if (!f->equipment) return;
    for (Node *c = n->first; c; c = c->next) {
        if (!check_name(rd, c->key, c->key_mark, "piece of equipment") || !check_keys(rd, c, keys_equipment, "Equipment")) continue;
        EfEquipment *e = &f->equipment[f->nequipment++];
        *e = (EfEquipment){.name = keep_text(rd->cx, c->key), .mark = c->key_mark};
        get_number(rd, c, "mass", DIM_MASS, &e->mass);
        read_vector(rd, node_get(c, "at"), DIM_LENGTH, e->at);
        names_list(rd, &rd->joints, node_get(c, "carried by"), &e->ncarrier, &e->carrier);
        if (!(e->mass > 0)) FAULT(rd, c->mark, "The mass of `%s` must be greater than zero.", c->key);
    }
}

void read_required(Reader *rd, Node *n, EfRequired *r)
{
    if (!check_keys(rd, n, keys_required, "`required`")) return;
    get_number(rd, n, "critical factor", DIM_NUMBER, &r->critical_factor);
    get_number(rd, n, "collapse factor", DIM_NUMBER, &r->collapse_factor);
    get_number(rd, n, "margin", DIM_NUMBER, &r->margin);
    get_number(rd, n, "guys taut to", DIM_NUMBER, &r->guys_taut_to);
    if (r->critical_factor <= 0 || r->collapse_factor <= 0 || r->guys_taut_to < 0) FAULT(rd, n->mark, "Required factors must be greater than zero.");
}

/* ---- hand sheet ------------------------------------------------------------------------------------------------------ */

static void read_hand_line(Reader *rd, Node *n, EfHandLine *h)
{
    double K = NAN;
    *h = (EfHandLine){.tube = -1, .run = -1, .c = NAN, .critical_load = NAN, .nominal_strength = NAN, .length = NAN, .mark = n->mark};
    if (!check_keys(rd, n, keys_hand, "A line of the hand sheet")) return;
    h->tube = names_need(rd, &rd->tubes, node_get(n, "tube"));
    h->run = names_need(rd, &rd->runs, node_get(n, "case"));
    get_number(rd, n, "c", DIM_NUMBER, &h->c);
    get_number(rd, n, "K", DIM_NUMBER, &K);
    get_number(rd, n, "critical load", DIM_FORCE, &h->critical_load);
    get_number(rd, n, "nominal strength", DIM_FORCE, &h->nominal_strength);
    get_number(rd, n, "length", DIM_LENGTH, &h->length);
    const int given = !isnan(h->c) + !isnan(K) + !isnan(h->critical_load) + !isnan(h->nominal_strength);
    if (given != 1) FAULT(rd, n->mark, "Give one of c, K, critical load, nominal strength; here are %d.", given);
    if (h->c <= 0 || K <= 0 || h->critical_load <= 0 || h->nominal_strength <= 0 || h->length <= 0)
        FAULT(rd, n->mark, "Values of the hand sheet must be greater than zero.");
    if (!isnan(K)) h->c = 1 / (K * K);
}

void read_hand_sheet(Reader *rd, Node *n)
{
    EfFrame *f = rd->frame;
    if (!n) return;
    if (n->kind != NODE_LIST) {
        FAULT(rd, n->mark, "`hand sheet` is a list: - {tube: .., case: .., c: ..}");
        return;
    }
    f->hand = arena_take(rd->cx, &rd->cx->keep, (size_t)n->count, sizeof *f->hand);
    if (!f->hand) return;
    for (Node *c = n->first; c; c = c->next) read_hand_line(rd, c, &f->hand[f->nhand++]);
}
