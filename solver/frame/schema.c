/* schema.c - the key tables as a JSON Schema.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "frame/schema.h"

#include <stdarg.h>
#include <stdio.h>
#include <string.h>

#include "frame/keys.h"

enum { ROOM = 1 << 17 };

typedef struct Text {
    char *at;
    size_t used;
} Text;

static void add(Text *t, const char *format, ...) __attribute__((format(printf, 2, 3)));
static void add(Text *t, const char *format, ...)
{
    va_list ap;
    va_start(ap, format);
    const int n = vsnprintf(t->at + t->used, ROOM - t->used, format, ap);
    va_end(ap);
    if (n > 0) t->used += (size_t)n < ROOM - t->used ? (size_t)n : ROOM - t->used - 1;
}

static const char *const types[] = {
    [KEY_TEXT] = "\"type\": [\"string\", \"number\", \"null\"]",
    [KEY_BOOL] = "\"type\": \"boolean\"",
    [KEY_QUANTITY] = "\"type\": [\"number\", \"string\"]",
    [KEY_VECTOR] = "\"type\": \"array\", \"minItems\": 3, \"maxItems\": 3, \"items\": {\"type\": [\"number\", \"string\"]}",
    [KEY_NAMES] = "\"type\": [\"string\", \"array\"]",
    [KEY_MAP] = "\"type\": \"object\"",
    [KEY_ANY] = "",
};

static void add_map(Text *t, const Key *keys, int depth);

static void add_key(Text *t, const Key *k, int depth)
{
    add(t, "%*s\"%s\": {\"description\": \"%s\"", 2 * depth, "", k->name, k->help);
    if (k->kind == KEY_MAP && k->named) {
        /* entries by name; the short forms of tubes and supports are lists and words */
        const bool short_form = strcmp(k->name, "tubes") == 0 || strcmp(k->name, "supports") == 0;
        add(t, ", \"type\": \"object\", \"additionalProperties\": ");
        if (short_form) add(t, "{\"anyOf\": [{\"type\": [\"array\", \"string\"]}, ");
        add_map(t, k->inside, depth + 1);
        if (short_form) add(t, "]}");
    } else if (k->kind == KEY_MAP) {
        add(t, ", \"allOf\": [");
        add_map(t, k->inside, depth + 1);
        add(t, "]");
    } else if (types[k->kind][0]) add(t, ", %s", types[k->kind]);
    add(t, "}");
}

static void add_map(Text *t, const Key *keys, int depth)
{
    bool first = true;
    add(t, "{\"type\": \"object\", \"additionalProperties\": false,\n%*s\"required\": [", 2 * depth, "");
    for (const Key *k = keys; k->name; k++) {
        if (!k->required) continue;
        add(t, "%s\"%s\"", first ? "" : ", ", k->name);
        first = false;
    }
    add(t, "],\n%*s\"properties\": {\n", 2 * depth, "");
    for (const Key *k = keys; k->name; k++) {
        add_key(t, k, depth + 1);
        add(t, k[1].name ? ",\n" : "\n");
    }
    add(t, "%*s}}", 2 * depth, "");
}

const char *frame_schema(EfContext *cx)
{
    Text t = {.at = arena_take(cx, &cx->keep, ROOM, 1)};
    if (!t.at) return NULL;
    add(&t, "{\"$schema\": \"https://json-schema.org/draft/2020-12/schema\",\n \"title\": \"endfix frame file\",\n \"allOf\": [");
    add_map(&t, keys_top, 1);
    add(&t, "]}\n");
    return t.at;
}
