/* fuzz_results.c - results files from anywhere: refused in one line or read, never a crash.
 * The first byte of the input chooses: even, the rest is a file as it is; odd, the rest is a list of edits (six bytes each)
 * of a sound file, which is then sealed again, so that what stands in the datasets is tried and not only the seal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

#include "endfix/run.h"
#include "store/store.h"

enum { MOST_PATHS = 400, EDIT = 6, MOST_EDITS = 20 };

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size);

static unsigned char *sound;
static size_t sound_size;
static char *path[MOST_PATHS];
static int npath;

/* A result that a correct program cannot give ends the run. */
static void must(int true_one)
{
    if (!true_one) abort();
}

/* A propped post under a push, with one of everything that a file can hold lists of. */
static EfResults *sample(EfContext *cx)
{
    static EfMaterial material = {.name = "steel", .E = 205e9, .E_compression = 205e9, .G = 79e9, .nu = 0.3, .density = 7850,
                                  .yield = 4e8, .yield_compression = 4e8, .ultimate = 5e8, .status = "user"};
    static EfSize tube_size = {.name = "s", .kind = "given", .text = "s",
                               .section = {.A = 1e-4, .Iy = 1e-8, .Iz = 1e-8, .J = 2e-8, .round = true}};
    static EfJoint joint[] = {{"A", {0, 0, 0}, {1, 1}}, {"B", {0, 0, 1}, {2, 1}}, {"C", {0.5, 0, 0}, {3, 1}}};
    static EfTube tube[] = {{.name = "a", .end = {0, 1}}, {.name = "b", .end = {2, 1}}};
    static EfSupport support[] = {{.joint = 0, .held = 63}, {.joint = 2, .held = 63}};
    static const int at = 1, part = 0;
    static const double factor = 1.5;
    static const EfLoad load[] = {{.kind = EF_LOAD_JOINT, .force = {1, 2, -100}, .njoint = 1, .joint = &at}};
    static EfCase a_case[] = {{.name = "push", .level = EF_LEVEL_ULTIMATE, .ultimate_factor = 1, .nload = 1, .load = load}};
    static EfCombination more[] = {{.name = "more", .level = EF_LEVEL_ULTIMATE, .ultimate_factor = 1, .npart = 1, .part = &part,
                                    .factor = &factor}};
    static EfEquipment box[] = {{.name = "box", .mass = 2, .at = {0, 0, 1.2}, .ncarrier = 1, .carrier = &at}};
    static EfHandLine hand[] = {{.tube = 0, .run = 0, .c = 2}};
    static EfFrame frame = {.path = "fuzz", .title = "fuzz", .nmaterial = 1, .nsize = 1, .njoint = 3, .ntube = 2, .nsupport = 2,
                            .nequipment = 1, .ncase = 1, .ncombination = 1, .nhand = 1, .material = &material, .size = &tube_size,
                            .joint = joint, .tube = tube, .support = support, .equipment = box, .cases = a_case,
                            .combination = more, .hand = hand, .fixity_credit = 2};
    EfResults *r = NULL;
    for (int t = 0; t < 2; t++)
        for (int i = 0; i < 12; i++) tube[t].spring[i / 6][i % 6] = INFINITY;
    must(ef_run(cx, &frame, &(EfOptions){.count = 2}, &r) == EF_OK);
    return r;
}

static herr_t note_path(hid_t file, const char *name, const H5L_info_t *info, void *data)
{
    (void)data;
    const hid_t object = info->type == H5L_TYPE_HARD ? H5Oopen(file, name, H5P_DEFAULT) : -1;
    if (object >= 0 && H5Iget_type(object) == H5I_DATASET && npath < MOST_PATHS) path[npath++] = strdup(name);
    if (object >= 0) H5Oclose(object);
    return 0;
}

static hid_t open_sound(void)
{
    const hid_t access = H5Pcreate(H5P_FILE_ACCESS);
    H5Pset_fapl_core(access, 1 << 16, 0);
    H5Pset_fclose_degree(access, H5F_CLOSE_STRONG);
    H5Pset_file_image(access, sound, sound_size - SEAL_SIZE);
    const hid_t file = H5Fopen("/dev/null/sound", H5F_ACC_RDWR, access);
    H5Pclose(access);
    must(file >= 0);
    return file;
}

