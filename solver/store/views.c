/* views.c - what the file holds for other readers: names and section values of every tube, and the lines of the
 * frame with its shapes and forces as unstructured grid (/VTKHDF, version 1.0).
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <stdint.h>
#include <stdio.h>
#include <string.h>

#include "store/store.h"

enum { POLY_LINE = 4 }; /* cell type of a line through several points */

/* ---- tubes ------------------------------------------------------------------------------------------------------------ */

static EfStatus put_names(Store *s, const EfFrame *f)
{
    static const Row size = {.path = "frame/tubes/size", .type = T_TEXT, .unit = "text", .help = "size"};
    static const Row material = {.path = "frame/tubes/material", .type = T_TEXT, .unit = "text", .help = "material"};
    const Shape shape = {.rank = 1, .at = {(hsize_t)f->ntube}, .counter = {NT}};
    const char **name;
    ALLOC(s->cx, tmp, name, f->ntube);
    for (int t = 0; t < f->ntube; t++) name[t] = f->size[f->tube[t].size].name;
    TRY(hdf_put(s, size.path, &size, &shape, name));
    for (int t = 0; t < f->ntube; t++) name[t] = f->material[f->size[f->tube[t].size].material].name;
    return hdf_put(s, material.path, &material, &shape, name);
}

static EfStatus put_sections(Store *s, const EfFrame *f)
{
    static const struct {
        Row row;
        size_t offset;
    } value[] = {
        {{.path = "frame/tubes/area", .unit = "m2", .help = "area"}, offsetof(EfSection, A)},
        {{.path = "frame/tubes/Iy", .unit = "m4", .help = "second moment, local x-z plane"}, offsetof(EfSection, Iy)},
        {{.path = "frame/tubes/Iz", .unit = "m4", .help = "second moment, local x-y plane"}, offsetof(EfSection, Iz)},
        {{.path = "frame/tubes/J", .unit = "m4", .help = "torsion constant"}, offsetof(EfSection, J)},
    };
    const Shape shape = {.rank = 1, .at = {(hsize_t)f->ntube}, .counter = {NT}};
    double *of_tube;
    ALLOC(s->cx, tmp, of_tube, f->ntube);
    for (size_t k = 0; k < sizeof value / sizeof *value; k++) {
        for (int t = 0; t < f->ntube; t++)
            memcpy(&of_tube[t], (const char *)&f->size[f->tube[t].size].section + value[k].offset, sizeof(double));
        TRY(hdf_put(s, value[k].row.path, &value[k].row, &shape, of_tube));
    }
    return EF_OK;
}

/* ---- lines for viewers ------------------------------------------------------------------------------------------------ */

/* Every tube is one line through its points, if these follow one another in the order of the tubes. */
static bool points_in_order(const EfResults *r)
{
    int tube = -1;
    for (int i = 0; i < r->npoint; i++) {
        if (r->point_tube[i] != tube && r->point_tube[i] != tube + 1) return false;
        tube = r->point_tube[i];
    }
    return r->npoint > 0 && tube == r->frame->ntube - 1;
}

static EfStatus put_grid_kind(Store *s)
{
    static const int64_t version[2] = {1, 0};
    static const char kind[] = "UnstructuredGrid";
    static const Shape one = {0}, two = {.rank = 1, .at = {2}};
    TRY(hdf_link(s, "VTKHDF/Points", "/frame/line/position")); /* makes the group */
    TRY(hdf_put_attribute(s, "VTKHDF", "Version", H5T_NATIVE_INT64, &two, version));
    const hid_t ascii = H5Tcopy(H5T_C_S1);
    const bool made = ascii >= 0 && H5Tset_size(ascii, sizeof kind - 1) >= 0;
    EfStatus st = made ? hdf_put_attribute(s, "VTKHDF", "Type", ascii, &one, kind)
                       : fail(s->cx, EF_E_IO, "%s: HDF5 cannot make a type", s->name);
    if (ascii >= 0) H5Tclose(ascii);
    return st;
}

static EfStatus put_count(Store *s, const char *path, int64_t n)
{
    static const Shape one = {.rank = 1, .at = {1}};
    return hdf_put_plain(s, path, H5T_NATIVE_INT64, &one, &n);
}

static EfStatus put_cells(Store *s, const EfResults *r)
{
    const int nt = r->frame->ntube;
    int64_t *connectivity, *offset;
    unsigned char *type;
    ALLOC(s->cx, tmp, connectivity, r->npoint);
    ALLOC(s->cx, tmp, offset, nt + 1);
    ALLOC(s->cx, tmp, type, nt);
    for (int i = 0; i < r->npoint; i++) {
        connectivity[i] = i;
        offset[r->point_tube[i] + 1] = i + 1;
    }
    memset(type, POLY_LINE, (size_t)nt);
    const Shape points = {.rank = 1, .at = {(hsize_t)r->npoint}}, cells = {.rank = 1, .at = {(hsize_t)nt}};
    const Shape ends = {.rank = 1, .at = {(hsize_t)nt + 1}};
    TRY(put_count(s, "VTKHDF/NumberOfPoints", r->npoint));
    TRY(put_count(s, "VTKHDF/NumberOfConnectivityIds", r->npoint));
    TRY(put_count(s, "VTKHDF/NumberOfCells", nt));
    TRY(hdf_put_plain(s, "VTKHDF/Connectivity", H5T_NATIVE_INT64, &points, connectivity));
    TRY(hdf_put_plain(s, "VTKHDF/Offsets", H5T_NATIVE_INT64, &ends, offset));
    return hdf_put_plain(s, "VTKHDF/Types", H5T_NATIVE_UCHAR, &cells, type);
}

static EfStatus link_case(Store *s, const EfCaseResult *c)
{
    static const char *const of_tube[] = {"tubes/axial", "fixity/own_c", "fixity/safe_c"};
    char path[2 * PATH_SIZE], target[2 * PATH_SIZE];
    for (size_t i = 0; i < sizeof of_tube / sizeof *of_tube; i++) {
        snprintf(path, sizeof path, "VTKHDF/CellData/%s %s", c->name, strchr(of_tube[i], '/') + 1);
        snprintf(target, sizeof target, "/cases/%s/%s", c->name, of_tube[i]);
        TRY(hdf_link(s, path, target));
    }
    for (int m = 0; m < c->critical.nmode; m++) {
        snprintf(path, sizeof path, "VTKHDF/PointData/%s shape %d", c->name, m + 1);
        snprintf(target, sizeof target, "/cases/%s/critical/line/%d", c->name, m + 1);
        TRY(hdf_link(s, path, target));
    }
    return EF_OK;
}

static EfStatus put_grid(Store *s, const EfResults *r)
{
    TRY(put_grid_kind(s));
    TRY(put_cells(s, r));
    for (int i = 0; i < r->ncase; i++) TRY(link_case(s, &r->cases[i]));
    return EF_OK;
}

EfStatus write_views(Store *s, const EfResults *r)
{
    const ArenaMark mark = arena_mark(&s->cx->tmp);
    TRY(put_names(s, r->frame));
    TRY(put_sections(s, r->frame));
    if (points_in_order(r)) TRY(put_grid(s, r));
    arena_rewind(&s->cx->tmp, mark);
    return EF_OK;
}
