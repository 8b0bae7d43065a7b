/* conclude.c - exit status, cautions, defaults used, what was not checked, sources, and why a run is a draft.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "check/check.h"

enum { MOST_NOTES = 400 };

/* Adds a line unless it is there already. */
static EfStatus add(EfContext *cx, int *n, const char **list, const char *text)
{
    if (!text) return cx->status;
    for (int i = 0; i < *n; i++)
        if (strcmp(list[i], text) == 0) return EF_OK;
    if (*n < MOST_NOTES) list[(*n)++] = text;
    return EF_OK;
}

#define CAUTION(...) TRY(add(cx, &notes->ncaution, notes->caution, keep_format(cx, __VA_ARGS__)))
#define DEFAULT(...) TRY(add(cx, &notes->ndefault, notes->default_used, keep_format(cx, __VA_ARGS__)))
#define DRAFT(...) TRY(add(cx, &notes->ndraft, notes->draft, keep_format(cx, __VA_ARGS__)))

static const char *const not_checked[] = {
    "welds, bolts and fittings",
    "fatigue and cracks",
    "combined compression and bending, and second-order tube moments",
    "crash, dents and bent tubes",
    "local buckling of walls",
    "skins, fabric and cables",
    "softness of the joints' own walls (rigid joints overstate c)",
    "collapse with bows and yield",
};

/* ---- one case ------------------------------------------------------------------------------------------------------ */

static EfStatus factor_cautions(EfContext *cx, const EfCaseResult *r, EfNotes *notes)
{
    const EfCritical *c = &r->critical;
    if (c->outcome == EF_TALLY_SHORT) {
        CAUTION("%s: %d critical factors were counted below %.4g and only %d found. Do not use this case.", r->name, c->counted,
                c->counted_at, c->found);
        DRAFT("the tally of case %s is short", r->name);
    }
    if (c->outcome == EF_STEADY_BUCKLES) CAUTION("%s: the steady loads alone buckle the frame at %.3g times themselves.", r->name, r->steady_factor);
    if (c->nmode > 0 && c->factor[0] < 10)
        CAUTION("Factors under 10 with first-order tube loads: bow and sway moments grow with the load and are not in the margins.");
    if (fabs(r->witness.difference) > 0.01)
        CAUTION("%s: exact members with axial forces alone give %.4g, %.1f %% apart: end moments and torque matter here.", r->name,
                r->witness.factor, 100 * fabs(r->witness.difference));
    if (r->witness.counted != 0)
        CAUTION("%s: the second engine counts %d factors below its own lowest one. Do not use this case.", r->name, r->witness.counted);
    if (r->balance.residual > 1e-6) {
        CAUTION("%s: forces balance to %.1e only. The stiffness is badly conditioned; look for very soft or very stiff parts.", r->name,
                r->balance.residual);
        DRAFT("the balance of case %s is poor", r->name);
    }
    if (r->fixity.own_at < 1 && c->nmode > 0)
        CAUTION("%s: the frame buckles before the case load; own c is taken at %.3g of it.", r->name, r->fixity.own_at);
    return EF_OK;
}

static EfStatus ledger_cautions(EfContext *cx, const EfFrame *f, const EfCaseResult *r, EfNotes *notes)
{
    for (int i = 0; i < r->nledger; i++) {
        const EfLedgerRow *row = &r->ledger[i];
        const EfSize *size = &f->size[f->tube[row->tube].size];
        const double yield = column_yield(&f->material[size->material]) * size->section.A;
        if (row->hand_strength > yield)
            CAUTION("%s, tube %s: the hand sheet's critical stress of %.0f MPa exceeds the yield of %.0f MPa.", r->name,
                    f->tube[row->tube].name, row->hand_strength / size->section.A * 1e-6, yield / size->section.A * 1e-6);
    }
    return EF_OK;
}

