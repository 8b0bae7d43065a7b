/* options.c - exact option names, no abbreviations: a script must not change its meaning with a new option.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "cli/options.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

typedef struct Option {
    const char *name, *value; /* value NULL: a switch */
    const char *help;
    bool (*take)(Arguments *a, const char *value, const char *name); /* switches: value NULL */
} Option;

static bool complain(const char *name, const char *value, const char *wanted)
{
    fprintf(stderr, "endfix: %s %s: %s\n", name, value, wanted);
    return false;
}

static bool take_case(Arguments *a, const char *v, const char *n)
{
    (void)n;
    a->filter.case_name = v;
    a->run.only_case = v;
    return true;
}

static bool take_tube(Arguments *a, const char *v, const char *n)
{
    (void)n;
    a->filter.tube = v;
    return true;
}

static bool take_c(Arguments *a, const char *v, const char *n)
{
    char *end;
    a->run.guess_c = strtod(v, &end);
    return (*end == 0 && a->run.guess_c > 0 && a->run.guess_c <= 100) || complain(n, v, "a number greater than 0 is wanted, such as 2");
}

static bool take_count(Arguments *a, const char *v, const char *n)
{
    char *end;
    const long count = strtol(v, &end, 10);
    a->run.count = (int)count;
    return (*end == 0 && count >= 1 && count <= 200) || complain(n, v, "a whole number from 1 to 200 is wanted");
}

static bool take_out(Arguments *a, const char *v, const char *n)
{
    (void)n;
    a->out = v;
    return true;
}

static bool take_units(Arguments *a, const char *v, const char *n)
{
    a->units = strcmp(v, "inch") == 0 ? UNITS_INCH : UNITS_SI;
    return a->units == UNITS_INCH || strcmp(v, "si") == 0 || complain(n, v, "si or inch is wanted");
}

static bool take_as(Arguments *a, const char *v, const char *n)
{
    a->writer = writer_named(v);
    return a->writer || complain(n, v, "text, csv, json or md is wanted");
}

static bool take_matrices(Arguments *a, const char *v, const char *n)
{
    (void)n;
    a->run.export_matrices = v;
    return true;
}

#define SWITCH(function, field)                                          \
    static bool function(Arguments *a, const char *v, const char *n)    \
    {                                                                    \
        (void)v, (void)n;                                                \
        return a->field = true;                                          \
    }
SWITCH(take_both, run.both_signs)
SWITCH(take_input_only, input_only)
SWITCH(take_quiet, quiet)
SWITCH(take_strict, strict)
SWITCH(take_schema, schema)
SWITCH(take_help, help)
SWITCH(take_version, version)

static const Option options[] = {
    {"--case", "NAME", "only this case or combination", take_case},
    {"--tube", "PATTERN", "only tubes whose name matches; * and ? stand for anything", take_tube},
    {"--c", "VALUE", "a guess for the end fixity of every tube, set beside the frame's", take_c},
    {"--count", "N", "critical factors wanted per case (6)", take_count},
    {"--both-signs", NULL, "also the factors of the reversed growing loads", take_both},
    {"--input-only", NULL, "faults, doubts and weights, no loads", take_input_only},
    {"--out", "DIR", "folder for results (that of the frame file)", take_out},
    {"--units", "si|inch", "units of the tables (si)", take_units},
    {"--as", "FORM", "text, csv, json or md (text)", take_as},
    {"--export-matrices", "DIR", "also write K and K_G of every case in Matrix Market form", take_matrices},
    {"--quiet", NULL, "no table, only the exit status and messages", take_quiet},
    {"--strict", NULL, "cautions about this frame count as faults", take_strict},
    {"--schema", NULL, "with `new`: the JSON Schema of the frame file", take_schema},
    {"--help", NULL, "this list", take_help},
    {"--version", NULL, "version", take_version},
};
enum { NOPTIONS = sizeof options / sizeof options[0] };

void print_options(FILE *out)
{
    for (int i = 0; i < NOPTIONS; i++) {
        char left[64];
        snprintf(left, sizeof left, "%s %s", options[i].name, options[i].value ? options[i].value : "");
        fprintf(out, "  %-24s %s\n", left, options[i].help);
    }
}

/* The option that the argument names, by itself or before "=". */
static const Option *find(const char *arg, const char **value)
{
    const char *equals = strchr(arg, '=');
    const size_t n = equals ? (size_t)(equals - arg) : strlen(arg);
    *value = equals ? equals + 1 : NULL;
    for (int i = 0; i < NOPTIONS; i++)
        if (strlen(options[i].name) == n && strncmp(options[i].name, arg, n) == 0) return &options[i];
    return NULL;
}

static bool unknown(const char *arg)
{
    const char *known[NOPTIONS];
    for (int i = 0; i < NOPTIONS; i++) known[i] = options[i].name;
    const char *near = nearest_word(arg, NOPTIONS, known);
    fprintf(stderr, "endfix: there is no option %s.%s%s%s\n", arg, near ? " Did you mean " : " See endfix --help.", near ? near : "", near ? "?" : "");
    return false;
}

bool read_arguments(int argc, char **argv, Arguments *a)
{
    *a = (Arguments){.writer = writer(0)};
    for (int i = 1; i < argc; i++) {
        const char *value;
        if (strncmp(argv[i], "--", 2) != 0) {
            if (a->nword == 4) return complain("command line", argv[i], "one word too many");
            a->word[a->nword++] = argv[i];
            continue;
        }
        const Option *o = find(argv[i], &value);
        if (!o) return unknown(argv[i]);
        if (!o->value && value) return complain(o->name, value, "takes no value");
        if (o->value && !value && i + 1 < argc) value = argv[++i];
        if (o->value && !value) return complain(o->name, "", o->value);
        if (!o->take(a, value, o->name)) return false;
    }
    return true;
}
