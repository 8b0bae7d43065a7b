/* kinds.c - the tables of `show`. A new table is one function and one row at the end.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "postproc/table.h"

static const char *tube_name(const EfResults *r, int t) { return t < 0 ? "the frame" : r->frame->tube[t].name; }
static const char *size_text(const EfResults *r, int t) { return r->frame->size[r->frame->tube[t].size].text; }

#define ROW(...) TRY(table_row(cx, t, (const Cell[]){__VA_ARGS__}))
#define TEXT(x) text_cell(x)
#define NUM(x) number_cell(x)

/* ---- weights and balance -------------------------------------------------------------------------------------------------- */

static EfStatus weights(EfContext *cx, const EfResults *r, const Filter *filter, Table *t)
{
    static const Column columns[] = {{"part", Q_TEXT}, {"size", Q_TEXT}, {"length", Q_LENGTH}, {"mass", Q_MASS},
                                     {"x", Q_LENGTH}, {"y", Q_LENGTH}, {"z", Q_LENGTH}};
    const EfFrame *f = r->frame;
    table_start(t, "weights", 7, columns);
    for (int i = 0; i < f->ntube; i++) {
        const double *a = f->joint[f->tube[i].end[0]].x, *b = f->joint[f->tube[i].end[1]].x;
        if (!wanted_tube(filter, f->tube[i].name)) continue;
        ROW(TEXT(f->tube[i].name), TEXT(size_text(r, i)), NUM(r->length[i]), NUM(r->tube_mass[i]), NUM((a[0] + b[0]) / 2),
            NUM((a[1] + b[1]) / 2), NUM((a[2] + b[2]) / 2));
    }
    for (int i = 0; i < f->nequipment; i++) {
        const EfEquipment *e = &f->equipment[i];
        ROW(TEXT(e->name), TEXT("equipment"), NUM(NAN), NUM(e->mass), NUM(e->at[0]), NUM(e->at[1]), NUM(e->at[2]));
    }
    ROW(TEXT("tubes"), TEXT(""), NUM(NAN), NUM(r->tubes_mass), NUM(NAN), NUM(NAN), NUM(NAN));
    const double *c = r->centre_of_mass;
    ROW(TEXT("all, centre of mass"), TEXT(""), NUM(NAN), NUM(r->mass), NUM(c[0]), NUM(c[1]), NUM(c[2]));
    return EF_OK;
}

static EfStatus balance(EfContext *cx, const EfResults *r, const Filter *filter, Table *t)
{
    static const Column columns[] = {{"case", Q_TEXT}, {"forces of", Q_TEXT}, {"Fx", Q_FORCE}, {"Fy", Q_FORCE}, {"Fz", Q_FORCE},
                                     {"Mx", Q_MOMENT}, {"My", Q_MOMENT}, {"Mz", Q_MOMENT}, {"residual", Q_NUMBER},
                                     {"n x", Q_NUMBER}, {"n y", Q_NUMBER}, {"n z", Q_NUMBER},
                                     {"turn x", Q_ACCELERATION}, {"turn y", Q_ACCELERATION}, {"turn z", Q_ACCELERATION}};
    table_start(t, "balance about the origin; n: load factor at the centre of mass", 15, columns);
    for (int i = 0; i < r->ncase; i++) {
        const EfCaseResult *c = &r->cases[i];
        const struct {
            const char *name;
            const double *f;
        } part[] = {{"loads", c->balance.applied}, {"inertia", c->balance.inertia}, {"supports", c->balance.reactions}};
        if (!wanted_case(filter, c)) continue;
        for (int p = 0; p < 3; p++) {
            const double *f = part[p].f, none = NAN;
            const bool first = p == 0, free_row = first && c->free_body;
            if (p == 1 && !c->free_body) continue;
            if (p == 2 && c->free_body) continue;
            ROW(TEXT(first ? c->name : ""), TEXT(part[p].name), NUM(f[0]), NUM(f[1]), NUM(f[2]), NUM(f[3]), NUM(f[4]), NUM(f[5]),
                NUM(first ? c->balance.residual : none), NUM(free_row ? c->n_at_cg[0] : none), NUM(free_row ? c->n_at_cg[1] : none),
                NUM(free_row ? c->n_at_cg[2] : none), NUM(free_row ? c->angular_acceleration[0] : none),
                NUM(free_row ? c->angular_acceleration[1] : none), NUM(free_row ? c->angular_acceleration[2] : none));
        }
    }
    return EF_OK;
}

