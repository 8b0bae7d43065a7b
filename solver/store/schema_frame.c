/* schema_frame.c - the frame in a results file. What others refer to by index stands before them.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "endfix/frame.h"
#include "store/schema.h"

#define MARK(S) IN("mark", S, mark, T_INT, "1", "line and column in the frame file, 0 if not from a file", .dim = {2})

const char *const level_words[] = {"limit", "ultimate", NULL};
static const char *const load_words[] = {"joint", "tube", "inertia", "warm", NULL};

static const Row material_rows[] = {
    IN("name", EfMaterial, name, T_TEXT, "text", "materials"),
    IN("E", EfMaterial, E, T_DOUBLE, "Pa", "modulus in tension"),
    IN("E_compression", EfMaterial, E_compression, T_DOUBLE, "Pa", "modulus in compression"),
    IN("G", EfMaterial, G, T_DOUBLE, "Pa", "shear modulus"),
    IN("nu", EfMaterial, nu, T_DOUBLE, "1", "Poisson's ratio"),
    IN("density", EfMaterial, density, T_DOUBLE, "kg/m3", "density"),
    IN("expansion", EfMaterial, expansion, T_DOUBLE, "1/K", "thermal expansion"),
    IN("yield", EfMaterial, yield, T_DOUBLE, "Pa", "yield strength in tension"),
    IN("yield_compression", EfMaterial, yield_compression, T_DOUBLE, "Pa", "yield strength in compression"),
    IN("ultimate", EfMaterial, ultimate, T_DOUBLE, "Pa", "ultimate strength"),
    IN("welded_yield", EfMaterial, welded_yield, T_DOUBLE, "Pa", "yield strength beside a weld"),
    IN("welded_ultimate", EfMaterial, welded_ultimate, T_DOUBLE, "Pa", "ultimate strength beside a weld"),
    IN("ramberg_osgood_n", EfMaterial, ramberg_osgood_n, T_DOUBLE, "1", "Ramberg-Osgood exponent"),
    IN("column_rule", EfMaterial, column_rule, T_NAME, "text", "column rule, empty for the default"),
    IN("source", EfMaterial, source, T_NAME, "text", "where the values come from"),
    IN("status", EfMaterial, status, T_NAME, "text", "source, memory or user"),
    IN("weldable", EfMaterial, weldable, T_BOOL, "1", "may be welded"),
    IN("builtin", EfMaterial, builtin, T_BOOL, "1", "from the built-in list"),
    MARK(EfMaterial),
};
static const Table material_table = ROWS(EfMaterial, material_rows);

static const Row size_rows[] = {
    IN("name", EfSize, name, T_TEXT, "text", "sizes"),
    IN("kind", EfSize, kind, T_TEXT, "text", "kind of section"),
    IN("parameter", EfSize, parameter, T_DOUBLE, "SI", "parameters in the order of the kind", .dim = {EF_SECTION_PARAMETERS}),
    IN("material_index", EfSize, material, T_INT, "1", "index of the material", .below = NMATERIAL),
    IN("area", EfSize, section.A, T_DOUBLE, "m2", "area"),
    IN("Iy", EfSize, section.Iy, T_DOUBLE, "m4", "second moment for bending in the local x-z plane"),
    IN("Iz", EfSize, section.Iz, T_DOUBLE, "m4", "second moment for bending in the local x-y plane"),
    IN("J", EfSize, section.J, T_DOUBLE, "m4", "torsion constant"),
    IN("As_y", EfSize, section.As_y, T_DOUBLE, "m2", "shear area along local y"),
    IN("As_z", EfSize, section.As_z, T_DOUBLE, "m2", "shear area along local z"),
    IN("depth_y", EfSize, section.depth_y, T_DOUBLE, "m", "outside size along local y"),
    IN("depth_z", EfSize, section.depth_z, T_DOUBLE, "m", "outside size along local z"),
    IN("wall", EfSize, section.wall, T_DOUBLE, "m", "wall thickness"),
    IN("round", EfSize, section.round, T_BOOL, "1", "the same in every direction"),
    IN("text", EfSize, text, T_NAME, "text", "the size as written"),
    MARK(EfSize),
};
static const Table size_table = ROWS(EfSize, size_rows);

static const Row joint_rows[] = {
    IN("name", EfJoint, name, T_TEXT, "text", "joints"),
    IN("position", EfJoint, x, T_DOUBLE, "m", "position, global axes", .dim = {3}),
    MARK(EfJoint),
};
static const Table joint_table = ROWS(EfJoint, joint_rows);

static const Row tube_rows[] = {
    IN("name", EfTube, name, T_TEXT, "text", "tubes"),
    IN("group", EfTube, group, T_NAME, "text", "tube group, empty for none"),
    IN("from", EfTube, end[0], T_INT, "1", "joint index of the first end", .below = NJ),
    IN("to", EfTube, end[1], T_INT, "1", "joint index of the second end", .below = NJ),
    IN("size_index", EfTube, size, T_INT, "1", "index of the size", .below = NSIZE),
    IN("up", EfTube, up, T_DOUBLE, "1", "local z lies in the plane of x and up; zero: default", .dim = {3}),
    IN("offset", EfTube, offset, T_DOUBLE, "m", "tube end minus joint, global axes", .dim = {2, 3}),
    IN("release", EfTube, release, T_INT, "1", "bits of the local directions set free, per end", .dim = {2}, .below = 64),
    IN("spring", EfTube, spring, T_DOUBLE, "N/m, N m/rad", "springs between tube end and joint, local; inf: rigid",
       .dim = {2, EF_DIRECTIONS}),
    IN("bow", EfTube, bow, T_DOUBLE, "1", "bow over length"),
    IN("bow_toward", EfTube, bow_toward, T_DOUBLE, "1", "direction of the bow; zero: that of the governing shape", .dim = {3}),
    MARK(EfTube),
};
static const Table tube_table = ROWS(EfTube, tube_rows);

static const Row guy_rows[] = {
    IN("name", EfGuy, name, T_TEXT, "text", "guys"),
    IN("from", EfGuy, end[0], T_INT, "1", "joint index of the first end", .below = NJ),
    IN("to", EfGuy, end[1], T_INT, "1", "joint index of the second end", .below = NJ),
    IN("EA", EfGuy, EA, T_DOUBLE, "N", "stiffness"),
    IN("pretension", EfGuy, pretension, T_DOUBLE, "N", "pretension"),
    IN("mass_per_length", EfGuy, mass_per_length, T_DOUBLE, "kg/m", "mass per length"),
    IN("breaking_load", EfGuy, breaking_load, T_DOUBLE, "N", "breaking load"),
    MARK(EfGuy),
};
static const Table guy_table = ROWS(EfGuy, guy_rows);

static const Row support_rows[] = {
    IN("joint", EfSupport, joint, T_INT, "1", "joint index", .below = NJ),
    IN("held", EfSupport, held, T_INT, "1", "bits of the directions held, own axes", .below = 64),
    IN("spring", EfSupport, spring, T_DOUBLE, "N/m, N m/rad", "springs, own axes", .dim = {EF_DIRECTIONS}),
    IN("movement", EfSupport, movement, T_DOUBLE, "m, rad", "prescribed movement in held directions", .dim = {EF_DIRECTIONS}),
    IN("skew", EfSupport, skew, T_BOOL, "1", "own axes differ from the global ones"),
    IN("axes", EfSupport, axes, T_DOUBLE, "1", "rows: own x, y, z in global components", .dim = {3, 3}),
    MARK(EfSupport),
};
static const Table support_table = ROWS(EfSupport, support_rows);

static const Row equipment_rows[] = {
    IN("name", EfEquipment, name, T_TEXT, "text", "equipment"),
    IN("mass", EfEquipment, mass, T_DOUBLE, "kg", "mass"),
    IN("at", EfEquipment, at, T_DOUBLE, "m", "position of its centre of mass", .dim = {3}),
    IN("carriers", EfEquipment, ncarrier, T_INT, "1", "number of joints that carry each"),
    RAGGED("carrier", EfEquipment, carrier, ncarrier, T_INT, "joint indices, one piece of equipment after the other", .below = NJ),
    MARK(EfEquipment),
};
static const Table equipment_table = ROWS(EfEquipment, equipment_rows);

static const Row load_rows[] = {
    IN("kind", EfLoad, kind, T_WORD, "text", "kind of load", .words = load_words),
    IN("steady", EfLoad, steady, T_BOOL, "1", "does not grow with the load factor"),
    IN("force", EfLoad, force, T_DOUBLE, "N, N/m or weights", "force", .dim = {3}),
    IN("moment", EfLoad, moment, T_DOUBLE, "N m", "moment", .dim = {3}),
    IN("warm", EfLoad, warm, T_DOUBLE, "K", "warming"),
    IN("joints", EfLoad, njoint, T_INT, "1", "number of joints of each"),
    RAGGED("joint", EfLoad, joint, njoint, T_INT, "joint indices, one load after the other", .below = NJ),
    IN("tubes", EfLoad, ntube, T_INT, "1", "number of tubes of each"),
    RAGGED("tube", EfLoad, tube, ntube, T_INT, "tube indices, one load after the other", .below = NT),
    MARK(EfLoad),
};
static const Table load_table = ROWS(EfLoad, load_rows);

/* Of a case, a combination or the frame. */
#define REQUIRED(S) \
    IN("required_critical_factor", S, required.critical_factor, T_DOUBLE, "1", "least critical factor; NaN: that of the frame"), \
    IN("required_collapse_factor", S, required.collapse_factor, T_DOUBLE, "1", "least collapse factor"), \
    IN("required_margin", S, required.margin, T_DOUBLE, "1", "least margin"), \
    IN("required_guys_taut_to", S, required.guys_taut_to, T_DOUBLE, "1", "factor to which the guys must stay taut")

