/* ledger.c - the hand sheet against the frame, with a signed verdict and one sentence why.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "check/check.h"

static const double PI = 3.14159265358979323846;

EfStatus ledger_verdict(EfContext *cx, double hand, double frame, EfLedgerRow *row)
{
    row->percent = NAN;
    row->verdict = EF_VERDICT_NOT_COMPARABLE;
    row->verdict_text = "not comparable";
    if (!(hand > 0) || !(frame > 0) || !isfinite(hand) || !isfinite(frame)) return EF_OK;
    row->percent = (frame / hand - 1) * 100;
    const double noise = 1e-7; /* rounding of the engines must not turn 0 into "unsafe by 1 %" */
    if (row->percent < -noise) {
        row->verdict = EF_VERDICT_UNSAFE;
        row->verdict_text = keep_format(cx, "unsafe by %.0f %%", ceil(-row->percent - noise));
    } else if (row->percent <= 5) {
        row->verdict = EF_VERDICT_AGREES;
        row->verdict_text = "agrees";
    } else {
        row->verdict = EF_VERDICT_SAFE;
        row->verdict_text = keep_format(cx, "safe side by %.0f %%", floor(row->percent + noise));
    }
    return row->verdict_text ? EF_OK : cx->status;
}

/* What the rows share. */
typedef struct Side {
    const EfFrame *frame;
    const OwnCurve *curve;
    const EfCaseResult *r;
    int tube;
    const EfMaterial *material;
    const EfSection *section;
    const ColumnRule *rule;
} Side;

static Side side_of(const Mesh *mesh, const OwnCurve *curve, const EfCaseResult *r, int tube)
{
    const EfFrame *f = mesh->frame;
    const EfSize *size = &f->size[f->tube[tube].size];
    const EfMaterial *m = &f->material[size->material];
    return (Side){f, curve, r, tube, m, &size->section, column_rule_of(m)};
}

/* The factor on the growing loads at which the tube carries P. NaN: its compression does not grow. */
static double factor_at(const Side *s, double P)
{
    const double P1 = s->curve->P1[s->tube];
    return P1 > 0 ? (P - s->curve->P0[s->tube]) / P1 : NAN;
}

static double load_at(const Side *s, double factor)
{
    return s->curve->P0[s->tube] + factor * s->curve->P1[s->tube];
}

/* Lowest factor in whose shape the tube leans; NaN: none found. */
static double leaning_factor(const Side *s)
{
    const int k = s->r->fixity.shape_of[s->tube];
    return k < 0 ? NAN : s->r->critical.factor[k];
}

/* Frame side: the smaller of the own reserve and, by the same rule, the factor of the shape in which it leans. */
static void frame_side(const Side *s, EfLedgerRow *row)
{
    const EfFixity *f = &s->r->fixity;
    const double leaning = leaning_factor(s), reserve = f->reserve[s->tube];
    row->frame_elastic = leaning;
    row->frame_factor = reserve;
    row->frame_c = f->safe_c[s->tube];
    if (!isnan(leaning)) {
        const double P = load_at(s, leaning), by_rule = factor_at(s, s->rule->strength(s->material, s->section, P));
        if (isnan(reserve) || by_rule < reserve) row->frame_factor = by_rule, row->frame_c = P / s->curve->euler[s->tube];
    }
    row->frame_strength = isnan(row->frame_factor) ? NAN : load_at(s, row->frame_factor);
}

static EfStatus explain(EfContext *cx, const Side *s, EfLedgerRow *row)
{
    const char *name = s->frame->tube[s->tube].name;
    const double hand = row->hand_c, found = row->frame_c;
    if (row->verdict == EF_VERDICT_NOT_COMPARABLE)
        row->because = isnan(s->r->fixity.own_c[s->tube]) ? "it is not compressed in this case"
                                                          : "neither its own check nor a shape that it drives was reached";
    else if (isnan(hand)) row->because = keep_format(cx, "in the frame its c is %.2f at %.2f times the load", found, row->frame_factor);
    else if (row->verdict == EF_VERDICT_AGREES) row->because = keep_format(cx, "the frame gives %s c %.2f, the sheet takes %.2f", name, found, hand);
    else if (found > hand) row->because = keep_format(cx, "its neighbours hold it to c %.2f, the sheet takes %.2f", found, hand);
    else if (s->r->fixity.own_c[s->tube] < 1) row->because = keep_format(cx, "its ends give way: c is %.2f, the sheet takes %.2f", found, hand);
    else row->because = keep_format(cx, "its neighbours are loaded too and hold it to c %.2f only, the sheet takes %.2f", found, hand);
    return row->because ? EF_OK : cx->status;
}

/* hand: c, or an elastic critical load, or a nominal strength; length NaN: joint to joint. */
static EfStatus fill_row(EfContext *cx, const Side *s, const EfHandLine *hand, EfLedgerRow *row)
{
    const double I = fmin(s->section->Iy, s->section->Iz);
    double euler = s->curve->euler[s->tube];
    if (!isnan(hand->length)) euler = PI * PI * s->curve->mesh->tube[s->tube].E * I / (hand->length * hand->length);
    const double elastic = !isnan(hand->critical_load) ? hand->critical_load : hand->c * euler;
    row->tube = s->tube;
    row->hand_c = !isnan(hand->c) ? hand->c : elastic / euler;
    row->hand_strength = !isnan(hand->nominal_strength) ? hand->nominal_strength
                                                        : s->rule->strength(s->material, s->section, elastic);
    row->hand_factor = factor_at(s, row->hand_strength);
    row->hand_elastic = factor_at(s, elastic);
    frame_side(s, row);
    TRY(ledger_verdict(cx, row->hand_factor, row->frame_factor, row));
    return explain(cx, s, row);
}

EfStatus check_ledger(EfContext *cx, const Mesh *mesh, const OwnCurve *curve, double guess_c, EfCaseResult *r)
{
    const EfFrame *f = mesh->frame;
    ALLOC(cx, keep, r->ledger, f->nhand + (guess_c > 0 ? mesh->nt : 0));
    for (int i = 0; i < f->nhand; i++) {
        if (f->hand[i].run != r->run || r->reversed) continue;
        const Side s = side_of(mesh, curve, r, f->hand[i].tube);
        TRY(fill_row(cx, &s, &f->hand[i], &r->ledger[r->nledger++]));
    }
    for (int t = 0; guess_c > 0 && t < mesh->nt; t++) {
        if (isnan(r->fixity.own_c[t])) continue;
        const Side s = side_of(mesh, curve, r, t);
        const EfHandLine guess = {.tube = t, .c = guess_c, .critical_load = NAN, .nominal_strength = NAN, .length = NAN};
        EfLedgerRow *row = &r->ledger[r->nledger++];
        row->assumed = true;
        TRY(fill_row(cx, &s, &guess, row));
    }
    return EF_OK;
}
