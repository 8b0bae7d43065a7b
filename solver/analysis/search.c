/* search.c - the shift from counts, then all factors below it.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "analysis/buckling.h"

static const double PI = 3.14159265358979323846;
/* Where nothing is compressed, bending and torque are searched to this factor, and on until they alone would make
 * waves as short as those of a tube between clamped ends in its second shape. */
static const double IDLE_CAP = 100, IDLE_WAVES = 16;
/* No answer is sought beyond it. */
static const double CAP = 1e9;
/* Largest bound on the error of a tube's matrix that a search may lean on. */
static const double WORST_MESH = 1e-6;

/* An upper bound of the lowest factor by axial forces alone: a tube held by clamped ends cannot carry more than 4
 * times its Euler load. INFINITY: the growing loads compress nothing. */
static double clamped_bound(const Assembly *a, const Stress *steady, const Stress *growing)
{
    double bound = INFINITY, largest = 0;
    for (int t = 0; t < a->nt; t++) largest = fmax(largest, fabs(tube_axial(&growing->forces[t], 0)));
    for (int t = 0; t < a->nt; t++) {
        const MeshTube *m = &a->mesh->tube[t];
        const double P1 = -tube_axial(&growing->forces[t], 0), P0 = steady ? -tube_axial(&steady->forces[t], 0) : 0;
        if (!(P1 > 1e-9 * largest)) continue;
        const double clamped = 4 * PI * PI * m->E * fmin(m->section.Iy, m->section.Iz) / (m->L * m->L);
        /* A little beyond: the bound itself is the second factor of a pinned tube and no place to count. */
        bound = fmin(bound, 1.0137 * fmax(clamped - P0, 1e-3 * clamped) / P1);
    }
    return bound;
}

/* Compressed anywhere along a tube? */
static bool compresses(const Assembly *a, const Stress *growing)
{
    double least = 0, largest = 0;
    for (int t = 0; t < a->nt; t++) {
        least = fmin(least, tube_axial_min(&growing->forces[t]));
        largest = fmax(largest, fabs(tube_axial(&growing->forces[t], 0)));
    }
    return -least > 1e-9 * largest;
}

/* Waves so long that no tube could buckle below CAP are rounding, or as good as no load. */
static bool loaded(const Assembly *a, const Stress *growing)
{
    const double nothing = 10 / CAP;
    for (int t = 0; t < a->nt; t++) {
        double twist;
        if (tube_waves(&a->mesh->tube[t], NULL, &growing->forces[t], 1, &twist) > nothing) return true;
    }
    return false;
}

static double idle_cap(const Assembly *a, const Stress *growing)
{
    double most = 0;
    for (int t = 0; t < a->nt; t++) {
        TubeForces f = growing->forces[t];
        double twist;
        memset(f.N, 0, sizeof f.N);
        most = fmax(most, tube_waves(&a->mesh->tube[t], NULL, &f, 1, &twist));
    }
    return most > 0 ? fmax(IDLE_CAP, sqrt(IDLE_WAVES * PI * PI / most)) : IDLE_CAP;
}

void search_free(Search *s) { pencil_free(&s->pencil); }

/* A pencil good for sigma: the one at hand, or a new one. *too_short: a tube's wave is too short for the element. */
static EfStatus reach_to(EfContext *cx, const Assembly *a, const Stress *steady, const Stress *growing, double sigma,
                         ArenaMark mark, Search *s, bool *too_short)
{
    *too_short = false;
    if (s->pencil.factor && sigma <= s->pencil.reach && s->pencil.reach < 4 * sigma) return EF_OK;
    search_free(s);
    arena_rewind(&cx->tmp, mark);
    bool buckled;
    TRY(pencil_build(cx, a, steady, growing, sigma, &buckled, &s->pencil));
    if (buckled) s->outcome = EF_STEADY_BUCKLES;
    *too_short = s->pencil.mesh_error > WORST_MESH;
    return EF_OK;
}

