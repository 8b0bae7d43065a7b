/* screen.c - the one-screen answer of `check`: cases, the tubes that matter, verdicts.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "postproc/table.h"

enum { TUBES_SHOWN = 10 };

/* ---- cases ---------------------------------------------------------------------------------------------------------- */

static const char *tally(EfContext *cx, const EfCritical *c)
{
    switch (c->outcome) {
    case EF_FOUND: return keep_format(cx, "%d counted, %d found: complete below %.3g", c->counted, c->found, c->counted_at);
    case EF_NONE: return keep_format(cx, "none counted to %.4g", c->counted_at);
    case EF_NONE_BELOW: return keep_format(cx, "none counted below %.4g", c->counted_at);
    case EF_STEADY_BUCKLES: return "steady loads alone buckle it";
    case EF_TALLY_SHORT: return keep_format(cx, "SHORT by %d", c->counted - c->found);
    }
    return "";
}

/* Leaning tubes of the lowest shape, the largest share first. */
static const char *who_leans(EfContext *cx, const EfResults *r, const EfCritical *c)
{
    const int nt = r->frame->ntube;
    int best = -1, others = 0;
    for (int t = 0; t < nt && c->nmode > 0; t++) {
        if (c->role[t] != EF_ROLE_LEANING) continue;
        if (best >= 0) others++;
        if (best < 0 || c->lost[t] > c->lost[best] * (1 + 1e-9)) best = t;
    }
    if (best < 0) return c->nmode > 0 ? "no tube alone" : "";
    return others ? keep_format(cx, "%s +%d", r->frame->tube[best].name, others) : r->frame->tube[best].name;
}

static EfStatus case_table(EfContext *cx, const EfResults *r, const Filter *filter, Table *t)
{
    static const Column columns[] = {{"case", Q_TEXT}, {"lowest factor", Q_NUMBER}, {"kind of failure", Q_TEXT}, {"leans", Q_TEXT},
                                     {"tally", Q_TEXT}};
    table_start(t, NULL, 5, columns);
    for (int i = 0; i < r->ncase; i++) {
        const EfCaseResult *c = &r->cases[i];
        const EfCritical *f = &c->critical;
        if (!wanted_case(filter, c)) continue;
        const Cell none = text_cell(f->outcome == EF_NONE ? "none" : "");
        const char *kind = f->nmode > 0 ? f->kind[0] : f->outcome == EF_NONE ? "nothing is compressed" : "";
        const Cell row[] = {text_cell(c->name), f->nmode > 0 ? number_cell(f->factor[0]) : none, text_cell(kind),
                            text_cell(who_leans(cx, r, f)), text_cell(tally(cx, f))};
        TRY(table_row(cx, t, row));
    }
    return EF_OK;
}

/* ---- the tubes that matter --------------------------------------------------------------------------------------------- */

typedef struct Worst {
    const EfCaseResult *c;
    const EfMargin *m;
} Worst;

/* The worst margin of every tube, then the worst of these first; the frame's own row takes part. */
static EfStatus find_worst(EfContext *cx, const EfResults *r, const Filter *filter, Worst *list, int *n)
{
    const int nt = r->frame->ntube;
    Worst *of;
    ALLOC(cx, tmp, of, nt + 1);
    for (int i = 0; i < r->ncase; i++)
        for (int k = 0; k < r->cases[i].nmargin && wanted_case(filter, &r->cases[i]); k++) {
            const EfMargin *m = &r->cases[i].margin[k];
            Worst *w = &of[m->tube + 1];
            if (isnan(m->margin) || (m->tube >= 0 && !wanted_tube(filter, r->frame->tube[m->tube].name))) continue;
            if (!w->m || m->margin < w->m->margin) *w = (Worst){&r->cases[i], m};
        }
    *n = 0;
    if (of[0].m) list[(*n)++] = of[0];
    for (int shown = 0; shown < TUBES_SHOWN; shown++) {
        int best = -1;
        for (int t = 1; t <= nt; t++)
            if (of[t].m && (best < 0 || of[t].m->margin < of[best].m->margin)) best = t;
        if (best < 0) return EF_OK;
        list[(*n)++] = of[best];
        of[best].m = NULL;
    }
    return EF_OK;
}

