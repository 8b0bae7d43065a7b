/* commands.c - check, show, new.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "cli/commands.h"

#include <errno.h>
#include <string.h>
#include <sys/stat.h>
#include <time.h>
#include <unistd.h>

#include "check/doubts.h"
#include "frame/schema.h"
#include "mesh/mesh.h"

int finish(int status)
{
    if (fflush(stdout) == 0 && !ferror(stdout)) return status;
    fprintf(stderr, "endfix: standard output could not be written: %s\n", strerror(errno));
    return 4;
}

/* ---- progress: on a terminal, once a step has taken a second ---------------------------------------------------------- */

typedef struct Watch {
    time_t start;
    bool shown;
} Watch;

static void show_progress(void *user, const char *what, double done)
{
    Watch *w = user;
    if (!isatty(STDERR_FILENO) || time(NULL) - w->start < 1) return;
    fprintf(stderr, "\r\033[K%s, %.0f %%", what, 100 * done);
    w->shown = true;
}

static void clear_progress(const Watch *w)
{
    if (w->shown) fprintf(stderr, "\r\033[K");
}

/* ---- what the commands share --------------------------------------------------------------------------------------------- */

/* Every line of the message, on stderr; its exit status. */
static int report(const EfContext *cx, EfStatus status)
{
    fprintf(stderr, "%s\n", ef_message(cx));
    return ef_exit_status(status);
}

static bool ends_with(const char *s, const char *end)
{
    const size_t n = strlen(s), m = strlen(end);
    return n > m && strcmp(s + n - m, end) == 0;
}

/* stem.results.h5 for FOLDER/stem.yaml, beside it or in --out. */
static char *results_path(EfContext *cx, const Arguments *a, const char *frame)
{
    const char *slash = strrchr(frame, '/'), *name = slash ? slash + 1 : frame, *dot = strrchr(name, '.');
    const int n = dot && dot > name ? (int)(dot - name) : (int)strlen(name);
    if (a->out) return keep_format(cx, "%s/%.*s.results.h5", a->out, n, name);
    return keep_format(cx, "%.*s%.*s.results.h5", (int)(name - frame), frame, n, name);
}

static EfStatus run_frame(EfContext *cx, const Arguments *a, const EfFrame *frame, EfResults **results)
{
    Watch watch = {.start = time(NULL)};
    EfOptions o = a->run;
    o.progress = show_progress;
    o.progress_user = &watch;
    const EfStatus st = ef_run(cx, frame, &o, results);
    clear_progress(&watch);
    return st;
}

static EfStatus store(EfContext *cx, const Arguments *a, const EfResults *results, const char *path)
{
    if (a->out && mkdir(a->out, 0777) != 0 && errno != EEXIST) return fail(cx, EF_E_IO, "Cannot make the folder %s: %s.", a->out, strerror(errno));
    return ef_write_results(cx, results, path);
}

static void print(const Arguments *a, const Document *d)
{
    if (!a->quiet) a->writer->write(stdout, d, a->units);
}

/* Cautions that stand on every run: --strict is about the others. */
static bool standing(const char *caution)
{
    return strncmp(caution, "Not a substitute", 16) == 0 || strncmp(caution, "Joints are taken as rigid", 25) == 0;
}

static int strict_status(const Arguments *a, const EfResults *r)
{
    if (r->exit_status != 0 || !a->strict) return r->exit_status;
    for (int i = 0; i < r->notes.ncaution; i++)
        if (!standing(r->notes.caution[i])) {
            fprintf(stderr, "endfix: --strict: %s\n", r->notes.caution[i]);
            return 2;
        }
    return 0;
}

/* ---- check ------------------------------------------------------------------------------------------------------------------ */

/* Sizes as converted, so that a slip of units is seen. */
static EfStatus sizes_table(EfContext *cx, const EfFrame *f, Table *t)
{
    static const Column columns[] = {{"size", Q_TEXT}, {"as written", Q_TEXT}, {"material", Q_TEXT}, {"outside", Q_LENGTH}, {"wall", Q_LENGTH},
                                     {"area mm2", Q_NUMBER}, {"Iy mm4", Q_NUMBER}, {"Iz mm4", Q_NUMBER}, {"E GPa", Q_NUMBER}, {"yield MPa", Q_NUMBER}};
    table_start(t, "sizes as read", 10, columns);
    for (int i = 0; i < f->nsize; i++) {
        const EfSize *s = &f->size[i];
        const EfMaterial *m = &f->material[s->material];
        const Cell row[] = {text_cell(s->name), text_cell(s->text), text_cell(m->name), number_cell(s->section.depth_z),
                            number_cell(s->section.wall), number_cell(s->section.A * 1e6), number_cell(s->section.Iy * 1e12),
                            number_cell(s->section.Iz * 1e12), number_cell(m->E * 1e-9), number_cell(m->yield * 1e-6)};
        TRY(table_row(cx, t, row));
    }
    return EF_OK;
}

static EfStatus doubts_table(EfContext *cx, const EfFrame *f, Table *t, int *n)
{
    static const Column columns[] = {{"doubt", Q_TEXT}};
    const char **text;
    table_start(t, "doubts: look at these before trusting the numbers", 1, columns);
    TRY(frame_doubts(cx, f, n, &text));
    for (int i = 0; i < *n; i++) TRY(table_row(cx, t, (const Cell[]){text_cell(text[i])}));
    if (*n == 0) TRY(table_row(cx, t, (const Cell[]){text_cell("none")}));
    return EF_OK;
}