/* The search may have built for a far higher factor than it ends at: fewer interior functions serve then. */
static EfStatus settle(EfContext *cx, const Assembly *a, const Stress *steady, const Stress *growing, double sigma,
                       ArenaMark mark, Search *s)
{
    if (s->pencil.reach < 1.2 * sigma) return EF_OK;
    bool too_short;
    search_free(s);
    TRY(reach_to(cx, a, steady, growing, sigma, mark, s, &too_short));
    return pencil_shift(cx, &s->pencil, sigma);
}

/* The count to aim at between two known counts, by the logarithm of the count. */
static double between(double lo, int clo, double hi, int chi, int target)
{
    const double f = log((target + 1.0) / (clo + 1)) / log((chi + 1.0) / (clo + 1));
    return lo + (hi - lo) * fmin(0.9, fmax(0.1, f));
}

/* Finds a shift with want <= count <= 2 want + 4, or as near to it as the element and the caps allow. */
static EfStatus find_shift(EfContext *cx, const Assembly *a, const Stress *steady, const Stress *growing, int want,
                           ArenaMark mark, Search *s)
{
    const bool pressed = compresses(a, growing);
    double sigma = fmin(clamped_bound(a, steady, growing), CAP), lo = 0, hi = INFINITY, wall = INFINITY;
    int clo = 0, chi = 0;
    const double cap = pressed ? CAP : fmin(idle_cap(a, growing), CAP);
    if (!pressed) sigma = cap;
    else if (sigma >= CAP) sigma = 1;
    for (int pass = 0; pass < 80; pass++) {
        bool too_short;
        TRY(reach_to(cx, a, steady, growing, sigma, mark, s, &too_short));
        if (s->outcome == EF_STEADY_BUCKLES) return EF_OK;
        if (too_short) {
            wall = sigma;
            sigma = lo > 0 ? (lo + sigma) / 2 : sigma / 2;
            if (lo > 0 && wall < 1.1 * lo) break;
            continue;
        }
        if (!keep_going()) return fail(cx, EF_E_TALLY, "Stopped on request.");
        TRY(pencil_shift(cx, &s->pencil, sigma));
        const int c = s->pencil.count;
        if (c >= want && c <= 2 * want + 4) return settle(cx, a, steady, growing, sigma, mark, s);
        if (c < want) lo = s->pencil.sigma, clo = c;
        else hi = s->pencil.sigma, chi = c;
        if (c < want && sigma >= cap) return EF_OK;
        if (isfinite(hi) && hi - lo < 1e-3 * hi) break; /* a cluster of factors */
        if (isfinite(hi)) sigma = between(lo, clo, hi, chi, want + 2);
        else sigma = fmin(fmin(lo * (clo == 0 ? 2 : 1.5), cap), isfinite(wall) ? (lo + wall) / 2 : cap);
        if (isfinite(wall) && wall < 1.1 * lo) break;
    }
    const double last = isfinite(hi) ? hi : lo; /* the cluster's far side, or the last shift the element can bear */
    bool too_short;
    TRY(reach_to(cx, a, steady, growing, last, mark, s, &too_short));
    return pencil_shift(cx, &s->pencil, last);
}

EfStatus search_factors(EfContext *cx, const Assembly *a, const Stress *steady, const Stress *growing, int want,
                        Search *s)
{
    *s = (Search){.outcome = EF_NONE};
    if (!loaded(a, growing)) return EF_OK;
    EfStatus st = find_shift(cx, a, steady, growing, want, arena_mark(&cx->tmp), s);
    if (st != EF_OK || s->outcome == EF_STEADY_BUCKLES) return st;
    TRY(krylov_modes(cx, &s->pencil, &s->modes));
    if (s->modes.n != s->pencil.count) s->outcome = EF_TALLY_SHORT;
    else if (s->modes.n > 0) s->outcome = EF_FOUND;
    else s->outcome = compresses(a, growing) ? EF_NONE_BELOW : EF_NONE;
    return EF_OK;
}
