/* core.c - arenas, failure messages, progress.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "core/core.h"

#include "endfix/run.h"

#include <signal.h>
#include <stdarg.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

/* The sanitizer build sets 0: every array is a block of its own, so that an overrun is seen. */
#ifndef ARENA_BLOCK
#define ARENA_BLOCK ((size_t)1 << 18)
#endif

enum { ALIGNMENT = 64 };

struct ArenaBlock {
    ArenaBlock *below;
    unsigned char *bytes; /* aligned start */
    size_t used, size;
};

static bool allocation_fails(EfContext *cx)
{
    cx->allocations++;
    return cx->fail_after > 0 && --cx->fail_after == 0;
}

static void *out_of_memory(EfContext *cx)
{
    if (cx->status == EF_OK) cx->status = EF_E_MEMORY;
    return NULL;
}

static ArenaBlock *block_new(EfContext *cx, size_t need)
{
    size_t size = need > ARENA_BLOCK ? need : ARENA_BLOCK;
    if (allocation_fails(cx) || size > SIZE_MAX - 2 * ALIGNMENT - sizeof(ArenaBlock)) return NULL;
    /* The header sits in the first 64 bytes: the data that follows stays aligned and exact. */
    void *raw = NULL;
    if (posix_memalign(&raw, ALIGNMENT, ALIGNMENT + size) != 0) return NULL;
    ArenaBlock *b = raw;
    *b = (ArenaBlock){.bytes = (unsigned char *)raw + ALIGNMENT, .size = size};
    return b;
}

void *arena_take(EfContext *cx, Arena *arena, size_t n, size_t size)
{
    if (n == 0) n = 1;
    if (n > (SIZE_MAX - ALIGNMENT) / size) return out_of_memory(cx);
    const size_t need = n * size;
    ArenaBlock *b = arena->top;
    const size_t start = b ? (b->used + ALIGNMENT - 1) / ALIGNMENT * ALIGNMENT : 0;
    if (b && start <= b->size && need <= b->size - start && ARENA_BLOCK > 0) {
        b->used = start + need;
        return memset(b->bytes + start, 0, need);
    }
    ArenaBlock *fresh = block_new(cx, need);
    if (!fresh) return out_of_memory(cx);
    fresh->below = b;
    fresh->used = need;
    arena->top = fresh;
    return memset(fresh->bytes, 0, need);
}

ArenaMark arena_mark(const Arena *arena)
{
    return (ArenaMark){.block = arena->top, .used = arena->top ? arena->top->used : 0};
}

void arena_rewind(Arena *arena, ArenaMark mark)
{
    while (arena->top != mark.block) {
        ArenaBlock *b = arena->top;
        arena->top = b->below;
        free(b);
    }
    if (arena->top) arena->top->used = mark.used;
}

void *core_malloc(EfContext *cx, size_t n, size_t size)
{
    if (n == 0) n = 1;
    if (n > SIZE_MAX / size || allocation_fails(cx)) return out_of_memory(cx);
    void *p = malloc(n * size);
    return p ? p : out_of_memory(cx);
}

char *keep_text(EfContext *cx, const char *text)
{
    const size_t n = strlen(text) + 1;
    char *copy = arena_take(cx, &cx->keep, n, 1);
    return copy ? memcpy(copy, text, n) : NULL;
}

char *keep_format(EfContext *cx, const char *format, ...)
{
    va_list ap;
    va_start(ap, format);
    const int n = vsnprintf(NULL, 0, format, ap);
    va_end(ap);
    if (n < 0) return NULL;
    char *text = arena_take(cx, &cx->keep, (size_t)n + 1, 1);
    if (!text) return NULL;
    va_start(ap, format);
    vsnprintf(text, (size_t)n + 1, format, ap);
    va_end(ap);
    return text;
}

EfStatus fail(EfContext *cx, EfStatus status, const char *format, ...)
{
    if (cx->status != EF_OK) return cx->status;
    cx->status = status;
    va_list ap;
    va_start(ap, format);
    const int n = vsnprintf(NULL, 0, format, ap);
    va_end(ap);
    /* Not counted by fail_after: a failing message must not hide the failure. */
    cx->text = n < 0 ? NULL : malloc((size_t)n + 1);
    if (!cx->text) return status;
    va_start(ap, format);
    vsnprintf(cx->text, (size_t)n + 1, format, ap);
    va_end(ap);
    return status;
}

void progress(EfContext *cx, const char *what, double done)
{
    if (cx->progress) cx->progress(cx->progress_user, what, done);
}

static volatile sig_atomic_t interrupted;

void ef_interrupt(void) { interrupted = 1; }

bool keep_going(void) { return !interrupted; }

EfContext *ef_open(void) { return calloc(1, sizeof(EfContext)); }

void ef_close(EfContext *cx)
{
    if (!cx) return;
    arena_rewind(&cx->keep, (ArenaMark){0});
    arena_rewind(&cx->tmp, (ArenaMark){0});
    free(cx->text);
    free(cx);
}

static const struct {
    int exit;
    const char *text;
} statuses[] = {
#define EF_ROW(name, exit, text) {exit, text},
    EF_STATUS_LIST(EF_ROW)
#undef EF_ROW
};

const char *ef_message(const EfContext *cx)
{
    if (cx->status == EF_OK) return "";
    return cx->text ? cx->text : statuses[cx->status].text;
}

int ef_exit_status(EfStatus status) { return statuses[status].exit; }
