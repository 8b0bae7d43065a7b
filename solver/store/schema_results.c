/* schema_results.c - what a run found, in a results file. The frame stands before it.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "endfix/results.h"
#include "store/schema.h"

static const char *const role_words[] = {"idle", "riding", "bracing", "leaning", NULL};
static const char *const outcome_words[] = {"found", "none", "none below", "steady buckles", "tally short", NULL};
static const char *const state_words[] = {"ok", "close", "negative", "none", NULL};
static const char *const verdict_words[] = {"agrees", "safe", "unsafe", "not comparable", NULL};

static const Row critical_rows[] = {
    COUNT(EfCritical, nmode, NM),
    IN("outcome", EfCritical, outcome, T_WORD, "text", "how the search ended", .words = outcome_words),
    AT("factor", EfCritical, factor, T_DOUBLE, "1", "critical factors, ascending in size", .dim = {NM}),
    AT("residual", EfCritical, residual, T_DOUBLE, "1", "|K phi + factor Kg phi| over |K phi|", .dim = {NM}),
    AT("mesh_error", EfCritical, mesh_error, T_DOUBLE, "1", "bound on the relative error of factor by the division", .dim = {NM}),
    IN("counted", EfCritical, counted, T_INT, "1", "critical factors proven to lie between 0 and counted_at"),
    IN("found", EfCritical, found, T_INT, "1", "of them found"),
    IN("counted_at", EfCritical, counted_at, T_DOUBLE, "1", "factor up to which was counted"),
    AT("shape", EfCritical, shape, T_DOUBLE, "1", "movements and rotations of the joints, largest 1", .dim = {NM, NJ, 6}),
    {.path = "line", .kind = ROW_PIECES, .type = T_DOUBLE, .offset = offsetof(EfCritical, line), .dim = {NM, NP, 3},
     .unit = "1", .help = "the same shape along the tubes, at the points of frame/line"},
    AT("lost", EfCritical, lost, T_DOUBLE, "1", "share of the energy lost by compression", .dim = {NM, NT}),
    AT("stored", EfCritical, stored, T_DOUBLE, "1", "share of the energy stored", .dim = {NM, NT}),
    AT("lost_others", EfCritical, lost_others, T_DOUBLE, "1", "lost: guys, springs, equipment", .dim = {NM}),
    AT("stored_others", EfCritical, stored_others, T_DOUBLE, "1", "stored: guys, springs, equipment", .dim = {NM}),
    AT("role", EfCritical, role, T_WORD, "text", "part of the tube in the shape", .dim = {NM, NT}, .words = role_words),
    AT("family", EfCritical, family, T_INT, "1", "shapes with nearly equal factors share a number", .dim = {NM}, .below = NM),
    AT("kind", EfCritical, kind, T_TEXT, "text", "kind of failure", .dim = {NM}),
};
static const Table critical_table = ROWS(EfCritical, critical_rows);

static const Row fixity_rows[] = {
    IN("own_at", EfFixity, own_at, T_DOUBLE, "1", "factor on the growing loads at which own c holds"),
    AT("frame_c", EfFixity, frame_c, T_DOUBLE, "1", "c from the lowest factor in whose shape the tube leans", .dim = {NT}),
    AT("own_critical", EfFixity, own_critical, T_DOUBLE, "N", "own critical compression, the rest at its case load", .dim = {NT}),
    AT("own_c", EfFixity, own_c, T_DOUBLE, "1", "own_critical over the pinned-end Euler load", .dim = {NT}),
    AT("own_plane", EfFixity, own_plane, T_DOUBLE, "1", "direction in which it bows, global axes", .dim = {NT, 3}),
    AT("second_c", EfFixity, second_c, T_DOUBLE, "1", "own c in the second direction", .dim = {NT}),
    AT("clear_c", EfFixity, clear_c, T_DOUBLE, "1", "own c on the clear length", .dim = {NT}),
    AT("reserve", EfFixity, reserve, T_DOUBLE, "1", "factor at which its own check is reached", .dim = {NT}),
    AT("safe_c", EfFixity, safe_c, T_DOUBLE, "1", "c the hand calculation may use", .dim = {NT}),
    AT("safe_at", EfFixity, safe_at, T_DOUBLE, "1", "factor at which safe_c holds", .dim = {NT}),
    AT("role", EfFixity, role, T_WORD, "text", "part in the lowest shape it takes part in", .dim = {NT}, .words = role_words),
    AT("shape_of", EfFixity, shape_of, T_INT, "1", "lowest shape in which the tube leans, -1 none", .dim = {NT}, .least = -1,
       .below = NM),
    AT("note", EfFixity, note, T_TEXT, "text", "remark", .dim = {NT}),
    AT("end_stiffness", EfFixity, end_stiffness, T_DOUBLE, "N m/rad", "rotational restraint by the rest, per end, local y z",
       .dim = {NT, 2, 2, 2}),
};
static const Table fixity_table = ROWS(EfFixity, fixity_rows);

static const Row margin_rows[] = {
    IN("tube", EfMargin, tube, T_INT, "1", "tube index, -1 the frame", .least = -1, .below = NT),
    IN("check", EfMargin, check, T_TEXT, "text", "check"),
    IN("rule", EfMargin, rule, T_NAME, "text", "column rule or formula"),
    IN("demand", EfMargin, demand, T_DOUBLE, "N or 1", "load, or the factor required of the frame"),
    IN("strength", EfMargin, strength, T_DOUBLE, "N or 1", "nominal strength, or the factor found"),
    IN("c_used", EfMargin, c_used, T_DOUBLE, "1", "c used"),
    IN("c_found", EfMargin, c_found, T_DOUBLE, "1", "c found"),
    IN("margin", EfMargin, margin, T_DOUBLE, "1", "strength over demand less 1"),
    IN("state", EfMargin, state, T_WORD, "text", "state", .words = state_words),
    IN("note", EfMargin, note, T_TEXT, "text", "caution on this row"),
};
static const Table margin_table = ROWS(EfMargin, margin_rows);

static const Row ledger_rows[] = {
    IN("tube", EfLedgerRow, tube, T_INT, "1", "tube index", .below = NT),
    IN("hand_c", EfLedgerRow, hand_c, T_DOUBLE, "1", "c of the hand sheet"),
    IN("hand_strength", EfLedgerRow, hand_strength, T_DOUBLE, "N", "strength with it, by the column rule"),
    IN("hand_factor", EfLedgerRow, hand_factor, T_DOUBLE, "1", "that over the load"),
    IN("frame_c", EfLedgerRow, frame_c, T_DOUBLE, "1", "c in the frame"),
    IN("frame_strength", EfLedgerRow, frame_strength, T_DOUBLE, "N", "strength with it, same rule"),
    IN("frame_factor", EfLedgerRow, frame_factor, T_DOUBLE, "1", "that over the load"),
    IN("hand_elastic", EfLedgerRow, hand_elastic, T_DOUBLE, "1", "hand factor by Euler alone"),
    IN("frame_elastic", EfLedgerRow, frame_elastic, T_DOUBLE, "1", "frame factor by Euler alone"),
    IN("percent", EfLedgerRow, percent, T_DOUBLE, "percent", "frame over hand less 1"),
    IN("verdict", EfLedgerRow, verdict, T_WORD, "text", "verdict", .words = verdict_words),
    IN("verdict_text", EfLedgerRow, verdict_text, T_TEXT, "text", "verdict in words"),
    IN("because", EfLedgerRow, because, T_TEXT, "text", "reason"),
    IN("assumed", EfLedgerRow, assumed, T_BOOL, "1", "a guess for all tubes, not from the hand sheet"),
};
static const Table ledger_table = ROWS(EfLedgerRow, ledger_rows);

static const Row result_rows[] = {
    COUNT(EfCaseResult, nreaction, NREACTION), COUNT(EfCaseResult, nmargin, NMARGIN), COUNT(EfCaseResult, nledger, NLEDGER),
    IN("@level", EfCaseResult, level, T_WORD, "text", "level of the loads as written", .words = level_words),
    IN("@ultimate_factor", EfCaseResult, ultimate_factor, T_DOUBLE, "1", "all loads are multiplied by it"),
    IN("@reversed", EfCaseResult, reversed, T_BOOL, "1", "growing loads reversed"),
    IN("@combination", EfCaseResult, combination, T_BOOL, "1", "a combination of cases"),
    IN("@run", EfCaseResult, run, T_INT, "1", "index over cases, then combinations", .below = NRUN),
    IN("@required_critical_factor", EfCaseResult, required.critical_factor, T_DOUBLE, "1", "least critical factor"),
    IN("@required_collapse_factor", EfCaseResult, required.collapse_factor, T_DOUBLE, "1", "least collapse factor"),
    IN("@required_margin", EfCaseResult, required.margin, T_DOUBLE, "1", "least margin"),
    IN("@required_guys_taut_to", EfCaseResult, required.guys_taut_to, T_DOUBLE, "1", "factor to which guys must stay taut"),
    AT("displacement", EfCaseResult, displacement, T_DOUBLE, "m, rad", "under the case loads, linear", .dim = {NJ, 6}),
    AT("reaction_joint", EfCaseResult, reaction_joint, T_INT, "1", "joint index", .dim = {NREACTION}, .below = NJ),
    AT("reaction", EfCaseResult, reaction, T_DOUBLE, "N, N m", "forces on the frame, global axes", .dim = {NREACTION, 6}),
    AT("tubes/axial", EfCaseResult, axial, T_DOUBLE, "N", "axial force at mid-tube, tension positive", .dim = {NT}),
    AT("tubes/axial_min", EfCaseResult, axial_min, T_DOUBLE, "N", "least (most compressed) along the tube", .dim = {NT}),
    AT("tubes/axial_growing", EfCaseResult, axial_growing, T_DOUBLE, "N", "the growing part of axial", .dim = {NT}),
    AT("tubes/end_force", EfCaseResult, end_force, T_DOUBLE, "N, N m", "of the joint on the tube end, local", .dim = {NT, 2, 6}),
    AT("tubes/end_force_limit", EfCaseResult, end_force_limit, T_DOUBLE, "N, N m", "the same at limit level", .dim = {NT, 2, 6}),
    AT("tubes/station_moment", EfCaseResult, station_moment, T_DOUBLE, "N m", "My and Mz at 0, 1/4, 1/2, 3/4, 1",
       .dim = {NT, 5, 2}),
    IN("balance/applied", EfCaseResult, balance.applied, T_DOUBLE, "N, N m", "loads about the origin", .dim = {6}),
    IN("balance/inertia", EfCaseResult, balance.inertia, T_DOUBLE, "N, N m", "inertia forces about the origin", .dim = {6}),
    IN("balance/reactions", EfCaseResult, balance.reactions, T_DOUBLE, "N, N m", "reactions about the origin", .dim = {6}),
    IN("balance/residual", EfCaseResult, balance.residual, T_DOUBLE, "1", "largest left-over over the largest force"),
    IN("@free_body", EfCaseResult, free_body, T_BOOL, "1", "balanced by inertia forces"),
    IN("n_at_cg", EfCaseResult, n_at_cg, T_DOUBLE, "1", "load factor at the centre of mass", .dim = {3}),
    IN("angular_acceleration", EfCaseResult, angular_acceleration, T_DOUBLE, "rad/s2", "angular acceleration", .dim = {3}),
    IN("@has_steady", EfCaseResult, has_steady, T_BOOL, "1", "some loads do not grow"),
    GROUP("critical", EfCaseResult, critical, critical_table),
    GROUP("fixity", EfCaseResult, fixity, fixity_table),
    GROUP("negative", EfCaseResult, negative, critical_table), /* after fixity, whose shapes are those of critical */
    IN("@has_negative", EfCaseResult, has_negative, T_BOOL, "1", "the growing loads were reversed too"),
    IN("all_grow_factor", EfCaseResult, all_grow_factor, T_DOUBLE, "1", "lowest factor when steady loads grow too"),
    IN("steady_factor", EfCaseResult, steady_factor, T_DOUBLE, "1", "factor on the steady loads alone"),
    IN("witness/factor", EfCaseResult, witness.factor, T_DOUBLE, "1", "lowest factor of the second engine"),
    IN("witness/counted", EfCaseResult, witness.counted, T_INT, "1", "its count just below that factor"),
    IN("witness/difference", EfCaseResult, witness.difference, T_DOUBLE, "1", "first engine over second less 1"),
    IN("witness/axial_difference", EfCaseResult, witness.axial_difference, T_DOUBLE, "1", "largest difference of axial forces"),
    LIST("margins", EfCaseResult, margin, NMARGIN, margin_table),
    LIST("ledger", EfCaseResult, ledger, NLEDGER, ledger_table),
};
static const Table result_table = ROWS(EfCaseResult, result_rows);

