/* keys.c - every key a frame file may have, what it means, and whether it must be there.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "frame/keys.h"

#define END {NULL, KEY_ANY, false, NULL, NULL, false}
#define TEXT(name, required, help) {name, KEY_TEXT, required, help, NULL, false}
#define YESNO(name, help) {name, KEY_BOOL, false, help, NULL, false}
#define VALUE(name, required, help) {name, KEY_QUANTITY, required, help, NULL, false}
#define VECTOR(name, required, help) {name, KEY_VECTOR, required, help, NULL, false}
#define NAMES(name, required, help) {name, KEY_NAMES, required, help, NULL, false}
#define ANY(name, required, help) {name, KEY_ANY, required, help, NULL, false}
#define MAP(name, required, help, keys) {name, KEY_MAP, required, help, keys, false}
#define NAMED(name, required, help, keys) {name, KEY_MAP, required, help, keys, true}

const Key keys_units[] = {
    TEXT("length", false, "unit of bare lengths: m, mm, cm, in, ft"), TEXT("force", false, "unit of bare forces: N, kN, MN, lbf, kip"),
    TEXT("stress", false, "unit of bare stresses: Pa, kPa, MPa, GPa, psi, ksi, Msi"), TEXT("mass", false, "unit of bare masses: kg, g, t, lb"), END};

const Key keys_material[] = {
    VALUE("E", true, "modulus"), VALUE("E compression", false, "modulus in compression, default E"),
    VALUE("G", false, "shear modulus, default E/(2 (1 + nu))"), VALUE("nu", false, "Poisson's ratio, default from G"),
    VALUE("density", true, "density"), VALUE("expansion", false, "thermal expansion, 1/K"), VALUE("yield", false, "yield stress"),
    VALUE("yield compression", false, "yield stress in compression, default yield"), VALUE("ultimate", false, "ultimate stress"),
    VALUE("welded yield", false, "yield stress beside a weld"), VALUE("welded ultimate", false, "ultimate stress beside a weld"),
    VALUE("Ramberg-Osgood n", false, "exponent of the stress-strain curve"), TEXT("column rule", false, "euler-johnson or euler"),
    YESNO("weldable", "false: not for fusion welding"), TEXT("source", false, "where the values come from"), END};

const Key keys_size[] = {
    ANY("round", false, "outside diameter x wall"), ANY("square", false, "side x wall [x outer corner radius]"),
    ANY("rectangle", false, "height (local z) x width (local y) x wall [x outer corner radius]"),
    ANY("ellipse", false, "long axis (local z) x short axis x wall"), ANY("rod", false, "diameter"),
    VALUE("area", false, "area, for a size given by values"), VALUE("Iy", false, "second moment, bending in the x-z plane"),
    VALUE("Iz", false, "second moment, bending in the x-y plane"), VALUE("J", false, "torsion constant"),
    VALUE("shear area y", false, "shear area along local y"), VALUE("shear area z", false, "shear area along local z"),
    VALUE("depth y", false, "outside along local y, for stresses"), VALUE("depth z", false, "outside along local z, for stresses"),
    TEXT("material", true, "a material of this file or a built-in one"), END};

const Key keys_tube[] = {
    TEXT("from", true, "joint"), TEXT("to", true, "joint"), TEXT("size", true, "tube size"),
    VECTOR("up", false, "local z lies in the plane of this vector and the tube"),
    VECTOR("offset from", false, "tube end minus joint, rigid arm, global axes"), VECTOR("offset to", false, "the same at the far end"),
    NAMES("release from", false, "local directions set free: x y z rx ry rz"), NAMES("release to", false, "the same at the far end"),
    YESNO("pinned", "short for ry, rz released at both ends"), ANY("spring from", false, "semi-rigid end in series, by local direction"),
    ANY("spring to", false, "the same at the far end"), VALUE("bow", false, "initial bow over length, for collapse"),
    VECTOR("bow toward", false, "direction of the bow"), TEXT("group", false, "tube group, for reports and sizing"), END};

const Key keys_guy[] = {
    TEXT("from", true, "joint"), TEXT("to", true, "joint"), VALUE("EA", true, "axial stiffness, a force"),
    VALUE("pretension", false, "tension before any case load"), VALUE("mass per length", false, "mass per length"),
    VALUE("breaking load", false, "breaking load"), END};

const Key keys_support[] = {
    NAMES("held", false, "fixed, pinned, or a list of x y z rx ry rz"), ANY("spring", false, "stiffness by direction"),
    ANY("movement", false, "prescribed movement by direction"), ANY("axes", false, "skew support: {x: [..], y: [..]}"), END};

const Key keys_equipment[] = {VALUE("mass", true, "mass"), VECTOR("at", true, "its real place"),
                              NAMES("carried by", true, "joints that carry it"), END};

const Key keys_required[] = {
    VALUE("critical factor", false, "least critical factor, default 1"), VALUE("collapse factor", false, "least collapse factor, default 1"),
    VALUE("margin", false, "least margin, default 0"), VALUE("guys taut to", false, "factor to which guys must stay taut, default 1"), END};

const Key keys_load[] = {
    NAMES("at", false, "joint, or joints over which the load is spread"), VECTOR("force", false, "force, global axes"),
    VECTOR("moment", false, "moment, global axes"), NAMES("along", false, "tubes, patterns allowed"),
    VECTOR("force per length", false, "force per length of tube, global axes"),
    VECTOR("inertia", false, "force on every mass in multiples of its weight"), NAMES("warm", false, "tubes that get warmer"),
    VALUE("by", false, "kelvin"), YESNO("steady", "true: the load stays while the others grow"), END};

const Key keys_case[] = {
    TEXT("level", true, "limit or ultimate"), VALUE("ultimate factor", false, "multiplies every load of a limit case"),
    TEXT("source", false, "where the loads come from"), YESNO("both ways", "also with the growing loads reversed"),
    MAP("required", false, "what exit status 1 compares with, for this case", keys_required), ANY("loads", true, "list of loads"), END};

const Key keys_combination[] = {
    TEXT("level", true, "limit or ultimate"), VALUE("ultimate factor", false, "multiplies every load of a limit combination"),
    ANY("of", true, "factors by case"), YESNO("both ways", "also with the growing loads reversed"),
    MAP("required", false, "what exit status 1 compares with, for this combination", keys_required), END};

const Key keys_hand[] = {
    TEXT("tube", true, "tube"), TEXT("case", true, "case or combination"), VALUE("c", false, "end fixity of the hand calculation"),
    VALUE("K", false, "or its effective length factor, c = 1/K^2"), VALUE("critical load", false, "or its elastic critical load"),
    VALUE("nominal strength", false, "or its nominal strength"), VALUE("length", false, "length it used, default joint to joint"), END};

const Key keys_people[] = {TEXT("prepared", false, "who made the calculation"), TEXT("checked", false, "who checked it"),
                           TEXT("drawing", false, "drawing number"), TEXT("revision", false, "revision"), END};

const Key keys_credit[] = {VALUE("c", true, "most c that margins may use while joints are rigid"), TEXT("because", true, "reason"), END};

const Key keys_top[] = {
    TEXT("title", false, "what the frame is"), MAP("units", false, "meaning of bare numbers, default m, N, Pa, kg", keys_units),
    YESNO("shear flexible", "true: tubes give way in shear too"), NAMED("materials", false, "own materials", keys_material),
    NAMED("sizes", true, "tube sizes", keys_size), ANY("joints", true, "name: [x, y, z], or {table: joints.csv}"),
    NAMED("tubes", true, "name: [from, to, size] or the long form, or {table: tubes.csv}", keys_tube),
    NAMED("guys", false, "tension-only bars", keys_guy), NAMED("supports", false, "fixed, pinned, a list of directions, or the long form", keys_support),
    NAMED("equipment", false, "masses at their real place", keys_equipment), NAMED("cases", true, "load cases", keys_case),
    NAMED("combinations", false, "sums of cases", keys_combination),
    MAP("required", false, "what exit status 1 compares with", keys_required),
    ANY("fixity credit", false, "most c that margins may use while joints are rigid: 2, or {c: 4, because: reason}"),
    ANY("hand sheet", false, "list of hand calculations to be verified"), MAP("people", false, "for the report", keys_people), END};
