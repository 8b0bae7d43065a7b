/* writers.c - documents as text, CSV, JSON and Markdown.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "postproc/table.h"

enum { CELL = 200 };

/* Rounding of the engines ends here: less is nothing, or "<1e-9" where the size itself is the message. */
static const double NOISE = 1e-9;

/* A cell as shown: four figures for people, eight for programs; blank for NaN. */
static const char *shown(const Table *t, int row, int column, UnitSystem units, bool exact, char text[CELL])
{
    const Cell *c = &t->cell[row * t->ncolumn + column];
    const Quantity q = t->column[column].quantity;
    if (c->text) return c->text;
    text[0] = 0;
    if (isnan(c->number)) return text;
    const double v = unit_shown(units, q, c->number);
    if (q == Q_COUNT) snprintf(text, CELL, "%.0f", v);
    else if (exact) snprintf(text, CELL, "%.8g", q != Q_NUMBER && fabs(v) < NOISE ? 0 : v);
    else if (q == Q_NUMBER && v != 0 && fabs(v) < NOISE) snprintf(text, CELL, "<1e-9");
    else if (fabs(v) >= 9999.5 && fabs(v) < 1e7) snprintf(text, CELL, "%.0f", v);
    else snprintf(text, CELL, "%.4g", fabs(v) < NOISE ? 0 : v);
    return text;
}

/* Characters, not bytes: continuation bytes of UTF-8 take no room. */
static int width_of(const char *s)
{
    int n = 0;
    for (; *s; s++) n += ((unsigned char)*s & 0xC0) != 0x80;
    return n;
}

static const char *heading(const Table *t, int c, UnitSystem units, char text[CELL])
{
    const char *unit = unit_label(units, t->column[c].quantity);
    snprintf(text, CELL, unit[0] ? "%s %s" : "%s%s", t->column[c].heading, unit);
    return text;
}

/* ---- text ------------------------------------------------------------------------------------------------------------ */

static void padded(FILE *out, const char *s, int width, bool right, bool last)
{
    const int pad = width - width_of(s);
    if (right) fprintf(out, "%*s", pad, "");
    fputs(s, out);
    if (!right && !last) fprintf(out, "%*s", pad, "");
    if (!last) fputs("  ", out);
}

static void table_text(FILE *out, const Table *t, UnitSystem units)
{
    int width[MAX_COLUMNS];
    char text[CELL];
    for (int c = 0; c < t->ncolumn; c++) {
        width[c] = width_of(heading(t, c, units, text));
        for (int r = 0; r < t->nrow; r++) {
            const int w = width_of(shown(t, r, c, units, false, text));
            if (w > width[c]) width[c] = w;
        }
    }
    if (t->title) fprintf(out, "%s\n", t->title);
    for (int r = -1; r < t->nrow; r++) {
        fputs("  ", out);
        for (int c = 0; c < t->ncolumn; c++)
            padded(out, r < 0 ? heading(t, c, units, text) : shown(t, r, c, units, false, text), width[c],
                   t->column[c].quantity != Q_TEXT, c == t->ncolumn - 1);
        fputc('\n', out);
    }
}

/* Lines of at most 110 characters, indented after the first. */
static void wrapped(FILE *out, const char *label, const char *text)
{
    int column = fprintf(out, "%s", label);
    const int indent = column;
    while (*text) {
        const size_t word = strcspn(text, " ");
        if (column > indent && column + (int)word > 110) column = fprintf(out, "\n%*s", indent, "") - 1;
        column += fprintf(out, "%.*s", (int)word, text);
        text += word;
        if (*text == ' ') {
            column += fprintf(out, " ");
            text++;
        }
    }
    fputc('\n', out);
}

static void joined(FILE *out, const char *label, int n, const char *const *list)
{
    char text[8000];
    size_t used = 0;
    text[0] = 0;
    for (int i = 0; i < n && used < sizeof text - 400; i++)
        used += (size_t)snprintf(text + used, sizeof text - used, "%s%.300s", i ? "; " : "", list[i]);
    if (n > 0) wrapped(out, label, text);
}