static const Row case_rows[] = {
    IN("name", EfCase, name, T_TEXT, "text", "cases"),
    IN("level", EfCase, level, T_WORD, "text", "level of the loads as written", .words = level_words),
    IN("ultimate_factor", EfCase, ultimate_factor, T_DOUBLE, "1", "ultimate over limit"),
    IN("source", EfCase, source, T_NAME, "text", "where the loads come from"),
    IN("both_ways", EfCase, both_ways, T_BOOL, "1", "run reversed too"),
    IN("loads", EfCase, nload, T_INT, "1", "number of loads of each; they follow one another in load"),
    {.path = "load", .kind = ROW_RAGGED_LIST, .offset = offsetof(EfCase, load), .count = offsetof(EfCase, nload),
     .dim = {NLOAD}, .table = &load_table},
    REQUIRED(EfCase),
    MARK(EfCase),
};
static const Table case_table = ROWS(EfCase, case_rows);

static const Row combination_rows[] = {
    IN("name", EfCombination, name, T_TEXT, "text", "combinations"),
    IN("level", EfCombination, level, T_WORD, "text", "level of the loads as written", .words = level_words),
    IN("ultimate_factor", EfCombination, ultimate_factor, T_DOUBLE, "1", "ultimate over limit"),
    IN("both_ways", EfCombination, both_ways, T_BOOL, "1", "run reversed too"),
    IN("parts", EfCombination, npart, T_INT, "1", "number of parts of each"),
    RAGGED("part", EfCombination, part, npart, T_INT, "case indices, one combination after the other", .below = NCASE),
    RAGGED("factor", EfCombination, factor, npart, T_DOUBLE, "factor of each part"),
    REQUIRED(EfCombination),
    MARK(EfCombination),
};
static const Table combination_table = ROWS(EfCombination, combination_rows);

