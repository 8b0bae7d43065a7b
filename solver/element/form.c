/* form.c - a tube ready for the eigenproblem: interior unknowns orthonormal in the base stiffness.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "element/raw.h"

/* ---- small dense pieces --------------------------------------------------------------------------------- */

/* Cholesky of the leading m x m of B (lower, row-major, leading dimension ld); false unless positive. */
static bool cholesky(int m, int ld, double *B)
{
    for (int i = 0; i < m; i++)
        for (int j = 0; j <= i; j++) {
            double s = B[i * ld + j];
            for (int k = 0; k < j; k++) s -= B[i * ld + k] * B[j * ld + k];
            if (j < i) {
                B[i * ld + j] = s / B[j * ld + j];
                continue;
            }
            /* A diagonal that cancels to nothing is a loose tube. */
            if (!(s > 1e-11 * B[i * ld + i])) return false;
            B[i * ld + i] = sqrt(s);
        }
    return true;
}

/* M' A M for symmetric A [n][n] and M [n][c]: out [c][c]; w scratch [n][c]. */
static void congruence(int n, int c, const double *A, const double *M, double *w, double *out)
{
    memset(w, 0, (size_t)n * (size_t)c * sizeof *w);
    for (int i = 0; i < n; i++)
        for (int k = 0; k < n; k++) {
            const double a = A[i * n + k];
            if (a == 0) continue;
            for (int j = 0; j < c; j++) w[i * c + j] += a * M[k * c + j];
        }
    memset(out, 0, (size_t)c * (size_t)c * sizeof *out);
    for (int k = 0; k < n; k++)
        for (int i = 0; i < c; i++) {
            const double m = M[k * c + i];
            if (m == 0) continue;
            for (int j = 0; j < c; j++) out[i * c + j] += m * w[k * c + j];
        }
}

/* Raw unknowns from x = (ends, orthonormal interior): T [n][n]. For base matrix B with parts j (ends) and i:
 * raw_i = -Bii^-1 Bij ends + C^-T q, Bii = C C'. Kjj gets the condensed matrix. false: Bii not positive. */
static bool orthonormal(int n, const double *B, double *C, double *T, double K[END12][END12])
{
    const int m = n - END12;
    for (int i = 0; i < m; i++)
        for (int j = 0; j <= i; j++) C[i * m + j] = B[(END12 + i) * n + END12 + j];
    if (!cholesky(m, m, C)) return false;
    memset(T, 0, (size_t)n * (size_t)n * sizeof *T);
    for (int k = 0; k < END12; k++) T[k * n + k] = 1;
    for (int c = 0; c < n; c++) {
        double y[MAX_INTERIOR]; /* forward for the ends' columns, unit vectors for q; then back */
        for (int i = 0; i < m; i++) {
            y[i] = c < END12 ? -B[(END12 + i) * n + c] : i == c - END12;
            for (int k = 0; k < i && c < END12; k++) y[i] -= C[i * m + k] * y[k];
            if (c < END12) y[i] /= C[i * m + i];
        }
        for (int i = m - 1; i >= 0; i--) {
            for (int k = i + 1; k < m; k++) y[i] -= C[k * m + i] * y[k];
            y[i] /= C[i * m + i];
            T[(END12 + i) * n + c] = y[i];
        }
    }
    for (int i = 0; i < END12; i++)
        for (int j = 0; j < END12; j++) {
            K[i][j] = B[i * n + j];
            for (int k = 0; k < m; k++) K[i][j] += B[i * n + END12 + k] * T[(END12 + k) * n + j];
        }
    return true;
}

/* ---- elastic stiffness ------------------------------------------------------------------------------------ */

/* Closed form of a plain tube in its own ends. */
static void plain_stiffness(const MeshTube *t, double K[END12][END12])
{
    const double L = t->L, E = t->E;
    const EfSection *s = &t->section;
    const double diagonal[9] = {0, 4 * E * s->Iz / L, 12 * E * s->Iz / L, 0, 4 * E * s->Iy / L, 12 * E * s->Iy / L,
                                0, 4 * t->G * s->J / L, E * s->A * L};
    double A[9][END12];
    tube_coordinates(L, A);
    memset(K, 0, sizeof(double[END12][END12]));
    for (int k = 0; k < 9; k++)
        for (int i = 0; i < END12; i++)
            for (int j = 0; j < END12 && A[k][i] != 0; j++) K[i][j] += A[k][i] * diagonal[k] * A[k][j];
}

