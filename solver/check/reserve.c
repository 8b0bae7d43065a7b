/* reserve.c - the factor at which a tube's own check is reached.
 *
 * N_cr(r) is concave (Papkovich) and strength is a concave rising function of it, so strength(N_cr(r)) - P0 - r P1 is
 * concave and crosses zero downwards once at most. A shared grid of r brackets all tubes at once: above a chord the
 * function lies, so the chord's own root is on the safe side.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "check/check.h"

enum { GRID = 8, FINER = 24 };

/* State of the search of one tube: f >= 0 at lo, f < 0 at hi. */
typedef struct Bracket {
    double lo, flo, hi, fhi, Nlo, Nhi;
    bool crosses, lost; /* lost: own c has no value on the way to the root */
} Bracket;

static double excess(const ReserveTask *k, int t, double r, double critical)
{
    return k->strength(k->of, t, critical) - k->P0[t] - r * k->P1[t];
}

/* Takes the value at r into the bracket. */
static void narrow(const ReserveTask *k, int t, double r, double critical, Bracket *b)
{
    if (isnan(critical)) return;
    const double f = excess(k, t, r, critical);
    if (f >= 0 && r >= b->lo) b->lo = r, b->flo = f, b->Nlo = critical;
    if (f < 0 && (!b->crosses || r < b->hi)) b->hi = r, b->fhi = f, b->Nhi = critical, b->crosses = true;
}

static double chord(const Bracket *b)
{
    return b->lo + (b->hi - b->lo) * b->flo / (b->flo - b->fhi);
}

/* One tube by the Illinois method (Dowell and Jarratt 1971), every step one factorisation. */
static EfStatus refine(EfContext *cx, const ReserveTask *k, int t, bool *only, double *critical, Bracket *b)
{
    int side = 0;
    double flo = b->flo, fhi = b->fhi;
    memset(only, 0, (size_t)k->nt * sizeof *only);
    only[t] = true;
    for (int pass = 0; pass < 60 && b->hi - b->lo > 1e-10 * b->hi; pass++) {
        double r = b->lo + (b->hi - b->lo) * flo / (flo - fhi);
        if (!(r > b->lo && r < b->hi)) r = (b->lo + b->hi) / 2;
        TRY(k->own(cx, k->from, r, only, critical));
        b->lost = isnan(critical[t]);
        if (b->lost) return EF_OK;
        const double f = excess(k, t, r, critical[t]);
        narrow(k, t, r, critical[t], b);
        if (fabs(f) <= 1e-11 * (fabs(k->P0[t]) + r * fabs(k->P1[t]))) {
            b->lo = b->hi = r, b->Nlo = b->Nhi = critical[t];
            return EF_OK;
        }
        if (f >= 0) {
            flo = f;
            if (side == 1) fhi /= 2;
            side = 1;
        } else {
            fhi = f;
            if (side == -1) flo /= 2;
            side = -1;
        }
    }
    return EF_OK;
}

/* All tubes at r. */
static EfStatus visit(EfContext *cx, const ReserveTask *k, double r, const bool *which, double *critical, Bracket *b)
{
    TRY(k->own(cx, k->from, r, which, critical));
    for (int t = 0; t < k->nt; t++)
        if (which[t]) narrow(k, t, r, critical[t], &b[t]);
    return EF_OK;
}

/* Width of the widest bracket over its upper end, and the place of the middle of the interval most tubes want halved. */
static double widest(const ReserveTask *k, const Bracket *b, double *middle)
{
    double width = 0;
    for (int t = 0; t < k->nt; t++) {
        if (!k->wanted[t] || !b[t].crosses) continue;
        const double w = (b[t].hi - b[t].lo) / b[t].hi;
        if (w > width * (1 + 1e-9)) width = w, *middle = (b[t].lo + b[t].hi) / 2;
    }
    return width;
}

