/* doubts.c - the registry of doubts: one row and one function each.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "check/doubts.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

enum { PER_KIND = 12, MOST = 200 };

typedef struct Doubts {
    EfContext *cx;
    const EfFrame *f;
    int n, of_kind;
    const char **text;
    double *L;            /* [ntube] joint to joint */
    double (*along)[3];   /* [ntube] unit vectors */
    int *first, *tube_at; /* tubes of a joint: tube_at[first[j] .. first[j + 1]) */
} Doubts;

#define DOUBT(d, ...) add((d), (d)->of_kind++ < PER_KIND ? keep_format((d)->cx, __VA_ARGS__) : "")

static void add(Doubts *d, const char *line)
{
    if (line && line[0] && d->n < MOST) d->text[d->n++] = line;
}

static const EfSection *section(const Doubts *d, int t) { return &d->f->size[d->f->tube[t].size].section; }

/* Smaller outside size; of a size given by values the diameter of a rod of its area. */
static double thickness(const Doubts *d, int t)
{
    const EfSection *s = section(d, t);
    if (!isnan(s->depth_y) && !isnan(s->depth_z)) return fmin(s->depth_y, s->depth_z);
    return sqrt(4 * s->A / 3.14159265358979323846);
}

/* ---- joints ------------------------------------------------------------------------------------------------------------ */

static bool supported(const Doubts *d, int j)
{
    for (int s = 0; s < d->f->nsupport; s++)
        if (d->f->support[s].joint == j) return true;
    for (int g = 0; g < d->f->nguy; g++)
        if (d->f->guy[g].end[0] == j || d->f->guy[g].end[1] == j) return true;
    return false;
}

static void loose_joints(Doubts *d)
{
    for (int j = 0; j < d->f->njoint; j++) {
        const int n = d->first[j + 1] - d->first[j];
        if (n > 1 || supported(d, j)) continue;
        DOUBT(d, "Joint %s is loose: %s reaches it. Connect it, or take it out.", d->f->joint[j].name, n ? "one tube only" : "no tube");
    }
}

static void narrow_angles(Doubts *d)
{
    for (int j = 0; j < d->f->njoint; j++)
        for (int a = d->first[j]; a < d->first[j + 1]; a++)
            for (int b = a + 1; b < d->first[j + 1]; b++) {
                const int p = d->tube_at[a], q = d->tube_at[b];
                const double *u = d->along[p], *v = d->along[q];
                const double sign = (d->f->tube[p].end[0] == j) == (d->f->tube[q].end[0] == j) ? 1 : -1;
                const double angle = acos(fmax(-1, fmin(1, sign * (u[0] * v[0] + u[1] * v[1] + u[2] * v[2])))) * 57.29577951308232;
                if (angle < 30 - 1e-9 && angle > 1e-6)
                    DOUBT(d, "Tubes %s and %s meet under %.0f degrees at joint %s: under 30 they can hardly be welded.",
                          d->f->tube[p].name, d->f->tube[q].name, angle, d->f->joint[j].name);
            }
}

/* ---- tubes against each other ------------------------------------------------------------------------------------------ */

static void doubled_tubes(Doubts *d)
{
    for (int j = 0; j < d->f->njoint; j++)
        for (int a = d->first[j]; a < d->first[j + 1]; a++)
            for (int b = a + 1; b < d->first[j + 1]; b++) {
                const EfTube *p = &d->f->tube[d->tube_at[a]], *q = &d->f->tube[d->tube_at[b]];
                const bool same = (p->end[0] == q->end[0] && p->end[1] == q->end[1]) || (p->end[0] == q->end[1] && p->end[1] == q->end[0]);
                if (same && j == (p->end[0] < p->end[1] ? p->end[0] : p->end[1]))
                    DOUBT(d, "Tubes %s and %s join the same two joints. Take one out if it was drawn twice.", p->name, q->name);
            }
}

/* Closest distance of two segments (Sunday's clamped solution of the two-line problem, written out). */
static double segment_distance(const double a[3], const double b[3], const double c[3], const double e[3])
{
    double u[3], v[3], w[3], A = 0, B = 0, C = 0, D = 0, E = 0;
    for (int i = 0; i < 3; i++) {
        u[i] = b[i] - a[i], v[i] = e[i] - c[i], w[i] = a[i] - c[i];
        A += u[i] * u[i], B += u[i] * v[i], C += v[i] * v[i], D += u[i] * w[i], E += v[i] * w[i];
    }
    const double det = A * C - B * B;
    double s = det > 1e-12 * A * C ? fmin(1, fmax(0, (B * E - C * D) / det)) : 0;
    double t = (B * s + E) / C;
    if (t < 0 || t > 1) {
        t = t < 0 ? 0 : 1;
        s = fmin(1, fmax(0, (B * t - D) / A));
    }
    double sum = 0;
    for (int i = 0; i < 3; i++) {
        const double gap = w[i] + s * u[i] - t * v[i];
        sum += gap * gap;
    }
    return sqrt(sum);
}