static const Row name_rows[] = {IN("name", EfCaseResult, name, T_TEXT, "text", "names of the groups in cases, as run")};
static const Table name_table = ROWS(EfCaseResult, name_rows);

#define NOTE(path, field, counter, help) AT("notes/" path, EfResults, notes.field, T_TEXT, "text", help, .dim = {counter})

static const Row results_rows[] = {
    COUNT(EfResults, npoint, NP), COUNT(EfResults, ncase, NRESULT),
    COUNT(EfResults, notes.ncaution, NCAUTION), COUNT(EfResults, notes.ndefault, NDEFAULT),
    COUNT(EfResults, notes.nnot_checked, NNOT_CHECKED), COUNT(EfResults, notes.nsource, NSOURCE),
    COUNT(EfResults, notes.ndraft, NDRAFT),
    IN("@program", EfResults, program, T_TEXT, "text", "program"),
    IN("@version", EfResults, version, T_TEXT, "text", "its version"),
    IN("@exit_status", EfResults, exit_status, T_INT, "1", "0 or 1 by verdict, 3 if a tally is short"),
    AT("frame/tubes/length", EfResults, length, T_DOUBLE, "m", "joint to joint", .dim = {NT}),
    AT("frame/tubes/clear_length", EfResults, clear_length, T_DOUBLE, "m", "between the tube ends", .dim = {NT}),
    AT("frame/tubes/mass", EfResults, tube_mass, T_DOUBLE, "kg", "mass", .dim = {NT}),
    IN("frame/@mass", EfResults, mass, T_DOUBLE, "kg", "mass of all"),
    IN("frame/@tubes_mass", EfResults, tubes_mass, T_DOUBLE, "kg", "mass of the tubes"),
    IN("frame/@guys_mass", EfResults, guys_mass, T_DOUBLE, "kg", "mass of the guys"),
    IN("frame/@equipment_mass", EfResults, equipment_mass, T_DOUBLE, "kg", "mass of the equipment"),
    IN("frame/centre_of_mass", EfResults, centre_of_mass, T_DOUBLE, "m", "centre of mass", .dim = {3}),
    AT("frame/line/position", EfResults, point_position, T_DOUBLE, "m", "points along the tubes", .dim = {NP, 3}),
    AT("frame/line/tube", EfResults, point_tube, T_INT, "1", "tube index", .dim = {NP}, .below = NT),
    AT("frame/line/station", EfResults, point_station, T_DOUBLE, "1", "0 at the first end, 1 at the second", .dim = {NP}),
    NOTE("cautions", caution, NCAUTION, "cautions"),
    NOTE("defaults_used", default_used, NDEFAULT, "defaults used"),
    NOTE("not_checked", not_checked, NNOT_CHECKED, "what was not checked"),
    NOTE("sources", source, NSOURCE, "sources of the methods and values used"),
    NOTE("drafts", draft, NDRAFT, "what keeps the report a draft"),
    LIST("results", EfResults, cases, NRESULT, name_table),
    {.path = "cases", .kind = ROW_NAMED, .offset = offsetof(EfResults, cases), .count = offsetof(EfCaseResult, name),
     .dim = {NRESULT}, .table = &result_table},
};
const Table results_table = ROWS(EfResults, results_rows);