EfStatus reserve_solve(EfContext *cx, const ReserveTask *k, double *reserve, double *critical, double *at_cap)
{
    const ArenaMark mark = arena_mark(&cx->tmp);
    Bracket *b;
    bool *only, *crossing;
    double *own, middle;
    ALLOC(cx, tmp, b, k->nt);
    ALLOC(cx, tmp, only, k->nt);
    ALLOC(cx, tmp, crossing, k->nt);
    ALLOC(cx, tmp, own, k->nt);
    for (int t = 0; t < k->nt; t++) reserve[t] = critical[t] = at_cap[t] = NAN;
    /* At the cap and at 0.9 of the lowest factor all tubes; what is not reached at the cap is not reached before. */
    TRY(visit(cx, k, 0.9 * k->cap / 0.999, k->wanted, at_cap, b));
    TRY(visit(cx, k, k->cap, k->wanted, own, b));
    for (int t = 0; t < k->nt; t++) crossing[t] = k->wanted[t] && b[t].crosses;
    for (int i = 0; i < (k->exact ? 1 : GRID); i++) TRY(visit(cx, k, k->cap * (i + 0.02) / GRID, crossing, own, b));
    for (int i = 0; !k->exact && i < FINER && widest(k, b, &middle) > 2e-3; i++) TRY(visit(cx, k, middle, crossing, own, b));
    for (int t = 0; t < k->nt; t++) {
        if (!k->wanted[t] || !b[t].crosses) continue;
        if (k->exact) TRY(refine(cx, k, t, only, own, &b[t]));
        if (b[t].lost) at_cap[t] = NAN;
        if (b[t].lost) continue;
        const bool met = b[t].hi == b[t].lo;
        reserve[t] = met ? b[t].lo : chord(&b[t]);
        critical[t] = met ? b[t].Nlo : b[t].Nlo + (b[t].Nhi - b[t].Nlo) * (reserve[t] - b[t].lo) / (b[t].hi - b[t].lo);
        if (b[t].lo == 0) critical[t] = NAN; /* the check is passed before anything grows: there is no c to speak of */
    }
    arena_rewind(&cx->tmp, mark);
    return EF_OK;
}

/* ---- in the frame -------------------------------------------------------------------------------------------------- */

static double strength_of(const void *of, int tube, double elastic)
{
    const EfFrame *f = of;
    const EfSize *size = &f->size[f->tube[tube].size];
    const EfMaterial *m = &f->material[size->material];
    return column_rule_of(m)->strength(m, &size->section, elastic);
}

static EfStatus own_in_frame(EfContext *cx, void *from, double r, const bool *wanted, double *critical)
{
    return own_critical_at(cx, from, r, wanted, critical);
}

/* The tube leans in a shape of the lowest factor (its equals included), whatever --count is. */
static bool leans_first(const EfCritical *c, int nt, int t)
{
    for (int k = 0; k < c->nmode && c->factor[k] <= c->factor[0] * (1 + 1e-6); k++)
        if (c->role[k * nt + t] == EF_ROLE_LEANING) return true;
    return false;
}

static void frame_governs(const OwnCurve *curve, const EfCaseResult *r, int t, double at_cap, EfFixity *f)
{
    const double lowest = curve->cap / 0.999;
    f->note[t] = "frame governs";
    if (leans_first(&r->critical, curve->mesh->nt, t)) {
        f->safe_at[t] = r->critical.factor[0];
        f->safe_c[t] = (curve->P0[t] + f->safe_at[t] * curve->P1[t]) / curve->euler[t];
        return;
    }
    f->safe_at[t] = 0.9 * lowest;
    f->safe_c[t] = at_cap / curve->euler[t];
}

EfStatus check_reserves(EfContext *cx, OwnCurve *curve, EfCaseResult *r)
{
    EfFixity *f = &r->fixity;
    const int nt = curve->mesh->nt;
    if (!isfinite(curve->cap)) return EF_OK; /* nothing buckles: no tube reaches its check by buckling */
    const ArenaMark mark = arena_mark(&cx->tmp);
    bool *wanted;
    double *critical, *at_cap;
    ALLOC(cx, tmp, wanted, nt);
    ALLOC(cx, tmp, critical, nt);
    ALLOC(cx, tmp, at_cap, nt);
    for (int t = 0; t < nt; t++) wanted[t] = !isnan(f->own_critical[t]) && curve->P1[t] > 0;
    enum { MANY_TUBES = 400 }; /* from here on the shared grid alone */
    const ReserveTask task = {.nt = nt, .P0 = curve->P0, .P1 = curve->P1, .cap = curve->cap, .wanted = wanted,
                              .strength = strength_of, .of = curve->mesh->frame, .own = own_in_frame, .from = curve,
                              .exact = nt <= MANY_TUBES};
    TRY(reserve_solve(cx, &task, f->reserve, critical, at_cap));
    for (int t = 0; t < nt; t++) {
        if (!wanted[t]) continue;
        if (isnan(f->reserve[t]) && isnan(at_cap[t])) {
            f->note[t] = "no own c";
            continue;
        }
        if (isnan(f->reserve[t])) {
            frame_governs(curve, r, t, at_cap[t], f);
            continue;
        }
        f->safe_c[t] = critical[t] / curve->euler[t];
        f->safe_at[t] = f->reserve[t];
    }
    arena_rewind(&cx->tmp, mark);
    return EF_OK;
}
