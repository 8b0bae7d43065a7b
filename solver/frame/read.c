/* read.c - the frame file from text to EfFrame.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "endfix/run.h"
#include "frame/reader.h"

/* fixity credit: 2.0, or {c: 4, because: reason}. */
static void read_credit(Reader *rd, Node *n)
{
    EfFrame *f = rd->frame;
    if (n->kind == NODE_MAP) {
        if (!check_keys(rd, n, keys_credit, "`fixity credit`")) return;
        get_number(rd, n, "c", DIM_NUMBER, &f->fixity_credit);
        f->fixity_credit_because = read_text(rd, node_get(n, "because"));
    } else read_number(rd, n, DIM_NUMBER, &f->fixity_credit);
    if (!(f->fixity_credit > 0)) FAULT(rd, n->mark, "A fixity credit is greater than zero.");
    if (f->fixity_credit > 2 && !f->fixity_credit_because)
        FAULT(rd, n->mark, "More than c 2 with rigid joints needs a reason: {c: %.3g, because: ...}.", f->fixity_credit);
}

static void read_people(Reader *rd, Node *n)
{
    EfPeople *p = &rd->frame->people;
    const struct {
        const char *key, **to;
    } rows[] = {{"prepared", &p->prepared}, {"checked", &p->checked}, {"drawing", &p->drawing}, {"revision", &p->revision}};
    if (!check_keys(rd, n, keys_people, "`people`")) return;
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        Node *v = node_get(n, rows[i].key);
        if (v) *rows[i].to = read_text(rd, v);
    }
}

static void read_top(Reader *rd, Node *top)
{
    Node *v;
    check_keys(rd, top, keys_top, "A frame file");
    if ((v = node_get(top, "units"))) read_units(rd, v);
    if ((v = node_get(top, "title"))) rd->frame->title = read_text(rd, v);
    if ((v = node_get(top, "shear flexible"))) read_bool(rd, v, &rd->frame->shear_flexible);
    static const struct {
        const char *key;
        void (*read)(Reader *rd, Node *n);
    } sections[] = {{"materials", read_materials}, {"sizes", read_sizes}, {"joints", read_joints},     {"tubes", read_tubes},
                    {"guys", read_guys},           {"supports", read_supports}, {"equipment", read_equipment}};
    for (size_t i = 0; i < sizeof sections / sizeof *sections; i++) {
        sections[i].read(rd, node_get(top, sections[i].key));
        if (rd->cx->status != EF_OK) return;
    }
    read_cases(rd, node_get(top, "cases"), node_get(top, "combinations"));
    if (rd->cx->status != EF_OK) return;
    if ((v = node_get(top, "required"))) read_required(rd, v, &rd->frame->required);
    if ((v = node_get(top, "fixity credit"))) read_credit(rd, v);
    read_hand_sheet(rd, node_get(top, "hand sheet"));
    if ((v = node_get(top, "people"))) read_people(rd, v);
}

/* The faults become the message, one line each. */
static EfStatus conclude(Reader *rd)
{
    EfContext *cx = rd->cx;
    if (rd->faults.count == 0) return cx->status;
    const int more = rd->faults.count - MOST_FAULTS;
    if (more > 0) return fail(cx, EF_E_INPUT, "%s\nand %d more", rd->faults.text, more);
    return fail(cx, EF_E_INPUT, "%s", rd->faults.text ? rd->faults.text : "The frame file has faults.");
}

static EfStatus read_all(EfContext *cx, const char *name, const char *folder, const char *text, size_t length, EfFrame **frame)
{
    Reader rd = {.cx = cx, .folder = folder, .units = units_default(), .faults = {.cx = cx, .file = name}};
    ALLOC(cx, keep, rd.frame, 1);
    rd.frame->path = keep_text(cx, name);
    rd.frame->required = (EfRequired){1, 1, 0, 1};
    rd.frame->fixity_credit = 2;
    const ArenaMark mark = arena_mark(&cx->tmp);
    sha256_start(&rd.digest);
    sha256_add(&rd.digest, text, length);
    Node *top = node_parse(&rd.faults, text, length);
    if (top) read_top(&rd, top);
    sha256_end(&rd.digest, rd.frame->input_sha256);
    const EfStatus st = conclude(&rd);
    free(rd.faults.text);
    arena_rewind(&cx->tmp, mark);
    if (st == EF_OK) *frame = rd.frame;
    return st;
}

EfStatus ef_read_frame_text(EfContext *cx, const char *name, const char *text, long length, EfFrame **frame)
{
    return read_all(cx, name, NULL, text, length < 0 ? strlen(text) : (size_t)length, frame);
}

EfStatus ef_read_frame(EfContext *cx, const char *path, EfFrame **frame)
{
    char *text;
    size_t length;
    const char *slash = strrchr(path, '/');
    TRY(read_bytes(cx, path, &text, &length));
    const char *folder = slash ? keep_format(cx, "%.*s", (int)(slash - path), path) : ".";
    if (!folder) return cx->status;
    return read_all(cx, path, folder[0] ? folder : "/", text, length, frame);
}
