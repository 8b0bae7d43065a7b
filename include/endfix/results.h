/* results.h - what a run finds. Everything a table, the report or `why` shows is here, and
 * nothing else: the results file stores exactly these structs.
 *
 * Shapes are given as [rows][columns], row-major. nj joints, nt tubes, nm shapes of the case,
 * np points of line data. NaN means "does not apply"; it never means "failed".
 * All of a case is at the level of the strength check (a limit case times its ultimate factor).
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef ENDFIX_RESULTS_H
#define ENDFIX_RESULTS_H

#include "endfix/frame.h"

/* Part of a tube in a shape. */
typedef enum EfRole {
    EF_ROLE_IDLE,    /* does not move */
    EF_ROLE_RIDING,  /* moves without bending */
    EF_ROLE_BRACING, /* stores more than it loses: it holds */
    EF_ROLE_LEANING  /* loses at least as much as it stores, and 5 % of all: it drives the shape */
} EfRole;

/* How the search for critical factors ended. */
typedef enum EfOutcome {
    EF_FOUND,         /* factors found, tally complete */
    EF_NONE,          /* nothing is compressed: no finite factor, proven by count */
    EF_NONE_BELOW,    /* none below the factor searched to (counted_at) */
    EF_STEADY_BUCKLES,/* the steady loads alone buckle the frame */
    EF_TALLY_SHORT    /* counted more than found */
} EfOutcome;

typedef enum EfState { EF_STATE_OK, EF_STATE_CLOSE, EF_STATE_NEGATIVE, EF_STATE_NONE } EfState;

typedef enum EfVerdict {
    EF_VERDICT_AGREES, EF_VERDICT_SAFE, EF_VERDICT_UNSAFE, EF_VERDICT_NOT_COMPARABLE
} EfVerdict;

/* The factors of one sign, ascending in size. */
typedef struct EfCritical {
    EfOutcome outcome;
    int nmode;
    double *factor;     /* [nm] */
    double *residual;   /* [nm] ||K phi + factor Kg phi|| / ||K phi|| */
    double *mesh_error; /* [nm] bound on the relative error of factor by the finite number of bubbles */
    int counted;        /* critical factors proven to lie between 0 and counted_at */
    int found;          /* of them found */
    double counted_at;
    double *shape;      /* [nm][nj][6], largest movement of joints and tubes (else rotation) 1 */
    double *line;       /* [nm][np][3], the same along the tubes */
    double *lost;       /* [nm][nt] share of the energy lost by compression */
    double *stored;     /* [nm][nt] share of the energy stored */
    double *lost_others, *stored_others; /* [nm] guys, springs, equipment: rows sum to 1 with them */
    int *role;          /* [nm][nt] EfRole */
    int *family;        /* [nm] shapes with (nearly) equal factors carry the same number, from 0 */
    const char **kind;  /* [nm] kind of failure in words */
} EfCritical;

/* Fixity of every tube in one case; [nt] unless said. */
typedef struct EfFixity {
    double own_at;         /* factor on the growing loads at which own c holds: 1, less where the frame buckles before */
    double *frame_c;       /* from the lowest factor in whose shape the tube leans */
    double *own_critical;  /* N, own critical compression, neighbours at the case load; negative: must be pulled */
    double *own_c;         /* own_critical over the pinned-end Euler load on joint-to-joint length */
    double *own_plane;     /* [nt][3] direction in which it bows, global */
    double *second_c;      /* own c in the second direction */
    double *clear_c;       /* own c on the clear length */
    double *reserve;       /* factor at which its own check is reached; NaN: frame governs */
    double *safe_c;        /* c the hand calculator may use */
    double *safe_at;       /* factor at which safe_c holds */
    int *role;             /* EfRole in the lowest shape in which it takes part */
    int *shape_of;         /* lowest shape in which the tube leans, -1 none */
    const char **note;     /* "tension", "sways", "leaned on", "idle", "frame governs", or "" */
    double *end_stiffness; /* [nt][2][2][2] N m/rad, rotational restraint by the rest, local y z, per end */
} EfFixity;