/* Extents along x, for a sweep. */
typedef struct Span {
    double lo, hi;
    int tube;
} Span;

static int by_start(const void *a, const void *b)
{
    const Span *x = a, *y = b;
    if (x->lo != y->lo) return x->lo < y->lo ? -1 : 1;
    return (x->tube > y->tube) - (x->tube < y->tube);
}

static bool apart(const double a[3], const double b[3], const double c[3], const double e[3], double gap)
{
    for (int i = 1; i < 3; i++)
        if (fmax(a[i], b[i]) + gap < fmin(c[i], e[i]) || fmax(c[i], e[i]) + gap < fmin(a[i], b[i])) return true;
    return false;
}

static void look_at_pair(Doubts *d, int p, int q)
{
    const EfTube *a = &d->f->tube[p], *b = &d->f->tube[q];
    if (a->end[0] == b->end[0] || a->end[0] == b->end[1] || a->end[1] == b->end[0] || a->end[1] == b->end[1]) return;
    const double *x[4] = {d->f->joint[a->end[0]].x, d->f->joint[a->end[1]].x, d->f->joint[b->end[0]].x, d->f->joint[b->end[1]].x};
    const double touch = (thickness(d, p) + thickness(d, q)) / 2;
    if (apart(x[0], x[1], x[2], x[3], touch)) return;
    const double gap = segment_distance(x[0], x[1], x[2], x[3]);
    if (gap < touch)
        DOUBT(d, "Tubes %s and %s cross without meeting: their axes come within %.3g mm. Add a joint there, or part them.", a->name, b->name, gap * 1e3);
}

static void crossing_tubes(Doubts *d)
{
    const int nt = d->f->ntube;
    Span *span = arena_take(d->cx, &d->cx->tmp, (size_t)nt, sizeof *span);
    double thickest = 0;
    if (!span) return;
    for (int t = 0; t < nt; t++) {
        const double a = d->f->joint[d->f->tube[t].end[0]].x[0], b = d->f->joint[d->f->tube[t].end[1]].x[0];
        span[t] = (Span){fmin(a, b), fmax(a, b), t};
        thickest = fmax(thickest, thickness(d, t));
    }
    qsort(span, (size_t)nt, sizeof *span, by_start);
    for (int i = 0; i < nt; i++)
        for (int k = i + 1; k < nt && span[k].lo <= span[i].hi + thickest; k++) {
            const int p = span[i].tube, q = span[k].tube;
            look_at_pair(d, p < q ? p : q, p < q ? q : p);
        }
}

/* ---- single tubes ---------------------------------------------------------------------------------------------------------- */

static void short_tubes(Doubts *d)
{
    for (int t = 0; t < d->f->ntube; t++)
        if (d->L[t] < 3 * thickness(d, t))
            DOUBT(d, "Tube %s is %.3g mm long, less than 3 times its size of %.3g mm: a beam is a poor model of it.", d->f->tube[t].name,
                  d->L[t] * 1e3, thickness(d, t) * 1e3);
}

static void slender_tubes(Doubts *d)
{
    for (int t = 0; t < d->f->ntube; t++) {
        const EfSection *s = section(d, t);
        const double slenderness = d->L[t] / sqrt(fmin(s->Iy, s->Iz) / s->A);
        if (slenderness > 200) DOUBT(d, "Tube %s has slenderness %.0f, over 200: hardly fit for compression.", d->f->tube[t].name, slenderness);
        else if (slenderness > 150) DOUBT(d, "Tube %s has slenderness %.0f, over 150.", d->f->tube[t].name, slenderness);
    }
}

static void thin_walls(Doubts *d)
{
    for (int i = 0; i < d->f->nsize; i++) {
        const EfSection *s = &d->f->size[i].section;
        if (s->round && s->wall > 0 && s->depth_y > 50 * s->wall)
            DOUBT(d, "Size %s has D/t %.0f, over 50: its wall may buckle first, which is not checked.", d->f->size[i].name, s->depth_y / s->wall);
    }
}

/* ---- magnitudes ----------------------------------------------------------------------------------------------------------------- */

