/* test_reader.c - the frame file: units, forms, tables, every bad file with its message.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "support/check.h"

#include <dirent.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

#include "endfix/endfix.h"
#include "core/core.h"
#include "frame/schema.h"
#include "frame/sha256.h"
#include "frame/units.h"

static void quantities(void **state)
{
    (void)state;
    const Units u = units_default();
    const struct {
        Dimension d;
        const char *text;
        double value;
    } good[] = {{DIM_LENGTH, "3/4 in", 0.01905},      {DIM_LENGTH, "1 1/2 in", 0.0381},        {DIM_LENGTH, "-0.5 ft", -0.1524},
                {DIM_FORCE, "620 lbf", 2757.897401},  {DIM_STRESS, "29 Msi", 199.9479615e9},   {DIM_MOMENT, "2.5 kN m", 2500},
                {DIM_DENSITY, "0.283 lb/in3", 7833.4130}, {DIM_STIFFNESS, "3 kN/m", 3000},     {DIM_NUMBER, "1/500", 0.002},
                {DIM_ROTATION_STIFFNESS, "10 lbf ft/rad", 13.5581795}, {DIM_EXPANSION, "12 ppm/K", 12e-6}, {DIM_LENGTH, "1e-3", 1e-3}};
    char why[300];
    double v;
    for (size_t i = 0; i < sizeof good / sizeof *good; i++) {
        assert_true(read_quantity(&u, good[i].d, good[i].text, &v, why, sizeof why));
        CHECK_REL(v, good[i].value, 1e-7);
    }
    const char *const bad[] = {"", "x", "3 kN", "3 mmm", "0x10", "nan", "inf", "1/0", "3 4", "1e400", "--3", "3/ in"};
    for (size_t i = 0; i < sizeof bad / sizeof *bad; i++) assert_false(read_quantity(&u, DIM_LENGTH, bad[i], &v, why, sizeof why));
}

/* FIPS 180-4, appendix examples. */
static void digests(void **state)
{
    (void)state;
    char hex[65];
    Sha256 s;
    sha256_start(&s);
    sha256_add(&s, "abc", 3);
    sha256_end(&s, hex);
    assert_string_equal(hex, "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad");
    sha256_start(&s);
    const char *two = "abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq";
    sha256_add(&s, two, strlen(two));
    sha256_end(&s, hex);
    assert_string_equal(hex, "248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1");
}

static EfFrame *read_demo(EfContext *cx, const char *name)
{
    EfFrame *f = NULL;
    char path[500];
    snprintf(path, sizeof path, "%s/meshes/%s", EF_SOURCE_DIR, name);
    CHECK_OK(cx, ef_read_frame(cx, path, &f));
    return f;
}

static void demo_frames(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    const EfFrame *f = read_demo(cx, "ironbark.yaml");
    assert_int_equal(f->ntube, 12);
    assert_int_equal(f->ncase, 5);
    CHECK_REL(f->size[0].section.depth_y, 0.0127, 1e-12);
    CHECK_REL(f->cases[0].load[1].force[0], -1700, 1e-12);
    CHECK_REL(f->material[0].welded_yield, 414e6, 1e-12);
    assert_int_equal(strlen(f->input_sha256), 64);
    f = read_demo(cx, "thornbank.yaml");
    assert_int_equal(f->nguy, 6);
    assert_true(f->cases[0].load[0].steady);
    assert_true(f->cases[0].load[2].ntube > 50);
    f = read_demo(cx, "quernstone.yaml");
    assert_int_equal(f->ntube, 66);
    assert_int_equal(f->nsupport, 0);
    ef_close(cx);
}

/* The sample that `new` writes is valid and uses every section; so is the same file as JSON flow style. */
static void sample_is_valid(void **state)
{
    (void)state;
    EfContext *cx = ef_open();
    EfFrame *f;
    CHECK_OK(cx, ef_read_frame_text(cx, "sample", frame_sample(), -1, &f));
    assert_int_equal(f->nsize, 5);
    assert_int_equal(f->ncombination, 1);
    assert_int_equal(f->nhand, 1);
    assert_true(f->cases[1].both_ways);
    assert_int_equal(f->tube[3].release[0], 1 << EF_RY | 1 << EF_RZ);
    CHECK_REL(f->tube[3].spring[1][EF_RY], 2500, 1e-12);
    CHECK_REL(f->tube[3].offset[1][1], 0.012, 1e-12);
    const char *json = "{\"sizes\": {\"s\": {\"round\": [\"20 mm\", \"1 mm\"], \"material\": \"S355H\"}},"
                       " \"joints\": {\"A\": [0, 0, 0], \"B\": [1, 0, 0]}, \"tubes\": {\"t\": [\"A\", \"B\", \"s\"]},"
                       " \"supports\": {\"A\": \"fixed\"},"
                       " \"cases\": {\"c\": {\"level\": \"ultimate\", \"loads\": [{\"at\": \"B\", \"force\": [-100, 0, 0]}]}}}";
    CHECK_OK(cx, ef_read_frame_text(cx, "json", json, -1, &f));
    CHECK_REL(f->size[0].section.wall, 0.001, 1e-12);
    assert_true(frame_schema(cx) != NULL);
    ef_close(cx);
}