static EfStatus input_screen(EfContext *cx, const Arguments *a, const EfFrame *f, Document *d, int *doubts)
{
    Mesh mesh;
    EfFrame without = *f; /* weights do not need a solver that knows guys */
    EfResults r = {.frame = f};
    without.nguy = 0;
    TRY(mesh_build(cx, &without, &mesh));
    ALLOC(cx, keep, r.length, mesh.nt);
    ALLOC(cx, keep, r.tube_mass, mesh.nt);
    for (int t = 0; t < mesh.nt; t++) r.length[t] = mesh.tube[t].joint_length, r.tube_mass[t] = mesh.tube[t].mass_per_length * mesh.tube[t].L;
    r.mass = mesh.mass, r.tubes_mass = mesh.tubes_mass;
    memcpy(r.centre_of_mass, mesh.centre_of_mass, sizeof r.centre_of_mass);
    *d = (Document){0};
    d->head[d->nhead++] = keep_format(cx, "%s: %d joints, %d tubes, %d guys, %d supports, %d cases, %d combinations, %.4g kg%s",
                                      f->title ? f->title : f->path, f->njoint, f->ntube, f->nguy, f->nsupport, f->ncase, f->ncombination,
                                      mesh.mass, mesh.free_body ? ", free body" : "");
    if (!d->head[0]) return cx->status;
    TRY(table_named("weights")->build(cx, &r, &a->filter, &d->table[d->ntable++]));
    TRY(sizes_table(cx, f, &d->table[d->ntable++]));
    return doubts_table(cx, f, &d->table[d->ntable++], doubts);
}

static int check_input(EfContext *cx, const Arguments *a, const EfFrame *frame)
{
    Document d;
    int doubts = 0;
    const EfStatus st = input_screen(cx, a, frame, &d, &doubts);
    if (st != EF_OK) return report(cx, st);
    print(a, &d);
    return a->strict && doubts > 0 ? 2 : 0;
}

static int check_frame(EfContext *cx, const Arguments *a)
{
    EfFrame *frame;
    EfResults *results;
    Document d;
    EfStatus st = ef_read_frame(cx, a->word[1], &frame);
    if (st != EF_OK) return report(cx, st);
    if (a->input_only) return check_input(cx, a, frame);
    const char *path = results_path(cx, a, a->word[1]);
    if (!path) return report(cx, cx->status);
    st = run_frame(cx, a, frame, &results);
    if (st == EF_OK) st = store(cx, a, results, path);
    if (st == EF_OK) st = check_screen(cx, results, &a->filter, &d);
    if (st != EF_OK) return report(cx, st);
    d.foot[d.nfoot++] = keep_format(cx, "results      %s", path);
    if (!d.foot[0]) return report(cx, cx->status);
    print(a, &d);
    return strict_status(a, results);
}

int command_check(const Arguments *a)
{
    if (a->nword != 2) {
        fprintf(stderr, "endfix: check takes one frame file: endfix check FRAME\n");
        return 2;
    }
    EfContext *cx = ef_open();
    if (!cx) return 4;
    const int status = check_frame(cx, a);
    ef_close(cx);
    return finish(status);
}

/* ---- show ---------------------------------------------------------------------------------------------------------------------- */

/* Results of a frame: stored ones while they belong to the file as it is, else a new run. */
static EfStatus results_of(EfContext *cx, const Arguments *a, const char *path, EfResults **results)
{
    if (ends_with(path, ".h5")) return ef_read_results(cx, path, results);
    EfFrame *frame;
    TRY(ef_read_frame(cx, path, &frame));
    const char *stored = results_path(cx, a, path);
    if (!stored) return cx->status;
    const bool plain = a->run.count == 0 && !a->run.both_signs && !(a->run.guess_c > 0) && !a->run.only_case;
    EfContext *other = plain && access(stored, R_OK) == 0 ? ef_open() : NULL; /* a bad file is only stale */
    EfResults *old = NULL;
    const bool fresh = other && ef_read_results(other, stored, &old) == EF_OK && strcmp(old->frame->input_sha256, frame->input_sha256) == 0;
    ef_close(other);
    if (fresh) return ef_read_results(cx, stored, results);
    TRY(run_frame(cx, a, frame, results));
    if (!plain) return EF_OK;
    fprintf(stderr, "endfix: %s was missing or stale; the frame was run and stored there\n", stored);
    return store(cx, a, *results, stored);
}

static int show_table(EfContext *cx, const Arguments *a, const TableKind *kind)
{
    EfResults *results;
    Document d = {.ntable = 1};
    EfStatus st = results_of(cx, a, a->word[2], &results);
    if (st == EF_OK) st = kind->build(cx, results, &a->filter, &d.table[0]);
    if (st != EF_OK) return report(cx, st);
    const EfFrame *f = results->frame;
    d.head[d.nhead++] = f->title ? f->title : f->path;
    d.notes = &results->notes;
    print(a, &d);
    return strict_status(a, results);
}

int command_show(const Arguments *a)
{
    const TableKind *kind = a->nword > 1 ? table_named(a->word[1]) : NULL;
    if (a->nword != 3 || !kind) {
        fprintf(stderr, "endfix: show takes a table and a frame or results file; tables are");
        for (size_t i = 0; table_kind(i); i++) fprintf(stderr, " %s", table_kind(i)->name);
        fprintf(stderr, "\n");
        return 2;
    }
    EfContext *cx = ef_open();
    if (!cx) return 4;
    const int status = show_table(cx, a, kind);
    ef_close(cx);
    return finish(status);
}

/* ---- new ------------------------------------------------------------------------------------------------------------------------- */

int command_new(const Arguments *a)
{
    EfContext *cx = ef_open();
    if (!cx) return 4;
    const char *text = a->schema ? frame_schema(cx) : frame_sample();
    const int status = text ? 0 : report(cx, cx->status);
    if (text) fputs(text, stdout);
    ef_close(cx);
    return finish(status);
}