static void notes_text(FILE *out, const EfNotes *n)
{
    for (int i = 0; i < n->ncaution; i++) wrapped(out, "caution      ", n->caution[i]);
    joined(out, "defaults     ", n->ndefault, n->default_used);
    joined(out, "NOT CHECKED  ", n->nnot_checked, n->not_checked);
    joined(out, "run          ", n->ndraft, n->draft);
}

static void write_text(FILE *out, const Document *d, UnitSystem units)
{
    for (int i = 0; i < d->nhead; i++) fprintf(out, "%s\n", d->head[i]);
    for (int i = 0; i < d->ntable; i++) {
        if (i > 0 || d->nhead > 0) fputc('\n', out);
        table_text(out, &d->table[i], units);
    }
    if (d->notes) fputc('\n', out);
    if (d->notes) notes_text(out, d->notes);
    for (int i = 0; i < d->nfoot; i++) fprintf(out, "%s\n", d->foot[i]);
}

/* ---- CSV (RFC 4180), notes as comment lines ----------------------------------------------------------------------------- */

static void csv_cell(FILE *out, const char *s)
{
    if (!strpbrk(s, ",\"\n")) {
        fputs(s, out);
        return;
    }
    fputc('"', out);
    for (; *s; s++) {
        if (*s == '"') fputc('"', out);
        fputc(*s, out);
    }
    fputc('"', out);
}

static void csv_notes(FILE *out, const char *label, int n, const char *const *list)
{
    for (int i = 0; i < n; i++) fprintf(out, "# %s: %s\r\n", label, list[i]);
}

static void write_csv(FILE *out, const Document *d, UnitSystem units)
{
    char text[CELL];
    for (int i = 0; i < d->nhead; i++) fprintf(out, "# %s\r\n", d->head[i]);
    for (int i = 0; i < d->ntable; i++) {
        const Table *t = &d->table[i];
        if (t->title) fprintf(out, "# %s\r\n", t->title);
        for (int r = -1; r < t->nrow; r++) {
            for (int c = 0; c < t->ncolumn; c++) {
                if (c) fputc(',', out);
                csv_cell(out, r < 0 ? heading(t, c, units, text) : shown(t, r, c, units, true, text));
            }
            fputs("\r\n", out);
        }
    }
    if (!d->notes) return;
    csv_notes(out, "caution", d->notes->ncaution, d->notes->caution);
    csv_notes(out, "default", d->notes->ndefault, d->notes->default_used);
    csv_notes(out, "NOT CHECKED", d->notes->nnot_checked, d->notes->not_checked);
}

/* ---- JSON (RFC 8259) ---------------------------------------------------------------------------------------------------- */

static void json_text(FILE *out, const char *s)
{
    fputc('"', out);
    for (; *s; s++) {
        if (*s == '"' || *s == '\\') fputc('\\', out);
        if ((unsigned char)*s < 32) fprintf(out, "\\u%04x", (unsigned)*s);
        else fputc(*s, out);
    }
    fputc('"', out);
}

static void json_list(FILE *out, const char *name, int n, const char *const *list, const char *end)
{
    fprintf(out, "  \"%s\": [", name);
    for (int i = 0; i < n; i++) {
        if (i) fputs(", ", out);
        json_text(out, list[i]);
    }
    fprintf(out, "]%s\n", end);
}