/* The hand sheet's row of a tube in a case; NULL. */
static const EfLedgerRow *ledger_row(const EfCaseResult *c, int tube)
{
    for (int k = 0; k < c->nledger; k++)
        if (c->ledger[k].tube == tube) return &c->ledger[k];
    return NULL;
}

static EfStatus worst_row(EfContext *cx, const EfResults *r, const Worst *w, Table *t)
{
    static const char *const state[] = {"", " close", " negative", ""};
    const EfMargin *m = w->m;
    const EfFixity *f = &w->c->fixity;
    const char *margin = m->margin > 99 ? "over +99" : keep_format(cx, "%+.2f%s", m->margin, state[m->state]);
    if (!margin) return cx->status;
    if (m->tube < 0) {
        const char *rule = keep_format(cx, "lowest factor over %.3g required", m->demand);
        const Cell row[] = {text_cell("the frame"), text_cell(""), text_cell(w->c->name), number_cell(NAN), number_cell(NAN),
                            number_cell(NAN), number_cell(NAN), number_cell(NAN), text_cell(margin), text_cell(rule), text_cell("")};
        return table_row(cx, t, row);
    }
    const EfLedgerRow *hand = ledger_row(w->c, m->tube);
    const EfSize *size = &r->frame->size[r->frame->tube[m->tube].size];
    const char *verdict = hand ? hand->verdict_text : strcmp(f->note[m->tube], "frame governs") == 0 ? "" : f->note[m->tube];
    const Cell row[] = {text_cell(r->frame->tube[m->tube].name), text_cell(size->text), text_cell(w->c->name),
                        number_cell(m->demand), number_cell(r->length[m->tube]), number_cell(hand ? hand->hand_c : NAN),
                        number_cell(f->own_c[m->tube]), number_cell(f->safe_c[m->tube]), text_cell(margin), text_cell(m->rule),
                        text_cell(verdict)};
    return table_row(cx, t, row);
}

static EfStatus tube_table(EfContext *cx, const EfResults *r, const Filter *filter, Table *t)
{
    static const Column columns[] = {{"tube", Q_TEXT}, {"size", Q_TEXT}, {"worst case", Q_TEXT}, {"P", Q_FORCE}, {"length", Q_LENGTH},
                                     {"c guessed", Q_NUMBER}, {"own c", Q_NUMBER}, {"safe c", Q_NUMBER}, {"margin", Q_TEXT},
                                     {"rule", Q_TEXT}, {"guess", Q_TEXT}};
    Worst list[TUBES_SHOWN + 1];
    int n;
    table_start(t, "least margins", 11, columns);
    TRY(find_worst(cx, r, filter, list, &n));
    for (int i = 0; i < n; i++) TRY(worst_row(cx, r, &list[i], t));
    return EF_OK;
}

/* ---- all ------------------------------------------------------------------------------------------------------------------ */

EfStatus check_screen(EfContext *cx, const EfResults *r, const Filter *filter, Document *d)
{
    const EfFrame *f = r->frame;
    *d = (Document){.notes = &r->notes};
    d->head[d->nhead++] = keep_format(cx, "%s: %d joints, %d tubes, %.4g kg (tubes %.4g kg)%s", f->title ? f->title : f->path,
                                      f->njoint, f->ntube, r->mass, r->tubes_mass, r->ncase && r->cases[0].free_body ? ", free body" : "");
    if (!d->head[0]) return cx->status;
    TRY(case_table(cx, r, filter, &d->table[d->ntable++]));
    return tube_table(cx, r, filter, &d->table[d->ntable++]);
}
