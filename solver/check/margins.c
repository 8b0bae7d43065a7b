/* margins.c - the checks of tubes and of the frame, by a registry.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "check/check.h"

/* What a check reads. */
typedef struct CheckInput {
    const Mesh *mesh;
    const OwnCurve *curve;
    const EfCaseResult *result;
} CheckInput;

/* A check of one tube: fills the row's demand, strength, c, rule and note; false where it does not apply. */
typedef struct TubeCheck {
    const char *name;
    bool (*apply)(EfContext *cx, const CheckInput *in, int tube, EfMargin *row);
} TubeCheck;

static EfState state_of(double margin)
{
    if (isnan(margin)) return EF_STATE_NONE;
    return margin < 0 ? EF_STATE_NEGATIVE : margin <= 0.05 ? EF_STATE_CLOSE : EF_STATE_OK;
}

static const EfSize *size_of(const Mesh *mesh, int tube) { return &mesh->frame->size[mesh->frame->tube[tube].size]; }

static bool compression(EfContext *cx, const CheckInput *in, int t, EfMargin *row)
{
    const EfSize *size = size_of(in->mesh, t);
    const EfMaterial *m = &in->mesh->frame->material[size->material];
    const ColumnRule *rule = column_rule_of(m);
    const EfFixity *f = &in->result->fixity;
    if (isnan(f->own_c[t])) return false;
    row->rule = rule->name;
    row->demand = in->curve->P0[t] + in->curve->P1[t];
    row->c_found = f->own_c[t];
    row->c_used = fmin(f->own_c[t], in->mesh->frame->fixity_credit);
    const double elastic = row->c_used * in->curve->euler[t];
    row->strength = rule->strength(m, &size->section, elastic);
    const char *caution = rule->caution(m, &size->section, elastic);
    if (f->own_at < 1) row->note = "the frame buckles before the case load";
    else if (row->c_used < row->c_found)
        row->note = keep_format(cx, "no credit taken for c above %.3g", in->mesh->frame->fixity_credit);
    else if (caution) row->note = caution;
    return true;
}

/* Largest bending stress at the ends and along the tube at limit level, Pa; 0 with *unknown set without depths. */
static double bending_stress(const CheckInput *in, int t, double level, bool *unknown)
{
    const EfSection *s = &size_of(in->mesh, t)->section;
    const double *station = in->result->station_moment + 10 * t;
    double most = 0;
    *unknown = isnan(s->depth_y) || isnan(s->depth_z);
    for (int k = 0; k < 5 && !*unknown; k++) {
        const double My = fabs(station[2 * k]) / level, Mz = fabs(station[2 * k + 1]) / level;
        const double by = My * s->depth_z / (2 * s->Iy), bz = Mz * s->depth_y / (2 * s->Iz);
        most = fmax(most, s->round ? hypot(by, bz) : by + bz);
    }
    return most;
}

/* P/A + M/W at limit against the yield beside a weld. */
static bool tension(EfContext *cx, const CheckInput *in, int t, EfMargin *row)
{
    (void)cx;
    const EfSize *size = size_of(in->mesh, t);
    const EfMaterial *m = &in->mesh->frame->material[size->material];
    const double N = in->result->axial[t], level = in->result->ultimate_factor;
    if (in->result->level != EF_LEVEL_LIMIT || !(N > 0) || strcmp(in->result->fixity.note[t], "tension") != 0) return false;
    const double yield = isnan(m->welded_yield) ? m->yield : m->welded_yield;
    bool unknown;
    if (isnan(yield)) return false;
    row->rule = "P/A + M/W";
    row->demand = N / level + bending_stress(in, t, level, &unknown) * size->section.A;
    row->strength = yield * size->section.A;
    row->c_used = row->c_found = NAN;
    if (unknown) row->note = "bending left out: the size has no depth";
    return true;
}

static const TubeCheck checks[] = {{"compression", compression}, {"tension yield at limit", tension}};

/* The frame's own row. */
static EfMargin frame_row(const EfCaseResult *r)
{
    EfMargin row = {.tube = -1, .check = "frame", .rule = "lowest critical factor", .demand = r->required.critical_factor,
                    .strength = NAN, .c_used = NAN, .c_found = NAN, .margin = NAN, .note = ""};
    if (r->critical.outcome == EF_STEADY_BUCKLES) {
        row.strength = 0; /* nothing may be added */
        row.note = "the steady loads alone buckle the frame";
    } else if (r->critical.nmode > 0) row.strength = r->critical.factor[0];
    else row.note = "no critical factor";
    row.margin = row.strength / row.demand - 1;
    row.state = state_of(row.margin);
    return row;
}

EfStatus check_margins(EfContext *cx, const Mesh *mesh, const OwnCurve *curve, EfCaseResult *r)
{
    const size_t nchecks = sizeof checks / sizeof *checks;
    const CheckInput in = {mesh, curve, r};
    ALLOC(cx, keep, r->margin, (size_t)mesh->nt * nchecks + 1);
    r->margin[r->nmargin++] = frame_row(r);
    for (int t = 0; t < mesh->nt; t++)
        for (size_t c = 0; c < nchecks; c++) {
            EfMargin row = {.tube = t, .check = checks[c].name, .note = ""};
            if (!checks[c].apply(cx, &in, t, &row)) continue;
            if (!row.note) return cx->status;
            row.margin = row.strength / row.demand - 1;
            row.state = state_of(row.margin);
            r->margin[r->nmargin++] = row;
        }
    return EF_OK;
}
