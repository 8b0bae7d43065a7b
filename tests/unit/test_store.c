/* test_store.c - results files: all fields come back bit for bit, equal results give equal bytes, a failed write leaves
 * the old file, damaged files are refused in one line.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "support/check.h"

#include <dirent.h>
#include <errno.h>
#include <signal.h>
#include <stdlib.h>
#include <string.h>
#include <sys/resource.h>
#include <sys/stat.h>
#include <unistd.h>

#include "endfix/run.h"
#include "store/file.h"
#include "store/store.h"
#include "support/build_frame.h"
#include "support/random_results.h"

static char folder[] = "store-XXXXXX";

static const char *in_folder(EfContext *cx, const char *name) { return keep_format(cx, "%s/%s", folder, name); }

static int enter(void **state)
{
    (void)state;
    signal(SIGXFSZ, SIG_IGN);
    return mkdtemp(folder) ? 0 : -1;
}

static int files_in_folder(void)
{
    DIR *d = opendir(folder);
    assert_non_null(d);
    int n = 0;
    for (struct dirent *e = readdir(d); e; e = readdir(d)) n += e->d_name[0] != '.';
    closedir(d);
    return n;
}

static int leave(void **state)
{
    (void)state;
    DIR *d = opendir(folder);
    if (!d) return -1;
    for (struct dirent *e = readdir(d); e; e = readdir(d)) {
        char path[600];
        snprintf(path, sizeof path, "%s/%s", folder, e->d_name);
        if (e->d_name[0] != '.') unlink(path);
    }
    closedir(d);
    return rmdir(folder);
}

static void one_line(const EfContext *cx, EfStatus st, const char *has)
{
    assert_int_equal(st, EF_E_IO);
    const char *text = ef_message(cx);
    if (!strstr(text, has)) FAIL("\"%s\" does not say \"%s\"", text, has);
    assert_null(strchr(text, '\n'));
}

/* ---- the tables ------------------------------------------------------------------------------------------------------- */

/* Bytes of a struct that no row describes: padding, and nothing else. */
static size_t undescribed(const Table *table)
{
    unsigned char seen[4096] = {0};
    assert_true(table->size <= sizeof seen);
    for (int r = 0; r < table->nrow; r++) {
        const Row *row = &table->row[r];
        size_t bytes = sizeof(void *);
        if (row->kind == ROW_COUNT) bytes = sizeof(int);
        if (row->kind == ROW_GROUP) bytes = row->table->size;
        if (row->kind == ROW_IN) {
            bytes = value_size(row->type);
            for (int i = 0; i < ROW_DIMS && row->dim[i] > 0; i++) bytes *= (size_t)row->dim[i];
        }
        if (row->kind != ROW_NAMED) /* its names and pointer belong to the list before it */
            for (size_t i = 0; i < bytes; i++) {
                if (seen[row->offset + i]) FAIL("%s: described twice", row->path ? row->path : "a count");
                seen[row->offset + i] = 1;
            }
    }
    size_t n = 0;
    for (size_t i = 0; i < table->size; i++) n += !seen[i];
    return n;
}

static const Table *table_of(const Table *in, const char *path)
{
    for (int i = 0; i < in->nrow; i++)
        if (in->row[i].path && strcmp(in->row[i].path, path) == 0 && in->row[i].table) return in->row[i].table;
    FAIL("no table %s", path);
    return NULL;
}