/* ---- loads and reactions ---------------------------------------------------------------------------------------------------- */

static EfStatus loads(EfContext *cx, const EfResults *r, const Filter *filter, Table *t)
{
    static const Column columns[] = {{"case", Q_TEXT}, {"tube", Q_TEXT}, {"axial, tension +", Q_FORCE}, {"least axial", Q_FORCE},
                                     {"growing part", Q_FORCE}, {"torque", Q_MOMENT}, {"largest My", Q_MOMENT}, {"largest Mz", Q_MOMENT}};
    table_start(t, "tube loads at the level of the strength check", 8, columns);
    for (int i = 0; i < r->ncase; i++) {
        const EfCaseResult *c = &r->cases[i];
        for (int k = 0; k < r->frame->ntube && wanted_case(filter, c); k++) {
            double M[2] = {0, 0};
            if (!wanted_tube(filter, tube_name(r, k))) continue;
            for (int s = 0; s < 10; s++)
                if (fabs(c->station_moment[10 * k + s]) > fabs(M[s % 2])) M[s % 2] = c->station_moment[10 * k + s];
            ROW(TEXT(c->name), TEXT(tube_name(r, k)), NUM(c->axial[k]), NUM(c->axial_min[k]), NUM(c->axial_growing[k]),
                NUM(-c->end_force[12 * k + 3]), NUM(M[0]), NUM(M[1]));
        }
    }
    return EF_OK;
}

static EfStatus reactions(EfContext *cx, const EfResults *r, const Filter *filter, Table *t)
{
    static const Column columns[] = {{"case", Q_TEXT}, {"joint", Q_TEXT}, {"Fx", Q_FORCE}, {"Fy", Q_FORCE}, {"Fz", Q_FORCE},
                                     {"Mx", Q_MOMENT}, {"My", Q_MOMENT}, {"Mz", Q_MOMENT}};
    table_start(t, "reactions: forces of the supports on the frame", 8, columns);
    for (int i = 0; i < r->ncase; i++) {
        const EfCaseResult *c = &r->cases[i];
        for (int k = 0; k < c->nreaction && wanted_case(filter, c); k++) {
            const double *f = c->reaction + 6 * k;
            ROW(TEXT(c->name), TEXT(r->frame->joint[c->reaction_joint[k]].name), NUM(f[0]), NUM(f[1]), NUM(f[2]), NUM(f[3]),
                NUM(f[4]), NUM(f[5]));
        }
    }
    return EF_OK;
}

/* ---- factors and fixity -------------------------------------------------------------------------------------------------------- */

/* The tube that gives most in a shape. */
static const char *leader(const EfResults *r, const EfCritical *c, int k)
{
    const double *lost = c->lost + (size_t)k * (size_t)r->frame->ntube;
    int best = 0;
    for (int t = 1; t < r->frame->ntube; t++)
        if (lost[t] > lost[best] * (1 + 1e-9)) best = t;
    return lost[best] > 0 ? tube_name(r, best) : "";
}

