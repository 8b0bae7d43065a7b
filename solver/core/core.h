/* core.h - context: arenas for all memory, the first failure in words, progress.
 * The library never prints and never exits; it allocates only here.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef CORE_CORE_H
#define CORE_CORE_H

#include <stdbool.h>
#include <stddef.h>

#include "endfix/status.h"

typedef struct ArenaBlock ArenaBlock;
typedef struct Arena {
    ArenaBlock *top; /* newest block first */
} Arena;
typedef struct ArenaMark {
    ArenaBlock *block;
    size_t used;
} ArenaMark;

struct EfContext {
    Arena keep;      /* lives as long as the context: frames, results */
    Arena tmp;       /* scratch: mark, use, rewind */
    EfStatus status; /* first failure, or EF_OK */
    char *text;      /* message of the first failure (heap), or NULL */
    long fail_after; /* tests only: the n-th allocation from now fails; 0 = never */
    long allocations;
    void (*progress)(void *user, const char *what, double done);
    void *progress_user;
};

#define TRY(call)                      \
    do {                               \
        EfStatus st_ = (call);         \
        if (st_ != EF_OK) return st_;  \
    } while (0)

/* ALLOC(cx, keep, p, n): n zeroed items for p from an arena, or return the failure. */
#define ALLOC(cx, arena, p, n)                                               \
    do {                                                                     \
        (p) = arena_take((cx), &(cx)->arena, (size_t)(n), sizeof *(p));      \
        if (!(p)) return (cx)->status;                                       \
    } while (0)

/* Zeroed memory for n items of `size` bytes, 64-byte aligned; never NULL for n = 0.
 * NULL: the failure is recorded (E_MEMORY). */
void *arena_take(EfContext *cx, Arena *arena, size_t n, size_t size);
ArenaMark arena_mark(const Arena *arena);
/* Gives back all that was taken since the mark. */
void arena_rewind(Arena *arena, ArenaMark mark);

/* Heap memory for libraries and growing buffers; counted by fail_after like the arenas.
 * Free with free(). */
void *core_malloc(EfContext *cx, size_t n, size_t size);

/* Copies of text in the keep arena; NULL: recorded. */
char *keep_text(EfContext *cx, const char *text);
char *keep_format(EfContext *cx, const char *format, ...) __attribute__((format(printf, 2, 3)));

/* The nearest of n known words, the first among equals; NULL when none is near (a letter wrong in three). */
const char *nearest_word(const char *word, size_t n, const char *const *known);

/* Records the first failure (later ones are consequences) and returns its status. */
EfStatus fail(EfContext *cx, EfStatus status, const char *format, ...)
    __attribute__((format(printf, 3, 4)));

void progress(EfContext *cx, const char *what, double done);

/* true while the user has not asked to stop (ef_interrupt). */
bool keep_going(void);

#endif