/* The numbers are the padding of each struct on a machine with 8-byte pointers; a field without a row adds to them. */
static void every_field_has_a_row(void **state)
{
    (void)state;
    const Table *of_case = table_of(&results_table, "cases"), *cases = table_of(&frame_table, "frame/cases");
    const struct {
        const char *name;
        const Table *table;
        size_t padding;
    } list[] = {
        {"material", table_of(&frame_table, "frame/materials"), 6}, {"size", table_of(&frame_table, "frame/sizes"), 4 + 7},
        {"joint", table_of(&frame_table, "frame/joints"), 0}, {"tube", table_of(&frame_table, "frame/tubes"), 4},
        {"guy", table_of(&frame_table, "frame/guys"), 0}, {"support", table_of(&frame_table, "frame/supports"), 7},
        {"equipment", table_of(&frame_table, "frame/equipment"), 4}, {"case", cases, 4 + 3}, {"load", table_of(cases, "load"), 3},
        {"combination", table_of(&frame_table, "frame/combinations"), 4 + 3}, {"hand", table_of(&frame_table, "frame/hand"), 0},
        {"frame", &frame_table, 6}, {"critical", table_of(of_case, "critical"), 0}, {"fixity", table_of(of_case, "fixity"), 0},
        {"margin", table_of(of_case, "margins"), 4 + 4}, {"ledger", table_of(of_case, "ledger"), 4 + 4 + 7},
        /* the name of a case result is that of its group, the frame of the results its own table */
        {"case result", of_case, sizeof(char *) + 43}, {"results", &results_table, sizeof(EfFrame *) + 16},
    };
    for (size_t i = 0; i < sizeof list / sizeof *list; i++)
        if (undescribed(list[i].table) != list[i].padding)
            FAIL("%s: %zu bytes of the struct have no row, its padding is %zu", list[i].name, undescribed(list[i].table), list[i].padding);
}

/* ---- there and back ----------------------------------------------------------------------------------------------------- */

static void all_fields_come_back(void **state)
{
    (void)state;
    for (uint64_t stream = 1; stream <= 12; stream++) {
        EfContext *cx = ef_open(), *other = ef_open();
        const EfResults *r = random_results(cx, stream, stream == 12 ? 4000 : 5);
        const char *path = in_folder(cx, "all.results.h5");
        EfResults *back = NULL;
        CHECK_OK(cx, ef_write_results(cx, r, path));
        CHECK_OK(other, ef_read_results(other, path, &back));
        check_same_results(r, back);
        ef_close(other);
        ef_close(cx);
    }
    assert_int_equal(files_in_folder(), 1);
}

/* A real run: tie of the tables to what the engine leaves behind. */
static void a_run_comes_back(void **state)
{
    (void)state;
    EfContext *cx = ef_open(), *other = ef_open();
    EfFrame *f = frame_new(cx);
    const int size = frame_round(cx, f, 0.02, 0.001);
    const double at[4][3] = {{0, 0, 0}, {1, 0, 0}, {0, 1, 0}, {0.3, 0.3, 1}}, push[3] = {50, 0, -2000};
    for (int i = 0; i < 4; i++) frame_joint(cx, f, at[i][0], at[i][1], at[i][2]);
    for (int i = 0; i < 3; i++) frame_support(cx, f, i, HOLD_PINNED), frame_tube(cx, f, i, 3, size);
    frame_tube(cx, f, 0, 1, size);
    const int hoist = frame_case(cx, f, "hoist"), top = 3;
    frame_push(cx, f, hoist, 1, &top, push);
    EfResults *r, *back;
    CHECK_OK(cx, ef_run(cx, f, &(EfOptions){.both_signs = true}, &r));
    CHECK_OK(cx, ef_write_results(cx, r, in_folder(cx, "run.h5")));
    CHECK_OK(other, ef_read_results(other, in_folder(cx, "run.h5"), &back));
    f->path = back->frame->path;
    check_same_results(r, back);
    assert_true(back->cases[0].critical.nmode > 0);
    ef_close(other);
    ef_close(cx);
}

static void equal_results_equal_bytes(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    const EfResults *r = random_results(cx, 3, 3000), *again = random_results(cx, 3, 3000);
    unsigned char *a, *b;
    size_t n, m;
    CHECK_OK(cx, store_pack(cx, "a", r, &a, &n));
    sleep(2); /* HDF5 keeps times in seconds */
    CHECK_OK(cx, store_pack(cx, "b", again, &b, &m));
    assert_int_equal(n, m);
    assert_memory_equal(a, b, n);
    ef_close(cx);
}

/* ---- failing writes ----------------------------------------------------------------------------------------------------- */