static EfStatus factor_rows(EfContext *cx, const EfResults *r, const EfCaseResult *c, const EfCritical *f, double sign, Table *t)
{
    static const char *const outcome[] = {"", "none: nothing is compressed", "none below the factor counted to",
                                          "the steady loads alone buckle it", "tally short"};
    for (int k = 0; k < f->nmode; k++)
        ROW(TEXT(c->name), NUM(k + 1), NUM(sign * f->factor[k]), TEXT(f->kind[k]), TEXT(leader(r, f, k)), NUM(f->family[k] + 1),
            NUM(f->residual[k]), NUM(f->mesh_error[k]), NUM(f->counted), NUM(f->found), NUM(sign * f->counted_at), NUM(k == 0 ? c->witness.factor * (sign > 0 ? 1 : NAN) : NAN));
    if (f->nmode == 0)
        ROW(TEXT(c->name), NUM(NAN), NUM(NAN), TEXT(outcome[f->outcome]), TEXT(""), NUM(NAN), NUM(NAN), NUM(NAN), NUM(f->counted),
            NUM(f->found), NUM(sign * f->counted_at), NUM(NAN));
    return EF_OK;
}

static EfStatus factors(EfContext *cx, const EfResults *r, const Filter *filter, Table *t)
{
    static const Column columns[] = {{"case", Q_TEXT}, {"no", Q_COUNT}, {"critical factor", Q_NUMBER}, {"kind", Q_TEXT},
                                     {"most by", Q_TEXT}, {"family", Q_COUNT}, {"residual", Q_NUMBER}, {"mesh error", Q_NUMBER},
                                     {"counted", Q_COUNT}, {"found", Q_COUNT}, {"below", Q_NUMBER}, {"exact members", Q_NUMBER}};
    table_start(t, "critical factors on the growing loads; counted = found: the tally is complete", 12, columns);
    for (int i = 0; i < r->ncase; i++) {
        const EfCaseResult *c = &r->cases[i];
        if (!wanted_case(filter, c)) continue;
        TRY(factor_rows(cx, r, c, &c->critical, 1, t));
        if (c->has_negative) TRY(factor_rows(cx, r, c, &c->negative, -1, t));
        if (!c->has_steady) continue;
        ROW(TEXT(c->name), NUM(NAN), NUM(c->all_grow_factor), TEXT("steady loads grow too"), TEXT(""), NUM(NAN), NUM(NAN), NUM(NAN),
            NUM(NAN), NUM(NAN), NUM(NAN), NUM(NAN));
        ROW(TEXT(c->name), NUM(NAN), NUM(c->steady_factor), TEXT("on the steady loads alone"), TEXT(""), NUM(NAN), NUM(NAN), NUM(NAN),
            NUM(NAN), NUM(NAN), NUM(NAN), NUM(NAN));
    }
    return EF_OK;
}

static EfStatus fixity(EfContext *cx, const EfResults *r, const Filter *filter, Table *t)
{
    static const char *const role[] = {"idle", "riding", "bracing", "leaning"};
    static const Column columns[] = {{"case", Q_TEXT}, {"tube", Q_TEXT}, {"P", Q_FORCE}, {"role", Q_TEXT}, {"frame c", Q_NUMBER},
                                     {"own c", Q_NUMBER}, {"at factor", Q_NUMBER}, {"second c", Q_NUMBER}, {"on clear length", Q_NUMBER},
                                     {"safe c", Q_NUMBER}, {"at factor", Q_NUMBER}, {"reserve", Q_NUMBER}, {"own critical", Q_FORCE}, {"note", Q_TEXT}};
    table_start(t, "end fixity c of tubes, on joint-to-joint length; compression P", 14, columns);
    for (int i = 0; i < r->ncase; i++) {
        const EfCaseResult *c = &r->cases[i];
        const EfFixity *f = &c->fixity;
        for (int k = 0; k < r->frame->ntube && wanted_case(filter, c); k++) {
            if (!wanted_tube(filter, tube_name(r, k))) continue;
            ROW(TEXT(c->name), TEXT(tube_name(r, k)), NUM(-c->axial_min[k]), TEXT(role[f->role[k]]), NUM(f->frame_c[k]), NUM(f->own_c[k]),
                NUM(isnan(f->own_c[k]) ? NAN : f->own_at), NUM(f->second_c[k]), NUM(f->clear_c[k]), NUM(f->safe_c[k]), NUM(f->safe_at[k]),
                NUM(f->reserve[k]), NUM(f->own_critical[k]), TEXT(f->note[k]));
        }
    }
    return EF_OK;
}