static void json_table(FILE *out, const Table *t, UnitSystem units)
{
    char text[CELL];
    fputs("    {\"title\": ", out);
    json_text(out, t->title ? t->title : "");
    fputs(", \"columns\": [", out);
    for (int c = 0; c < t->ncolumn; c++) {
        fprintf(out, "%s{\"heading\": ", c ? ", " : "");
        json_text(out, t->column[c].heading);
        fputs(", \"unit\": ", out);
        json_text(out, unit_label(units, t->column[c].quantity));
        fputc('}', out);
    }
    fputs("],\n     \"rows\": [", out);
    for (int r = 0; r < t->nrow; r++) {
        fputs(r ? ",\n       [" : "\n       [", out);
        for (int c = 0; c < t->ncolumn; c++) {
            const char *s = shown(t, r, c, units, true, text);
            if (c) fputs(", ", out);
            if (t->cell[r * t->ncolumn + c].text) json_text(out, s);
            else fputs(s[0] ? s : "null", out);
        }
        fputc(']', out);
    }
    fputs("]}", out);
}

static void write_json(FILE *out, const Document *d, UnitSystem units)
{
    fputs("{\n", out);
    json_list(out, "head", d->nhead, d->head, ",");
    fputs("  \"tables\": [\n", out);
    for (int i = 0; i < d->ntable; i++) {
        json_table(out, &d->table[i], units);
        fputs(i + 1 < d->ntable ? ",\n" : "\n", out);
    }
    const EfNotes none = {0}, *n = d->notes ? d->notes : &none;
    fputs("  ],\n", out);
    json_list(out, "cautions", n->ncaution, n->caution, ",");
    json_list(out, "defaults", n->ndefault, n->default_used, ",");
    json_list(out, "not checked", n->nnot_checked, n->not_checked, ",");
    json_list(out, "sources", n->nsource, n->source, ",");
    json_list(out, "draft because", n->ndraft, n->draft, "");
    fputs("}\n", out);
}

/* ---- Markdown --------------------------------------------------------------------------------------------------------------- */

static void markdown_cell(FILE *out, const char *s)
{
    for (; *s; s++) {
        if (*s == '|' || *s == '*' || *s == '_' || *s == '<') fputc('\\', out);
        fputc(*s, out);
    }
}

static void markdown_list(FILE *out, const char *label, int n, const char *const *list)
{
    for (int i = 0; i < n; i++) {
        fprintf(out, "- %s: ", label);
        markdown_cell(out, list[i]);
        fputc('\n', out);
    }
}

static void write_markdown(FILE *out, const Document *d, UnitSystem units)
{
    char text[CELL];
    for (int i = 0; i < d->nhead; i++) fprintf(out, "%s%s\n\n", i ? "" : "# ", d->head[i]);
    for (int i = 0; i < d->ntable; i++) {
        const Table *t = &d->table[i];
        if (t->title) fprintf(out, "## %s\n\n", t->title);
        for (int r = -2; r < t->nrow; r++) {
            if (r == -1) continue;
            for (int c = 0; c < t->ncolumn; c++) {
                fputs("| ", out);
                markdown_cell(out, r < 0 ? heading(t, c, units, text) : shown(t, r, c, units, false, text));
                fputc(' ', out);
            }
            fputs("|\n", out);
            for (int c = 0; r == -2 && c < t->ncolumn; c++) fputs(t->column[c].quantity == Q_TEXT ? "|---" : "|---:", out);
            if (r == -2) fputs("|\n", out);
        }
        fputc('\n', out);
    }
    if (!d->notes) return;
    markdown_list(out, "caution", d->notes->ncaution, d->notes->caution);
    markdown_list(out, "default", d->notes->ndefault, d->notes->default_used);
    markdown_list(out, "NOT CHECKED", d->notes->nnot_checked, d->notes->not_checked);
}

static const Writer writers[] = {{"text", write_text}, {"csv", write_csv}, {"json", write_json}, {"md", write_markdown}};

const Writer *writer(size_t i) { return i < sizeof writers / sizeof *writers ? &writers[i] : NULL; }

const Writer *writer_named(const char *name)
{
    for (size_t i = 0; writer(i); i++)
        if (strcmp(writers[i].name, name) == 0) return &writers[i];
    return NULL;
}