static void prepare(void)
{
    EfContext *cx = ef_open();
    unsigned char *bytes;
    must(store_pack(cx, "x", sample(cx), &bytes, &sound_size) == EF_OK);
    sound = malloc(sound_size);
    must(sound != NULL);
    memcpy(sound, bytes, sound_size);
    ef_close(cx);
    H5Eset_auto2(H5E_DEFAULT, NULL, NULL);
    const hid_t file = open_sound();
    H5Lvisit_by_name(file, "/", H5_INDEX_NAME, H5_ITER_INC, note_path, NULL, H5P_DEFAULT);
    H5Fclose(file);
}

/* Other bytes in one place of a dataset. */
static void overwrite(hid_t file, const char *name, const uint8_t *e)
{
    const hid_t d = H5Dopen2(file, name, H5P_DEFAULT);
    if (d < 0) return;
    const hid_t type = H5Dget_type(d), space = H5Dget_space(d);
    const size_t bytes = (size_t)H5Sget_simple_extent_npoints(space) * H5Tget_size(type);
    unsigned char *values = bytes < 1 << 20 ? malloc(bytes + 4) : NULL;
    if (values && bytes > 0 && H5Dread(d, type, H5S_ALL, H5S_ALL, H5P_DEFAULT, values) >= 0) {
        memcpy(values + (size_t)e[2] * 7 % bytes, e + 3, bytes < 3 ? 0 : (e[2] * 7u % bytes + 3 <= bytes ? 3 : 1));
        H5Dwrite(d, type, H5S_ALL, H5S_ALL, H5P_DEFAULT, values);
    }
    free(values);
    H5Sclose(space);
    H5Tclose(type);
    H5Dclose(d);
}

/* A dataset of another type or other extents in its place; written or left unwritten. */
static void exchange(hid_t file, const char *name, const uint8_t *e)
{
    const hid_t types[] = {H5T_NATIVE_DOUBLE, H5T_NATIVE_INT, H5T_C_S1, H5T_NATIVE_UCHAR, H5T_NATIVE_FLOAT};
    const hsize_t extent[] = {e[3] % 8, e[4] % 8, e[5] > 250 ? 1u << 31 : e[5] % 4};
    const hid_t space = H5Screate_simple(e[2] / 5 % 4, extent, NULL);
    const hid_t d = H5Dcreate2(file, name, types[e[2] % 5], space, H5P_DEFAULT, H5P_DEFAULT, H5P_DEFAULT);
    static const double zeros[512];
    if (d >= 0 && e[5] <= 250 && e[5] % 2) H5Dwrite(d, types[e[2] % 5], H5S_ALL, H5S_ALL, H5P_DEFAULT, zeros);
    if (d >= 0) H5Dclose(d);
    H5Sclose(space);
}

static void edit(hid_t file, const uint8_t *e)
{
    const char *name = path[(e[0] / 4 + e[1] * 64) % npath];
    switch (e[0] % 4) {
    case 0: case 1: overwrite(file, name, e); break;
    case 2: H5Ldelete(file, name, H5P_DEFAULT); break;
    default:
        H5Ldelete(file, name, H5P_DEFAULT);
        exchange(file, name, e);
    }
}

static void try_file(const unsigned char *bytes, size_t n)
{
    EfContext *cx = ef_open(), *again = ef_open();
    EfResults *r = NULL;
    must(cx && again);
    const EfStatus st = store_unpack(cx, "x", bytes, n, &r);
    must(st == EF_OK || (st == EF_E_IO && strncmp(ef_message(cx), "x: ", 3) == 0 && !strchr(ef_message(cx), '\n')));
    if (st == EF_OK) { /* what was believed can be written again */
        unsigned char *copy;
        size_t m;
        must(store_pack(again, "x", r, &copy, &m) == EF_OK);
    }
    ef_close(again);
    ef_close(cx);
}

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size)
{
    if (!sound) prepare();
    if (size < 1) return 0;
    if (data[0] % 2 == 0) {
        try_file(data + 1, size - 1);
        return 0;
    }
    const hid_t file = open_sound();
    for (size_t i = 1; i + EDIT <= size && i < EDIT * MOST_EDITS; i += EDIT) edit(file, data + i);
    H5Fflush(file, H5F_SCOPE_GLOBAL);
    const size_t n = (size_t)H5Fget_file_image(file, NULL, 0);
    unsigned char *bytes = malloc(n + SEAL_SIZE);
    must(bytes && H5Fget_file_image(file, bytes, n) == (ssize_t)n);
    H5Fclose(file);
    store_seal(bytes, n);
    try_file(bytes, n + SEAL_SIZE);
    free(bytes);
    return 0;
}
