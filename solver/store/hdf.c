/* hdf.c - files in memory, paths and groups.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "store/hdf.h"

#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

enum { IMAGE_STEP = 1 << 20 };

size_t shape_size(const Shape *shape, int from)
{
    size_t size = 1;
    for (int i = from; i < shape->rank; i++) {
        if (shape->at[i] == 0) return 0;
        if (size != SIZE_MAX) size = shape->at[i] > (SIZE_MAX - 1) / size ? SIZE_MAX : size * (size_t)shape->at[i];
    }
    return size;
}

static void begin(EfContext *cx, const char *name, Store *s)
{
    *s = (Store){.cx = cx, .name = name, .file = -1};
    /* HDF5 refuses an image when a file of its name is there, and takes equal names for one file. */
    snprintf(s->key, sizeof s->key, "/dev/null/%p", (void *)s);
    H5Eget_auto2(H5E_DEFAULT, &s->old_print, &s->old_print_data);
    H5Eset_auto2(H5E_DEFAULT, NULL, NULL);
}

/* Access: in memory, closed with all that is open in it. */
static hid_t access_list(void)
{
    const hid_t list = H5Pcreate(H5P_FILE_ACCESS);
    if (list < 0) return -1;
    if (H5Pset_fapl_core(list, IMAGE_STEP, 0) >= 0 && H5Pset_fclose_degree(list, H5F_CLOSE_STRONG) >= 0) return list;
    H5Pclose(list);
    return -1;
}

EfStatus hdf_create(EfContext *cx, const char *name, Store *s)
{
    begin(cx, name, s);
    const hid_t access = access_list(), make = H5Pcreate(H5P_FILE_CREATE);
    /* No times: equal results give equal bytes. */
    if (access >= 0 && make >= 0 && H5Pset_obj_track_times(make, false) >= 0) s->file = H5Fcreate(s->key, H5F_ACC_TRUNC, make, access);
    if (access >= 0) H5Pclose(access);
    if (make >= 0) H5Pclose(make);
    /* Objects as every HDF5 since 1.8 reads them (long attributes), below a head of the first kind: the later heads
     * have a check sum that is wrong in the image of a file still open. */
    const bool ok = s->file >= 0 && H5Fset_libver_bounds(s->file, H5F_LIBVER_V18, H5F_LIBVER_V18) >= 0;
    return !ok ? fail(cx, EF_E_IO, "%s: HDF5 cannot make a file in memory", name) : EF_OK;
}

EfStatus hdf_open(EfContext *cx, const char *name, const void *bytes, size_t n, Store *s)
{
    begin(cx, name, s);
    s->file_size = n;
    const hid_t access = access_list();
    /* HDF5 copies the bytes; its interface only lacks a const. */
    if (access >= 0 && H5Pset_file_image(access, (void *)(uintptr_t)bytes, n) >= 0) s->file = H5Fopen(s->key, H5F_ACC_RDONLY, access);
    if (access >= 0) H5Pclose(access);
    return s->file < 0 ? fail(cx, EF_E_IO, "%s: damaged: HDF5 cannot open it", name) : EF_OK;
}

EfStatus hdf_image(Store *s, size_t more, unsigned char **bytes, size_t *n)
{
    ssize_t size = -1;
    if (H5Fflush(s->file, H5F_SCOPE_GLOBAL) >= 0) size = H5Fget_file_image(s->file, NULL, 0);
    if (size <= 0) return fail(s->cx, EF_E_IO, "%s: HDF5 cannot finish the file", s->name);
    ALLOC(s->cx, tmp, *bytes, (size_t)size + more);
    *n = (size_t)size;
    if (H5Fget_file_image(s->file, *bytes, *n) != size) return fail(s->cx, EF_E_IO, "%s: HDF5 cannot finish the file", s->name);
    return EF_OK;
}

void hdf_close(Store *s)
{
    if (s->file >= 0) H5Fclose(s->file);
    s->file = -1;
    H5Eset_auto2(H5E_DEFAULT, s->old_print, s->old_print_data);
}

EfStatus hdf_path(Store *s, const char *prefix, const char *path, char out[PATH_SIZE])
{
    const char *slash = prefix[0] && path[0] ? "/" : "";
    const int n = snprintf(out, PATH_SIZE, "%s%s%s", prefix, slash, path);
    return n < 0 || n >= PATH_SIZE ? fail(s->cx, EF_E_IO, "%s: the name %s is too long", s->name, path) : EF_OK;
}

const char *hdf_attribute(const char *path, char group[PATH_SIZE])
{
    const char *slash = strrchr(path, '/'), *last = slash ? slash + 1 : path;
    if (last[0] != '@') return NULL;
    snprintf(group, PATH_SIZE, "%.*s", slash ? (int)(slash - path) : 1, slash ? path : "/");
    return last;
}
