/* status.h - how a call went, and the context every call takes.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef ENDFIX_STATUS_H
#define ENDFIX_STATUS_H

/* name, exit status of the program, meaning */
#define EF_STATUS_LIST(X)                                                                  \
    X(OK, 0, "done")                                                                       \
    X(E_INPUT, 2, "the frame file or an option is wrong")                                  \
    X(E_MECHANISM, 2, "the frame can move without straining: it is a mechanism")           \
    X(E_TALLY, 3, "the tally of critical factors or an iteration was not completed")       \
    X(E_IO, 4, "a file could not be read or written")                                      \
    X(E_MEMORY, 4, "out of memory")

typedef enum EfStatus {
#define EF_ROW(name, exit, text) EF_##name,
    EF_STATUS_LIST(EF_ROW)
#undef EF_ROW
} EfStatus;

/* Memory, first failure and progress of one piece of work. One thread per context. */
typedef struct EfContext EfContext;

/* A new context, or NULL without memory. Everything obtained through it lives until ef_close. */
EfContext *ef_open(void);

/* Frees the context and all that was obtained through it. NULL is allowed. */
void ef_close(EfContext *cx);

/* What went wrong in words: one line, or one line a fault for a frame file. "" after EF_OK.
 * Owned by the context; valid until the next call that takes it. */
const char *ef_message(const EfContext *cx);

/* The program's exit status for a status (0, 2, 3 or 4). */
int ef_exit_status(EfStatus status);

#endif