static void check_text(const char *path, const char *want)
{
    char got[100] = {0};
    FILE *f = fopen(path, "rb");
    assert_non_null(f);
    assert_int_equal(fread(got, 1, sizeof got - 1, f), strlen(want));
    fclose(f);
    assert_string_equal(got, want);
}

static void files_are_replaced(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    const char *path = in_folder(cx, "text"), *link = in_folder(cx, "link");
    CHECK_OK(cx, file_replace(cx, path, "old", 3));
    chmod(path, 0640);
    assert_int_equal(symlink("text", link), 0);
    CHECK_OK(cx, file_replace(cx, link, "newer", 5));
    check_text(path, "newer");
    struct stat is;
    assert_int_equal(lstat(link, &is), 0);
    assert_true(S_ISLNK(is.st_mode));
    assert_int_equal(stat(path, &is), 0);
    assert_int_equal(is.st_mode & 0777, 0640);
    CHECK_OK(cx, file_replace(cx, "/dev/null", "gone", 4));
    assert_int_equal(stat("/dev/null", &is), 0);
    assert_true(S_ISCHR(is.st_mode));
    ef_close(cx);
}

static void old_file_survives(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    const EfResults *r = random_results(cx, 5, 3000);
    const char *path = in_folder(cx, "kept.h5");
    CHECK_OK(cx, file_replace(cx, path, "old", 3));
    const int files = files_in_folder();
    struct rlimit limit, small = {.rlim_cur = 1 << 14, .rlim_max = RLIM_INFINITY};
    getrlimit(RLIMIT_FSIZE, &limit);
    small.rlim_max = limit.rlim_max;
    setrlimit(RLIMIT_FSIZE, &small);
    const EfStatus st = ef_write_results(cx, r, path);
    setrlimit(RLIMIT_FSIZE, &limit);
    one_line(cx, st, strerror(EFBIG));
    check_text(path, "old");
    assert_int_equal(files_in_folder(), files);
    ef_close(cx);
}

static void places_that_cannot_be_written(void **state)
{
    (void)state;
    const struct {
        const char *path;
        int error;
    } list[] = {{"/dev/full", ENOSPC}, {"no-such-folder/x.h5", ENOENT}, {".", EISDIR}};
    for (size_t i = 0; i < sizeof list / sizeof *list; i++) {
        EfContext *cx = ef_open();
        const EfResults *r = random_results(cx, 1, 5);
        one_line(cx, ef_write_results(cx, r, list[i].path), strerror(list[i].error));
        ef_close(cx);
    }
}

static void case_names_that_cannot_be_groups(void **state)
{
    (void)state;
    const char *const name[] = {".", "..", "", "a/b"};
    for (int i = 0; i < 4; i++) {
        EfContext *cx = ef_open();
        EfResults *r = random_results(cx, 9, 5);
        assert_true(r->ncase > 0);
        r->cases[0].name = name[i];
        one_line(cx, ef_write_results(cx, r, in_folder(cx, "name.h5")), "cannot be called");
        ef_close(cx);
    }
}

/* The n-th allocation fails, for every n, in writing and in reading. */
static void memory_runs_out(void **state)
{
    (void)state;
    EfContext *made = ef_open();
    const EfResults *r = random_results(made, 2, 300);
    const char *path = in_folder(made, "memory.h5");
    long failures = 0;
    for (EfStatus st = EF_E_MEMORY; st != EF_OK; failures++) {
        EfContext *cx = ef_open();
        cx->fail_after = failures + 1;
        st = ef_write_results(cx, r, path);
        assert_true(st == EF_OK || (st == EF_E_MEMORY && access(path, F_OK) != 0));
        ef_close(cx);
    }
    for (EfStatus st = EF_E_MEMORY; st != EF_OK; failures++) {
        EfContext *cx = ef_open();
        EfResults *back;
        cx->fail_after = failures + 1;
        st = ef_read_results(cx, path, &back);
        assert_true(st == EF_OK || st == EF_E_MEMORY);
        ef_close(cx);
        if (st == EF_E_MEMORY && failures > 5000) FAIL("does not end");
    }
    assert_true(failures > 4);
    ef_close(made);
}

/* ---- files that are not ours, or no longer ------------------------------------------------------------------------------ */