static bool plain(const MeshTube *t) { return !t->shear && !t->has_joint_parts; }

bool raw_condense(const RawTube *raw, double K[END12][END12], double *T)
{
    const int n = raw->n + raw->nfree;
    if (plain(raw->tube) && n == END12) {
        plain_stiffness(raw->tube, K);
        for (int i = 0; i < END12 * END12; i++) T[i] = i % (END12 + 1) == 0;
        return true;
    }
    double B[MAX_STATIC * MAX_STATIC] = {0}, C[MAX_STATIC * MAX_STATIC];
    raw_stiffness(raw, B);
    return orthonormal(n, B, C, T, K);
}

bool tube_stiffness(const MeshTube *t, double K[END12][END12])
{
    RawTube raw;
    double T[MAX_STATIC * MAX_STATIC];
    raw_layout(t, (TubeBasis){0, 0}, &raw);
    if (!raw_condense(&raw, K, T)) return false;
    tube_arms(t, END12, &K[0][0]);
    return true;
}

/* ---- form ------------------------------------------------------------------------------------------------- */

static EfStatus plain_form(EfContext *cx, const RawTube *raw, const TubeForces *growing, TubeForm *form)
{
    const int n = raw->n;
    form->m = n - END12;
    form->nraw = n;
    ALLOC(cx, tmp, form->G, n * n);
    raw_geometric(raw, growing, form->G);
    plain_stiffness(raw->tube, form->K);
    return EF_OK;
}

static EfStatus general_form(EfContext *cx, const RawTube *raw, const TubeForces *steady, const TubeForces *growing,
                             TubeForm *form)
{
    const int n = raw->n + raw->nfree;
    const size_t size = (size_t)n * (size_t)n;
    form->m = n - END12;
    form->nraw = n;
    ALLOC(cx, tmp, form->G, size);
    ALLOC(cx, tmp, form->raw, size);
    if (steady) ALLOC(cx, tmp, form->steady, size);
    const ArenaMark mark = arena_mark(&cx->tmp);
    double *B, *C, *Gs, *w;
    ALLOC(cx, tmp, B, size);
    ALLOC(cx, tmp, C, size);
    ALLOC(cx, tmp, Gs, size);
    ALLOC(cx, tmp, w, size);
    raw_stiffness(raw, B);
    if (steady) {
        raw_geometric(raw, steady, Gs);
        for (size_t i = 0; i < size; i++) B[i] += Gs[i];
    }
    if (!orthonormal(n, B, C, form->raw, form->K)) return steady ? EF_E_TALLY : EF_E_MECHANISM;
    if (steady) congruence(n, n, Gs, form->raw, w, form->steady);
    memset(B, 0, size * sizeof *B);
    raw_geometric(raw, growing, B);
    congruence(n, n, B, form->raw, w, form->G);
    arena_rewind(&cx->tmp, mark);
    return EF_OK;
}

EfStatus tube_form(EfContext *cx, const MeshTube *t, const TubeForces *steady, const TubeForces *growing,
                   TubeBasis basis, TubeForm *form)
{
    RawTube raw;
    raw_layout(t, basis, &raw);
    *form = (TubeForm){.basis = basis};
    TRY(plain(t) && !steady ? plain_form(cx, &raw, growing, form) : general_form(cx, &raw, steady, growing, form));
    if (!t->has_offset) return EF_OK;
    const int n = END12 + form->m;
    tube_arms(t, END12, &form->K[0][0]);
    tube_arms(t, n, form->G);
    tube_arm_stiffness(t, growing->end, n, form->G);
    if (!steady) return EF_OK;
    tube_arms(t, n, form->steady);
    tube_arm_stiffness(t, steady->end, n, form->steady);
    tube_arm_stiffness(t, steady->end, END12, &form->K[0][0]);
    return EF_OK;
}

static double quadratic(int n, const double *M, const double *x)
{
    double sum = 0;
    for (int i = 0; i < n; i++) {
        double row = 0;
        for (int j = 0; j < n; j++) row += M[i * n + j] * x[j];
        sum += row * x[i];
    }
    return sum / 2;
}