static void unit_slips(Doubts *d)
{
    double extent = 0, thick = 0;
    for (int t = 0; t < d->f->ntube; t++) extent = fmax(extent, d->L[t]), thick = fmax(thick, thickness(d, t));
    if (extent > 200) DOUBT(d, "The longest tube is %.4g m long. Is the unit of length right?", extent);
    if (extent > 0 && extent < 0.02) DOUBT(d, "The longest tube is %.3g mm long. Is the unit of length right?", extent * 1e3);
    if (thick > 1) DOUBT(d, "The thickest tube measures %.4g m across. Is the unit of its size right?", thick);
    for (int t = 0; t < d->f->ntube; t++)
        if (d->L[t] > 1000 * thickness(d, t) || thickness(d, t) > d->L[t])
            DOUBT(d, "Tube %s is %.4g mm long and %.4g mm thick. Are both in the unit meant?", d->f->tube[t].name, d->L[t] * 1e3, thickness(d, t) * 1e3);
    for (int i = 0; i < d->f->nmaterial; i++) {
        const EfMaterial *m = &d->f->material[i];
        if (!(m->E > 1e9 && m->E < 1e12)) DOUBT(d, "Material %s has E %.4g GPa. Is the unit right?", m->name, m->E * 1e-9);
        if (m->yield < 1e7 || m->yield > 5e9) DOUBT(d, "Material %s has yield %.4g MPa. Is the unit right?", m->name, m->yield * 1e-6);
        if (!(m->density > 300 && m->density < 25000)) DOUBT(d, "Material %s has density %.4g kg/m3. Is the unit right?", m->name, m->density);
    }
}

static void free_inertia(Doubts *d)
{
    for (int s = 0; s < d->f->nsupport; s++) {
        if (d->f->support[s].held) return;
        for (int i = 0; i < EF_DIRECTIONS; i++)
            if (d->f->support[s].spring[i] > 0) return;
    }
    for (int c = 0; c < d->f->ncase; c++)
        for (int l = 0; l < d->f->cases[c].nload; l++)
            if (d->f->cases[c].load[l].kind == EF_LOAD_INERTIA)
                DOUBT(d, "Case %s has `inertia`, but the frame is free: inertia there balances itself and does nothing.", d->f->cases[c].name);
}

/* ---- the registry ----------------------------------------------------------------------------------------------------------------- */

static const struct {
    const char *name;
    void (*find)(Doubts *d);
} kinds[] = {{"loose joint", loose_joints},     {"doubled tube", doubled_tubes},   {"crossing tubes", crossing_tubes},
             {"narrow angle", narrow_angles},   {"short tube", short_tubes},       {"unit slip", unit_slips},
             {"slender tube", slender_tubes},   {"thin wall", thin_walls},         {"inertia of a free body", free_inertia}};

/* Lengths, directions, and the tubes of every joint. */
static EfStatus prepare(Doubts *d)
{
    EfContext *cx = d->cx;
    const EfFrame *f = d->f;
    ALLOC(cx, tmp, d->L, f->ntube);
    ALLOC(cx, tmp, d->along, f->ntube);
    ALLOC(cx, tmp, d->first, f->njoint + 2);
    ALLOC(cx, tmp, d->tube_at, 2 * f->ntube);
    for (int t = 0; t < f->ntube; t++) {
        const double *a = f->joint[f->tube[t].end[0]].x, *b = f->joint[f->tube[t].end[1]].x;
        d->L[t] = hypot(hypot(b[0] - a[0], b[1] - a[1]), b[2] - a[2]);
        for (int i = 0; i < 3; i++) d->along[t][i] = d->L[t] > 0 ? (b[i] - a[i]) / d->L[t] : 0;
        for (int e = 0; e < 2; e++) d->first[f->tube[t].end[e] + 2]++;
    }
    for (int j = 0; j < f->njoint; j++) d->first[j + 2] += d->first[j + 1];
    for (int t = 0; t < f->ntube; t++)
        for (int e = 0; e < 2; e++) d->tube_at[d->first[f->tube[t].end[e] + 1]++] = t;
    return EF_OK;
}

EfStatus frame_doubts(EfContext *cx, const EfFrame *frame, int *n, const char ***text)
{
    Doubts d = {.cx = cx, .f = frame};
    ALLOC(cx, keep, d.text, MOST);
    const ArenaMark mark = arena_mark(&cx->tmp);
    TRY(prepare(&d));
    for (size_t k = 0; k < sizeof kinds / sizeof *kinds; k++) {
        d.of_kind = 0;
        kinds[k].find(&d);
        if (d.of_kind > PER_KIND) add(&d, keep_format(cx, "%s: and %d more.", kinds[k].name, d.of_kind - PER_KIND));
        if (cx->status != EF_OK) return cx->status;
    }
    arena_rewind(&cx->tmp, mark);
    *n = d.n;
    *text = d.text;
    return EF_OK;
}