static void damaged_files(void **state)
{
    (void)state;
    EfContext *made = ef_open();
    unsigned char *bytes;
    size_t n;
    CHECK_OK(made, store_pack(made, "x", random_results(made, 4, 5), &bytes, &n));
    for (uint64_t i = 0; i < 400; i++) {
        EfContext *cx = ef_open();
        EfResults *back;
        const size_t at = (size_t)test_uniform(77, i, 0, (double)n), cut = i % 2 ? n : at;
        bytes[at] ^= (unsigned char)(1 << i % 8);
        const EfStatus st = store_unpack(cx, "x", bytes, cut, &back);
        bytes[at] ^= (unsigned char)(1 << i % 8);
        one_line(cx, st, "x: ");
        ef_close(cx);
    }
    ef_close(made);
}

static void foreign_files(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    EfResults *back;
    const char *path = in_folder(cx, "foreign");
    CHECK_OK(cx, file_replace(cx, path, "joints: {A: [0, 0, 0]}\n", 23));
    one_line(cx, ef_read_results(cx, path, &back), "not a results file");
    ef_close(cx);
    cx = ef_open();
    one_line(cx, ef_read_results(cx, folder, &back), "not a file");
    ef_close(cx);
    cx = ef_open();
    one_line(cx, ef_read_results(cx, "no-such-file", &back), strerror(ENOENT));
    ef_close(cx);
}

/* A file with one dataset taken away or replaced by one of other extents, sealed again: named, never believed. */
static void altered(EfContext *cx, const char *path, bool replace, const char *says)
{
    unsigned char *bytes, *image;
    size_t n, m;
    CHECK_OK(cx, store_pack(cx, "x", random_results(cx, 6, 5), &bytes, &n));
    hid_t access = H5Pcreate(H5P_FILE_ACCESS);
    H5Pset_fapl_core(access, 1 << 16, 0);
    H5Pset_file_image(access, bytes, n - SEAL_SIZE);
    hid_t file = H5Fopen("x", H5F_ACC_RDWR, access);
    assert_true(file >= 0);
    assert_true(H5Ldelete(file, path, H5P_DEFAULT) >= 0);
    if (replace) {
        const hsize_t huge[] = {2000000000, 3};
        hid_t space = H5Screate_simple(2, huge, NULL);
        H5Dclose(H5Dcreate2(file, path, H5T_NATIVE_DOUBLE, space, H5P_DEFAULT, H5P_DEFAULT, H5P_DEFAULT));
        H5Sclose(space);
    }
    H5Fflush(file, H5F_SCOPE_GLOBAL);
    m = (size_t)H5Fget_file_image(file, NULL, 0);
    image = arena_take(cx, &cx->keep, m + SEAL_SIZE, 1);
    H5Fget_file_image(file, image, m);
    H5Fclose(file);
    H5Pclose(access);
    store_seal(image, m);
    EfResults *back;
    one_line(cx, store_unpack(cx, "x", image, m + SEAL_SIZE, &back), says);
}

static void sealed_but_wrong(void **state)
{
    (void)state;
    const char *const path[] = {"frame/joints/position", "frame/tubes/offset", "frame/line/position", "frame/tubes/length"};
    for (int i = 0; i < 8; i++) {
        EfContext *cx = ef_open();
        altered(cx, path[i / 2], i % 2, i % 2 ? "wrong extents" : "is missing");
        ef_close(cx);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(every_field_has_a_row), cmocka_unit_test(all_fields_come_back), cmocka_unit_test(a_run_comes_back),
        cmocka_unit_test(equal_results_equal_bytes), cmocka_unit_test(files_are_replaced), cmocka_unit_test(old_file_survives),
        cmocka_unit_test(places_that_cannot_be_written), cmocka_unit_test(case_names_that_cannot_be_groups),
        cmocka_unit_test(memory_runs_out), cmocka_unit_test(damaged_files), cmocka_unit_test(foreign_files),
        cmocka_unit_test(sealed_but_wrong),
    };
    return cmocka_run_group_tests(tests, enter, leave);
}