/* Tables beside the file; one outside its folder is refused. */
static void tables(void **state)
{
    (void)state;
    char folder[] = "/tmp/endfix-XXXXXX", path[100];
    assert_non_null(mkdtemp(folder));
    const struct {
        const char *name, *text;
    } files[] = {{"j.csv", "name,x,y,z\nA,0,0,0\n\"B\", 1 m ,0,0\r\n# note\nC,0,1,0\n"},
                 {"t.csv", "name,size,from,to,group\nt1,s,A,B,low\nt2,s,B,C,\n"},
                 {"f.yaml", "sizes: {s: {rod: 20 mm, material: S355H}}\njoints: {table: j.csv}\ntubes: {table: t.csv}\n"
                            "supports: {A: fixed}\ncases: {c: {level: ultimate, loads: [{at: C, force: [1, 0, 0]}]}}\n"}};
    for (int i = 0; i < 3; i++) {
        snprintf(path, sizeof path, "%s/%s", folder, files[i].name);
        FILE *f = fopen(path, "w");
        assert_non_null(f);
        fputs(files[i].text, f);
        fclose(f);
    }
    EfContext *cx = ef_open();
    EfFrame *f;
    CHECK_OK(cx, ef_read_frame(cx, path, &f));
    assert_int_equal(f->njoint, 3);
    assert_int_equal(f->tube[1].end[1], 2);
    assert_string_equal(f->tube[0].group, "low");
    assert_null(f->tube[1].group);
    ef_close(cx);
    for (int i = 0; i < 3; i++) {
        snprintf(path, sizeof path, "%s/%s", folder, files[i].name);
        unlink(path);
    }
    rmdir(folder);
}

static char *whole(const char *path)
{
    FILE *f = fopen(path, "rb");
    char *text = calloc(1, 1 << 16);
    if (f && text) (void)!fread(text, 1, (1 << 16) - 1, f);
    if (f) fclose(f);
    return text;
}

/* Every file in meshes/bad gives exactly the message beside it. */
static void bad_files(void **state)
{
    (void)state;
    DIR *folder = opendir(EF_SOURCE_DIR "/meshes/bad");
    assert_non_null(folder);
    int n = 0, wrong = 0;
    for (struct dirent *e; (e = readdir(folder));) {
        char path[600], expected[600];
        if (!strstr(e->d_name, ".yaml")) continue;
        snprintf(path, sizeof path, "%s/meshes/bad/%.200s", EF_SOURCE_DIR, e->d_name);
        snprintf(expected, sizeof expected, "%.*s.expected", (int)(strlen(path) - 5), path);
        EfContext *cx = ef_open();
        EfFrame *f;
        const EfStatus st = ef_read_frame(cx, path, &f);
        char *want = whole(expected), *got = calloc(1, 1 << 16);
        const char *m = ef_message(cx);
        for (size_t k = 0; *m && got;) { /* the folder is not part of the expectation */
            if (strncmp(m, EF_SOURCE_DIR "/meshes/bad/", strlen(EF_SOURCE_DIR "/meshes/bad/")) == 0) m += strlen(EF_SOURCE_DIR "/meshes/bad/");
            else got[k++] = *m++;
        }
        if (getenv("EF_WRITE_EXPECTED")) {
            FILE *out = fopen(expected, "w");
            fprintf(out, "%s\n", got);
            fclose(out);
        } else if (st != EF_E_INPUT || strncmp(got, want, strlen(got)) != 0 || strlen(want) != strlen(got) + 1) {
            print_error("%s: status %d\n  got  %s\n  want %s\n", e->d_name, st, got, want);
            wrong++;
        }
        n++;
        free(want), free(got);
        ef_close(cx);
    }
    closedir(folder);
    assert_int_equal(wrong, 0);
    assert_true(n >= 40);
}

/* Every allocation of reading a frame may fail: clean, and no leak (the sanitizer build looks). */
static void allocation_failures(void **state)
{
    (void)state;
    for (long n = 1; n < 100000; n++) {
        EfContext *cx = ef_open();
        EfFrame *f;
        cx->fail_after = n;
        const EfStatus st = ef_read_frame_text(cx, "sample", frame_sample(), -1, &f);
        const bool reached = cx->fail_after == 0;
        assert_int_equal(st, reached ? EF_E_MEMORY : EF_OK);
        ef_close(cx);
        if (!reached) return;
    }
    assert_true(false);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(quantities), cmocka_unit_test(digests),   cmocka_unit_test(demo_frames),
        cmocka_unit_test(tables),     cmocka_unit_test(bad_files), cmocka_unit_test(sample_is_valid),
        cmocka_unit_test(allocation_failures),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
