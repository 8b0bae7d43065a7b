/* run.h - read a frame, run the whole job, write and read results.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef ENDFIX_RUN_H
#define ENDFIX_RUN_H

#include "endfix/frame.h"
#include "endfix/results.h"
#include "endfix/status.h"

typedef struct EfOptions {
    int count;             /* critical factors wanted per case; 0: 6 */
    bool both_signs;       /* also the factors of the reversed growing loads */
    double guess_c;        /* a guess for every compressed tube; 0: none */
    const char *only_case; /* name of the one case to run; NULL: all */
    const char *export_matrices; /* folder for K and K_G in Matrix Market form; NULL: none */
    void (*progress)(void *user, const char *what, double done); /* NULL: silent; done 0..1 */
    void *progress_user;
} EfOptions;

/* Reads and validates a frame file (YAML or JSON). All faults are in ef_message.
 *   frame  out, owned by cx */
EfStatus ef_read_frame(EfContext *cx, const char *path, EfFrame **frame);

/* The same from memory; `name` stands for the path in messages, CSV tables are not allowed. */
EfStatus ef_read_frame_text(EfContext *cx, const char *name, const char *text, long length, EfFrame **frame);

/* The whole job on a frame: statics, critical factors with tally, witness, fixity, ledger, margins.
 *   options  NULL: all defaults
 *   results  out, owned by cx; points into frame */
EfStatus ef_run(EfContext *cx, const EfFrame *frame, const EfOptions *options, EfResults **results);

/* Writes results to an HDF5 file, whole or not at all (old file intact on failure). */
EfStatus ef_write_results(EfContext *cx, const EfResults *results, const char *path);

/* Reads a results file back; `frame` inside is as complete as the file holds. */
EfStatus ef_read_results(EfContext *cx, const char *path, EfResults **results);


/* Asks a running job to stop at the next safe point; may be called from a signal handler. */
void ef_interrupt(void);

#endif
