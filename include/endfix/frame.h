/* frame.h - the frame as the user wrote it: SI units, names resolved to indices.
 * All arrays are owned by the context that read the frame. Index -1 means "none".
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef ENDFIX_FRAME_H
#define ENDFIX_FRAME_H

#include <stdbool.h>

#include "endfix/status.h"

/* A place in the frame file; line 0 = not from a file. 1-based. */
typedef struct EfMark {
    int line, column;
} EfMark;

/* Directions, in this order everywhere: x y z rx ry rz. Masks hold bit (1 << direction). */
enum { EF_X, EF_Y, EF_Z, EF_RX, EF_RY, EF_RZ, EF_DIRECTIONS };

/* ---- materials ------------------------------------------------------------------------- */
/* Stresses Pa, density kg/m3. NaN where a value is not known. */
typedef struct EfMaterial {
    const char *name;
    double E, E_compression, G, nu, density, expansion; /* expansion 1/K */
    double yield, yield_compression, ultimate;
    double welded_yield, welded_ultimate; /* beside a weld */
    double ramberg_osgood_n;
    const char *column_rule; /* name of a column rule, or NULL: the default rule */
    const char *source;      /* where the values come from, or NULL */
    const char *status;      /* "source", "memory" or "user" */
    bool weldable;
    bool builtin; /* from the built-in list */
    EfMark mark;
} EfMaterial;

/* ---- sizes ------------------------------------------------------------------------------ */
#define EF_SECTION_PARAMETERS 8

/* Section values about the local axes; Iy bends in the x-z plane. Area m2, inertia m4, lengths m. */
typedef struct EfSection {
    double A, Iy, Iz, J;
    double As_y, As_z;       /* shear areas, m2 */
    double depth_y, depth_z; /* outside size along local y and z, m; NaN when not given */
    double wall;             /* m; NaN for solid or given values */
    bool round;              /* same in every direction: Iy == Iz and stresses by the resultant moment */
} EfSection;

typedef struct EfSize {
    const char *name;
    const char *kind;                         /* section kind: "round", "square", ... */
    double parameter[EF_SECTION_PARAMETERS];  /* as the section kind lists them, SI */
    int material;
    EfSection section;
    const char *text; /* the size as written, for tables: "19.05 x 0.889" */
    EfMark mark;
} EfSize;

/* ---- joints, tubes, guys, supports ------------------------------------------------------- */
typedef struct EfJoint {
    const char *name;
    double x[3]; /* m */
    EfMark mark;
} EfJoint;

typedef struct EfTube {
    const char *name;
    const char *group; /* tube group, or NULL */
    int end[2];        /* joints: from, to */
    int size;
    double up[3];            /* local z lies in the plane of x and up; all zero: default */
    double offset[2][3];     /* tube end minus joint, global axes, m */
    unsigned release[2];     /* mask of local directions set free, per end */
    double spring[2][EF_DIRECTIONS]; /* semi-rigid end in series, local; N/m or N m/rad; INFINITY = rigid */
    double bow;              /* bow / length; 0 = straight */
    double bow_toward[3];    /* direction of the bow; all zero: that of the governing shape */
    EfMark mark;
} EfTube;

typedef struct EfGuy {
    const char *name;
    int end[2];
    double EA, pretension;    /* N */
    double mass_per_length;   /* kg/m */
    double breaking_load;     /* N; NaN if not given */
    EfMark mark;
} EfGuy;

typedef struct EfSupport {
    int joint;
    unsigned held;                /* mask, in the support's own axes */
    double spring[EF_DIRECTIONS]; /* N/m, N m/rad; 0 = none */
    double movement[EF_DIRECTIONS]; /* prescribed, m or rad, in held directions */
    bool skew;                    /* axes differ from the global ones */
    double axes[3][3];            /* rows: the support's x, y, z in global components */
    EfMark mark;
} EfSupport;

typedef struct EfEquipment {
    const char *name;
    double mass; /* kg */
    double at[3];
    int ncarrier;
    const int *carrier; /* joints */
    EfMark mark;
} EfEquipment;

/* ---- loads and cases --------------------------------------------------------------------- */
typedef enum EfLoadKind {
    EF_LOAD_JOINT,   /* force N and moment N m at joints (njoint > 1: spread by least squares) */
    EF_LOAD_TUBE,    /* force per length N/m along tubes, global axes, per length of tube */
    EF_LOAD_INERTIA, /* every mass gets a force of g9.80665 x mass x factor vector */
    EF_LOAD_WARM     /* tubes warmed by kelvin */
} EfLoadKind;

typedef struct EfLoad {
    EfLoadKind kind;
    bool steady;
    double force[3];  /* N, N/m, or multiples of weight */
    double moment[3]; /* N m; joint loads only */
    double warm;      /* K */
    int njoint, ntube;
    const int *joint, *tube;
    EfMark mark;
} EfLoad;

typedef enum EfLevel { EF_LEVEL_LIMIT, EF_LEVEL_ULTIMATE } EfLevel;

/* What exit status 1 compares with; NaN in a case: the frame's own value counts. */
typedef struct EfRequired {
    double critical_factor, collapse_factor, margin, guys_taut_to;
} EfRequired;

typedef struct EfCase {
    const char *name;
    EfLevel level;
    double ultimate_factor; /* 1 for ultimate level */
    const char *source;     /* or NULL */
    bool both_ways;
    int nload;
    const EfLoad *load;
    EfRequired required;
    EfMark mark;
} EfCase;

/* Sum of cases; factors multiply the loads as written, ultimate factors of the parts do not enter. */
typedef struct EfCombination {
    const char *name;
    EfLevel level;
    double ultimate_factor;
    bool both_ways;
    int npart;
    const int *part;      /* cases */
    const double *factor;
    EfRequired required;
    EfMark mark;
} EfCombination;

/* ---- the hand sheet ------------------------------------------------------------------------ */
typedef struct EfHandLine {
    int tube;
    int run;      /* index over cases, then combinations */
    double c;     /* NaN unless given (K is turned into c) */
    double critical_load, nominal_strength; /* N; NaN unless given */
    double length; /* m; NaN: joint to joint */
    EfMark mark;
} EfHandLine;

typedef struct EfPeople {
    const char *prepared, *checked, *drawing, *revision; /* or NULL */
} EfPeople;

/* ---- the frame ------------------------------------------------------------------------------ */
typedef struct EfFrame {
    const char *path, *title;
    char input_sha256[65]; /* over the file and its CSV tables */
    bool shear_flexible;

    int nmaterial, nsize, njoint, ntube, nguy, nsupport, nequipment, ncase, ncombination, nhand;
    EfMaterial *material;
    EfSize *size;
    EfJoint *joint;
    EfTube *tube;
    EfGuy *guy;
    EfSupport *support;
    EfEquipment *equipment;
    EfCase *cases;
    EfCombination *combination;
    EfHandLine *hand;

    EfRequired required;
    double fixity_credit;              /* most c that margins may use while joints are rigid */
    const char *fixity_credit_because; /* reason given in the file, or NULL */
    EfPeople people;
} EfFrame;

#endif
