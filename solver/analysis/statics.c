/* statics.c - first-order answers of all runs, RHS columns at a time.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "analysis/statics.h"

#include <math.h>
#include <string.h>

/* One load vector waiting for its answer. */
typedef struct Task {
    const Run *run;
    const Loads *loads;
    bool with_movement;
    Answer *answer;
} Task;

static bool has_movement(const Mesh *mesh)
{
    for (int j = 0; mesh->movement && j < mesh->nj; j++)
        for (int s = 0; s < 6; s++)
            if (mesh->movement[j][s] != 0) return true;
    return false;
}

/* The load vector in the joints' axes. Movement of supports becomes loads -K x0 on what is free. */
static EfStatus load_vector(EfContext *cx, const Assembly *a, const Task *task, double *f)
{
    const Mesh *mesh = a->mesh;
    assembly_to_axes(a, task->loads->joint, f);
    for (int t = 0; t < a->nt; t++) {
        double local[END12];
        if (!tube_load(&mesh->tube[t], &task->loads->tube[t], local))
            return fail(cx, EF_E_MECHANISM, "Tube %s is loose by its own releases.", mesh->frame->tube[t].name);
        assembly_scatter(a, t, local, f, 1);
    }
    if (!task->with_movement) return EF_OK;
    const ArenaMark mark = arena_mark(&cx->tmp);
    double *y;
    ALLOC(cx, tmp, y, 6 * a->nj);
    block_multiply(&mesh->pattern, a->elastic, &mesh->movement[0][0], y, 1);
    for (int i = 0; i < 6 * a->nj; i++) f[i] -= y[i];
    arena_rewind(&cx->tmp, mark);
    return EF_OK;
}

/* A moment on a rotation that nothing resists has no answer. */
static EfStatus check_idle(EfContext *cx, const Assembly *a, const Run *run, const double *f)
{
    double largest = 0;
    for (int i = 0; i < 6 * a->nj; i++) largest = fmax(largest, fabs(f[i]));
    for (int j = 0; j < a->nj; j++)
        for (int s = 3; s < 6; s++)
            if ((a->idle[j] >> s & 1) && fabs(f[6 * j + s]) > 1e-9 * largest) {
                const double *axis = a->axes[j][1][s - 3];
                return fail(cx, EF_E_MECHANISM,
                            "Joint %s can spin about (%.3g, %.3g, %.3g) and case %s puts a moment of %.4g N m on it. "
                            "Take the moment away or release less at the tube ends.",
                            a->mesh->frame->joint[j].name, axis[0], axis[1], axis[2], run->name, f[6 * j + s]);
            }
    return EF_OK;
}

static EfStatus take_answer(EfContext *cx, const Assembly *a, const Task *task, const double *x, int column)
{
    const Mesh *mesh = a->mesh;
    Answer *answer = task->answer;
    ALLOC(cx, keep, answer->x, 6 * a->nj);
    ALLOC(cx, keep, answer->forces, a->nt);
    for (int i = 0; i < 6 * a->nj; i++) answer->x[i] = x[i * RHS + column];
    if (task->with_movement)
        for (int i = 0; i < 6 * a->nj; i++) answer->x[i] += (&mesh->movement[0][0])[i];
    for (int t = 0; t < a->nt; t++) {
        double d[END12];
        assembly_gather(a, t, answer->x, d, 1);
        if (!tube_forces(&mesh->tube[t], &task->loads->tube[t], d, &answer->forces[t]))
            return fail(cx, EF_E_MECHANISM, "Tube %s is loose by its own releases.", mesh->frame->tube[t].name);
    }
    return EF_OK;
}

/* Up to RHS tasks in one block solve, improved once by the residual. */
static EfStatus solve_block(EfContext *cx, const Assembly *a, const unsigned *held, const double *K, const Factor *factor,
                            int n, const Task *task)
{
    double *f, *b, *x, *r;
    const int rows = 6 * a->nj;
    ALLOC(cx, tmp, f, rows);
    ALLOC(cx, tmp, b, rows * RHS);
    ALLOC(cx, tmp, x, rows * RHS);
    ALLOC(cx, tmp, r, rows * RHS);
    for (int c = 0; c < n; c++) {
        memset(f, 0, (size_t)rows * sizeof *f);
        TRY(load_vector(cx, a, &task[c], f));
        TRY(check_idle(cx, a, task[c].run, f));
        for (int i = 0; i < rows; i++) b[i * RHS + c] = f[i];
    }
    assembly_clear_held(a, held, b, RHS);
    memcpy(x, b, (size_t)(rows * RHS) * sizeof *x);
    TRY(factor_solve(cx, factor, x, RHS));
    block_multiply(&a->mesh->pattern, K, x, r, RHS);
    for (int i = 0; i < rows * RHS; i++) r[i] = b[i] - r[i];
    TRY(factor_solve(cx, factor, r, RHS));
    for (int i = 0; i < rows * RHS; i++) x[i] += r[i];
    for (int c = 0; c < n; c++) TRY(take_answer(cx, a, &task[c], x, c));
    return EF_OK;
}

static EfStatus solve_tasks(EfContext *cx, const Assembly *a, int ntask, const Task *task, Factor *factor)
{
    unsigned *held;
    double *K;
    TRY(assembly_held_with_base(cx, a, 63, &held));
    TRY(mechanism_check(cx, a, held, factor));
    ALLOC(cx, tmp, K, a->nvalue);
    memcpy(K, a->elastic, (size_t)a->nvalue * sizeof *K);
    assembly_hold(a, held, K);
    for (int i = 0; i < ntask; i += RHS) {
        const ArenaMark mark = arena_mark(&cx->tmp);
        TRY(solve_block(cx, a, held, K, factor, ntask - i < RHS ? ntask - i : RHS, task + i));
        arena_rewind(&cx->tmp, mark);
    }
    return EF_OK;
}

EfStatus statics_solve(EfContext *cx, const Assembly *a, int nrun, const Run *run, State **states)
{
    const ArenaMark mark = arena_mark(&cx->tmp);
    const bool movement = has_movement(a->mesh);
    Task *task;
    int n = 0;
    ALLOC(cx, keep, *states, nrun);
    ALLOC(cx, tmp, task, 2 * nrun);
    for (int i = 0; i < nrun; i++) {
        State *s = &(*states)[i];
        s->run = &run[i];
        task[n++] = (Task){&run[i], &run[i].growing, false, &s->growing};
        if (run[i].has_steady || movement) task[n++] = (Task){&run[i], &run[i].steady, movement, &s->steady};
    }
    Factor *factor = NULL;
    EfStatus st = factor_new(cx, a->analysis, &factor);
    if (st == EF_OK) st = solve_tasks(cx, a, n, task, factor);
    factor_free(factor);
    arena_rewind(&cx->tmp, mark);
    return st;
}