/* A row of the margin table. tube -1: the frame itself. */
typedef struct EfMargin {
    int tube;
    const char *check;  /* registry name of the check */
    const char *rule;   /* column rule or formula used */
    double demand;      /* N, or factor required for the frame */
    double strength;    /* nominal strength, N, or factor found for the frame */
    double c_used, c_found;
    double margin;      /* strength / demand - 1 */
    EfState state;
    const char *note;   /* "" or a caution on this row */
} EfMargin;

typedef struct EfLedgerRow {
    int tube;
    double hand_c, hand_strength, hand_factor;      /* by the tube's column rule */
    double frame_c, frame_strength, frame_factor;   /* same rule, real fixity */
    double hand_elastic, frame_elastic;             /* both by Euler alone */
    double percent;                                 /* (frame / hand - 1) x 100 */
    EfVerdict verdict;
    const char *verdict_text;                       /* "unsafe by 14 %", rounded against the user */
    const char *because;
    bool assumed;                                   /* from --c, not from the hand sheet */
} EfLedgerRow;

/* One balance of forces about the origin: force N then moment N m, global. */
typedef struct EfBalance {
    double applied[6], inertia[6], reactions[6];
    double residual; /* largest left-over over the largest force of the balance */
} EfBalance;

/* The second engine's view: exact members, axial forces only. */
typedef struct EfWitness {
    double factor;           /* lowest positive factor; NaN: none */
    int counted;             /* its count at 0.999999 x of its factor: must be 0 */
    double difference;       /* (engine 1 / witness - 1) */
    double axial_difference; /* largest |N1 - N2| over the largest |N| */
} EfWitness;

typedef struct EfCaseResult {
    const char *name;
    EfLevel level;
    double ultimate_factor;
    bool reversed, combination;
    int run;                    /* index over cases, then combinations */
    EfRequired required;

    double *displacement;       /* [nj][6] m, rad */
    int nreaction;
    int *reaction_joint;        /* [nreaction] */
    double *reaction;           /* [nreaction][6] N, N m, global */
    double *axial;              /* [nt] N, tension positive, mid-tube */
    double *axial_min;          /* [nt] N, least (most compressed) along the tube */
    double *axial_growing;      /* [nt] N, the growing part of axial */
    double *end_force;          /* [nt][2][6] N, N m, local: force of the joint on the tube end */
    double *end_force_limit;    /* [nt][2][6] the same at limit level (yield is checked there) */
    double *station_moment;     /* [nt][5][2] N m, My Mz at 0, 1/4, 1/2, 3/4, 1 */
    EfBalance balance;

    bool free_body;
    double n_at_cg[3];          /* load factor (force over weight) at the centre of mass */
    double angular_acceleration[3]; /* rad/s2 */

    bool has_steady;
    EfCritical critical;        /* growing loads as given */
    EfCritical negative;        /* growing loads reversed; nmode 0 unless asked */
    bool has_negative;
    double all_grow_factor;     /* lowest factor when steady loads grow too; NaN without steady loads */
    double steady_factor;       /* factor on the steady loads alone; NaN: none or not computed */
    EfWitness witness;

    EfFixity fixity;
    int nmargin;
    EfMargin *margin;
    int nledger;
    EfLedgerRow *ledger;
} EfCaseResult;

typedef struct EfNotes {
    int ncaution, ndefault, nnot_checked, nsource, ndraft;
    const char **caution, **default_used, **not_checked, **source, **draft;
} EfNotes;

typedef struct EfResults {
    const char *program, *version;
    const EfFrame *frame;
    double *length, *clear_length; /* [nt] m */
    double *tube_mass;             /* [nt] kg */
    double mass, tubes_mass, guys_mass, equipment_mass; /* kg */
    double centre_of_mass[3];
    int npoint;                    /* line data: points along the tubes */
    double *point_position;        /* [np][3] m */
    int *point_tube;               /* [np] */
    double *point_station;         /* [np] 0 to 1 */
    int ncase;
    EfCaseResult *cases;
    EfNotes notes;
    int exit_status;               /* 0 or 1 by verdict, 3 if a tally is short */
} EfResults;

#endif