/* ---- ledger and margins ---------------------------------------------------------------------------------------------------------- */

static EfStatus ledger(EfContext *cx, const EfResults *r, const Filter *filter, Table *t)
{
    static const Column columns[] = {{"case", Q_TEXT}, {"tube", Q_TEXT}, {"c of", Q_TEXT}, {"hand c", Q_NUMBER}, {"frame c", Q_NUMBER},
                                     {"hand factor", Q_NUMBER}, {"frame factor", Q_NUMBER}, {"hand elastic", Q_NUMBER},
                                     {"frame elastic", Q_NUMBER}, {"verdict", Q_TEXT}, {"because", Q_TEXT}};
    table_start(t, "hand sheet against frame: factors on the growing loads by the tube's column rule, and elastic", 11, columns);
    for (int i = 0; i < r->ncase; i++) {
        const EfCaseResult *c = &r->cases[i];
        for (int k = 0; k < c->nledger && wanted_case(filter, c); k++) {
            const EfLedgerRow *l = &c->ledger[k];
            if (!wanted_tube(filter, tube_name(r, l->tube))) continue;
            ROW(TEXT(c->name), TEXT(tube_name(r, l->tube)), TEXT(l->assumed ? "assumed" : "sheet"), NUM(l->hand_c), NUM(l->frame_c),
                NUM(l->hand_factor), NUM(l->frame_factor), NUM(l->hand_elastic), NUM(l->frame_elastic), TEXT(l->verdict_text), TEXT(l->because));
        }
    }
    return EF_OK;
}

static EfStatus margins(EfContext *cx, const EfResults *r, const Filter *filter, Table *t)
{
    static const char *const state[] = {"ok", "close", "negative", ""};
    static const Column columns[] = {{"case", Q_TEXT}, {"tube", Q_TEXT}, {"check", Q_TEXT}, {"rule", Q_TEXT}, {"demand", Q_FORCE},
                                     {"strength", Q_FORCE}, {"c used", Q_NUMBER}, {"c found", Q_NUMBER}, {"margin", Q_NUMBER},
                                     {"state", Q_TEXT}, {"note", Q_TEXT}};
    table_start(t, "margins: nominal strength over demand less 1", 11, columns);
    for (int i = 0; i < r->ncase; i++) {
        const EfCaseResult *c = &r->cases[i];
        for (int k = 0; k < c->nmargin && wanted_case(filter, c); k++) {
            const EfMargin *m = &c->margin[k];
            if (!wanted_tube(filter, tube_name(r, m->tube))) continue;
            const bool frame = m->tube < 0; /* its demand and strength are factors: not in a column of forces */
            ROW(TEXT(c->name), TEXT(tube_name(r, m->tube)), TEXT(m->check), TEXT(m->rule), NUM(frame ? NAN : m->demand),
                NUM(frame ? NAN : m->strength), NUM(m->c_used), NUM(m->c_found), NUM(m->margin), TEXT(state[m->state]), TEXT(m->note));
        }
    }
    return EF_OK;
}

static const TableKind kinds[] = {
    {"weights", "masses and the centre of mass", weights},
    {"balance", "loads, inertia and reactions; residual", balance},
    {"loads", "tube loads", loads},
    {"reactions", "forces of the supports", reactions},
    {"factors", "critical factors, their kinds and their tally", factors},
    {"fixity", "frame c, own c, safe c and reserve of every tube", fixity},
    {"ledger", "the hand sheet against the frame", ledger},
    {"margins", "every check of every tube, and the frame's own row", margins},
};

const TableKind *table_kind(size_t i) { return i < sizeof kinds / sizeof *kinds ? &kinds[i] : NULL; }

const TableKind *table_named(const char *name)
{
    for (size_t i = 0; table_kind(i); i++)
        if (strcmp(kinds[i].name, name) == 0) return &kinds[i];
    return NULL;
}