TubeEnergy tube_energy(const TubeForm *form, const double *x)
{
    const int n = END12 + form->m;
    TubeEnergy e = {.elastic = quadratic(END12, &form->K[0][0], x), .growing = quadratic(n, form->G, x)};
    for (int i = 0; i < form->m; i++) e.elastic += x[END12 + i] * x[END12 + i] / 2;
    if (form->steady) {
        e.steady = quadratic(n, form->steady, x);
        e.elastic -= e.steady;
    }
    return e;
}

void tube_line(const MeshTube *t, const TubeForm *form, const double *x, double s, double u[3])
{
    RawTube raw;
    raw_layout(t, form->basis, &raw);
    double y[MAX_RAW], e[END12], A[9][END12];
    tube_arm_ends(t, x, e); /* x's interior is relative to arm ends */
    memcpy(y, e, sizeof e);
    for (int i = END12; i < form->nraw; i++) {
        y[i] = form->raw ? 0 : x[i];
        for (int j = 0; form->raw && j < END12 + form->m; j++)
            y[i] += form->raw[i * form->nraw + j] * (j < END12 ? e[j] : x[j]);
    }
    for (int k = 0; k < raw.nfree; k++) e[raw.free_end[k]] = y[raw.n + k];
    tube_coordinates(t->L, A);
    const double xi = 2 * s - 1;
    u[0] = e[0] + s * (e[6] - e[0]);
    for (int p = 0; p < 2; p++) {
        u[1 + p] = e[1 + p];
        for (int i = 0; i < raw.nplane; i++) {
            double a = 0;
            if (i < 3)
                for (int k = 0; k < END12; k++) a += A[3 * p + i][k] * e[k];
            else
                a = y[END12 + p * (raw.nplane - 3) + i - 3];
            u[1 + p] += t->L / 2 * a * series_integral(&raw.plane[p][i].slope, xi);
        }
    }
}

/* ---- bubbles ------------------------------------------------------------------------------------------------- */

double tube_waves(const MeshTube *t, const TubeForces *steady, const TubeForces *growing, double factor, double *twist)
{
    double N = 0, M = 0;
    for (int i = 0; i < 5; i++) {
        const double xi = 0.5 * i - 1;
        double g[2], s[2] = {0, 0};
        tube_moments(growing, xi, g);
        if (steady) tube_moments(steady, xi, s);
        N = fmax(N, fabs(factor * tube_axial(growing, xi) + (steady ? tube_axial(steady, xi) : 0)));
        M = fmax(M, fmax(fabs(s[0] + factor * g[0]), fabs(s[1] + factor * g[1])));
    }
    const double EI = t->E * fmin(t->section.Iy, t->section.Iz), GJ = t->G * t->section.J;
    const double T = fabs(factor * growing->Mx + (steady ? steady->Mx : 0));
    *twist = M * M * t->L * t->L / (EI * GJ);
    return N * t->L * t->L / EI + *twist + T * T * t->L * t->L / (EI * EI);
}

/* Square of the coupling of bubble j to bubble j + 2 at wave number squared q (closed form of the Legendre
 * products), which bounds how much of the tube's matrix passes on along the chain. */
static double link(double q, int j)
{
    const double a = 2 * j + 1, b = 2 * j + 3, c = 2 * j + 5;
    return q * q / (16 * b * b * a * c);
}

static double chain_error(double waves, int bubbles)
{
    double error = 0;
    for (int first = 0; first < 2; first++) {
        double e = 1;
        for (int j = first; j <= bubbles + 1; j += 2) e *= link(waves, j);
        error += e;
    }
    return error;
}

TubeBasis tube_basis(double waves, double twist, double tolerance, double *error)
{
    TubeBasis b = {0, 0};
    double e = chain_error(waves, 0);
    while (b.bending < MAX_BUBBLES && !(e < tolerance)) e = chain_error(waves, ++b.bending);
    double et = twist * chain_error(waves, 0);
    while (b.torsion < b.bending && !(et < tolerance)) et = twist * chain_error(waves, ++b.torsion);
    if (error) *error = e + et;
    return b;
}