static bool fails(const EfCaseResult *r)
{
    if (r->critical.outcome == EF_STEADY_BUCKLES) return true;
    for (int i = 0; i < r->nmargin; i++) {
        const double least = r->margin[i].tube < 0 ? 0 : r->required.margin;
        if (r->margin[i].margin < least) return true;
    }
    return false;
}

/* ---- the run --------------------------------------------------------------------------------------------------------- */

static EfStatus material_notes(EfContext *cx, const EfFrame *f, EfNotes *notes)
{
    for (int s = 0; s < f->nsize; s++) {
        const EfMaterial *m = &f->material[f->size[s].material];
        TRY(add(cx, &notes->nsource, notes->source, keep_format(cx, "%s: %s", m->name, m->source ? m->source : "no source given")));
        if (!m->source) DRAFT("material %s has no source", m->name);
        if (m->status && strcmp(m->status, "memory") == 0) CAUTION("Material %s: its values are from memory. Replace them by the tube's certificate.", m->name);
        if (isnan(m->yield)) CAUTION("Material %s has no yield: its tubes are checked by Euler's formula alone.", m->name);
        if (isnan(m->welded_yield) && !isnan(m->yield)) DEFAULT("material %s: no strength beside welds given, the parent's is used", m->name);
    }
    return EF_OK;
}

static EfStatus defaults(EfContext *cx, const EfFrame *f, double guess_c, EfNotes *notes)
{
    if (!f->shear_flexible) DEFAULT("tubes are rigid in shear (the text-book column)");
    if (!f->fixity_credit_because) DEFAULT("margins use a fixity of at most c %.3g while joints are rigid", f->fixity_credit);
    DEFAULT("column rule %s where the material names none", column_rule(0)->name);
    if (guess_c > 0) DEFAULT("ledger rows marked `assumed` take c %.3g for every compressed tube", guess_c);
    return EF_OK;
}

static EfStatus all_cautions(EfContext *cx, const Mesh *mesh, EfResults *results)
{
    EfNotes *notes = &results->notes;
    CAUTION("Not a substitute for local codes, certification, test and a licensed engineer's judgement.");
    CAUTION("Joints are taken as rigid: real joint walls give way and lower c.");
    if (mesh->free_body) CAUTION("Free body: loads keep their direction in space as the frame deforms.");
    for (int i = 0; i < results->ncase; i++) {
        TRY(factor_cautions(cx, &results->cases[i], notes));
        TRY(ledger_cautions(cx, mesh->frame, &results->cases[i], notes));
        if (results->cases[i].level == EF_LEVEL_ULTIMATE)
            DEFAULT("%s: at ultimate level, so yield at limit is not checked", results->cases[i].name);
        if (!results->cases[i].combination && !mesh->frame->cases[results->cases[i].run].source)
            DRAFT("case %s has no source", results->cases[i].name);
    }
    return EF_OK;
}

EfStatus check_conclude(EfContext *cx, const Mesh *mesh, double guess_c, EfResults *results)
{
    EfNotes *notes = &results->notes;
    const char ***lists[] = {&notes->caution, &notes->default_used, &notes->not_checked, &notes->source, &notes->draft};
    for (size_t i = 0; i < sizeof lists / sizeof *lists; i++) ALLOC(cx, keep, *lists[i], MOST_NOTES);
    TRY(all_cautions(cx, mesh, results));
    TRY(material_notes(cx, mesh->frame, notes));
    TRY(defaults(cx, mesh->frame, guess_c, notes));
    for (size_t i = 0; i < sizeof not_checked / sizeof *not_checked; i++)
        TRY(add(cx, &notes->nnot_checked, notes->not_checked, not_checked[i]));
    results->exit_status = 0;
    for (int i = 0; i < results->ncase; i++) {
        if (fails(&results->cases[i]) && results->exit_status == 0) results->exit_status = 1;
        if (results->cases[i].critical.outcome == EF_TALLY_SHORT || results->cases[i].negative.outcome == EF_TALLY_SHORT) results->exit_status = 3;
    }
    return EF_OK;
}