static const Row hand_rows[] = {
    IN("tube", EfHandLine, tube, T_INT, "1", "tube index", .below = NT),
    IN("run", EfHandLine, run, T_INT, "1", "index over cases, then combinations", .below = NRUN),
    IN("c", EfHandLine, c, T_DOUBLE, "1", "end fixity"),
    IN("critical_load", EfHandLine, critical_load, T_DOUBLE, "N", "critical load"),
    IN("nominal_strength", EfHandLine, nominal_strength, T_DOUBLE, "N", "nominal strength"),
    IN("length", EfHandLine, length, T_DOUBLE, "m", "length; NaN: joint to joint"),
    MARK(EfHandLine),
};
static const Table hand_table = ROWS(EfHandLine, hand_rows);

static const Row frame_rows[] = {
    COUNT(EfFrame, nmaterial, NMATERIAL), COUNT(EfFrame, nsize, NSIZE), COUNT(EfFrame, njoint, NJ), COUNT(EfFrame, ntube, NT),
    COUNT(EfFrame, nguy, NGUY), COUNT(EfFrame, nsupport, NSUPPORT), COUNT(EfFrame, nequipment, NEQUIPMENT),
    COUNT(EfFrame, ncase, NCASE), COUNT(EfFrame, ncombination, NCOMBINATION), COUNT(EfFrame, nhand, NHAND),
    IN("@file", EfFrame, path, T_NAME, "text", "name of the frame file"),
    IN("@title", EfFrame, title, T_NAME, "text", "title"),
    IN("@input_sha256", EfFrame, input_sha256, T_HASH, "text", "SHA-256 of the frame file and its tables"),
    IN("frame/@shear_flexible", EfFrame, shear_flexible, T_BOOL, "1", "tubes deform in shear"),
    LIST("frame/materials", EfFrame, material, NMATERIAL, material_table),
    LIST("frame/sizes", EfFrame, size, NSIZE, size_table),
    LIST("frame/joints", EfFrame, joint, NJ, joint_table),
    LIST("frame/tubes", EfFrame, tube, NT, tube_table),
    LIST("frame/guys", EfFrame, guy, NGUY, guy_table),
    LIST("frame/supports", EfFrame, support, NSUPPORT, support_table),
    LIST("frame/equipment", EfFrame, equipment, NEQUIPMENT, equipment_table),
    LIST("frame/cases", EfFrame, cases, NCASE, case_table),
    LIST("frame/combinations", EfFrame, combination, NCOMBINATION, combination_table),
    LIST("frame/hand", EfFrame, hand, NHAND, hand_table),
    IN("frame/@required_critical_factor", EfFrame, required.critical_factor, T_DOUBLE, "1", "least critical factor"),
    IN("frame/@required_collapse_factor", EfFrame, required.collapse_factor, T_DOUBLE, "1", "least collapse factor"),
    IN("frame/@required_margin", EfFrame, required.margin, T_DOUBLE, "1", "least margin"),
    IN("frame/@required_guys_taut_to", EfFrame, required.guys_taut_to, T_DOUBLE, "1", "factor to which the guys must stay taut"),
    IN("frame/@fixity_credit", EfFrame, fixity_credit, T_DOUBLE, "1", "most c that margins may use while joints are rigid"),
    IN("frame/@fixity_credit_because", EfFrame, fixity_credit_because, T_NAME, "text", "reason given for it"),
    IN("frame/people/@prepared", EfFrame, people.prepared, T_NAME, "text", "prepared by"),
    IN("frame/people/@checked", EfFrame, people.checked, T_NAME, "text", "checked by"),
    IN("frame/people/@drawing", EfFrame, people.drawing, T_NAME, "text", "drawing"),
    IN("frame/people/@revision", EfFrame, people.revision, T_NAME, "text", "revision"),
};
const Table frame_table = ROWS(EfFrame, frame_rows);
