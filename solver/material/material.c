/* material.c - the built-in materials. Values are those of published tables as far as `source` says; what is from
 * memory is said so, and none of it replaces the certificate of the tube in hand.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "material/material.h"

#include <math.h>
#include <string.h>

#define GPA *1e9
#define MPA *1e6
#define NONE NAN

/* Name, E, E in compression, G, nu, density, expansion, yield, yield in compression, ultimate, welded yield and
 * ultimate, Ramberg-Osgood n, weldable, status, source. */
#define MATERIAL(n_, E_, Ec_, G_, nu_, d_, a_, y_, yc_, u_, wy_, wu_, ro_, w_, status_, source_)                        \
    {.name = n_, .E = E_ GPA, .E_compression = Ec_ GPA, .G = G_ GPA, .nu = nu_, .density = d_, .expansion = a_ * 1e-6,   \
     .yield = y_ MPA, .yield_compression = yc_ MPA, .ultimate = u_ MPA, .welded_yield = wy_ MPA,                        \
     .welded_ultimate = wu_ MPA, .ramberg_osgood_n = ro_, .weldable = w_, .status = status_, .source = source_, .builtin = true}

static const EfMaterial materials[] = {
    MATERIAL("4130N", 199.9, 199.9, 75.8, 0.32, 7833, 11.2, 517, 517, 655, 414, 552, 15, true, "source",
             "4130 normalised tube, t <= 4.75 mm. Yield, ultimate, welded yield, E: Bruhn, column formulas for round steel "
             "tubes; welded ultimate 80 ksi, G, nu, density, expansion, n from memory"),
    MATERIAL("4130HT125", 199.9, 199.9, 75.8, 0.32, 7833, 11.2, 710, 710, 862, 414, 552, 15, true, "source",
             "4130 heat treated to 125 ksi. Yield, ultimate: Bruhn, column formulas for round steel tubes; beside a weld "
             "the values of 4130N unless heat treated after welding; the rest from memory"),
    MATERIAL("1025", 199.9, 199.9, 75.8, 0.32, 7833, 12, 248, 248, 379, 248, 352, 30, true, "source",
             "1025 tube. Yield, ultimate: Bruhn, column formulas for round steel tubes; weld metal 51 ksi and the rest from memory"),
    MATERIAL("1020DOM", 200, 200, 77, 0.29, 7850, 12, 414, 414, 483, 250, 345, 25, true, "memory",
             "ASTM A513 type 5 as drawn and stress relieved, 60/70 ksi as commonly quoted; all from memory"),
    MATERIAL("S235H", 210, 210, 80.8, 0.30, 7850, 12, 235, 235, 360, 235, 360, NONE, true, "source",
             "t <= 16 mm. Yield, ultimate: EN 10210-1 as tabulated by a tube maker; E, G, nu, expansion (EN 1993-1-1 3.2.6) from memory"),
    MATERIAL("S355H", 210, 210, 80.8, 0.30, 7850, 12, 355, 355, 470, 355, 470, NONE, true, "source",
             "t <= 16 mm. Yield, ultimate: EN 10210-1 as tabulated by a tube maker; E, G, nu, expansion (EN 1993-1-1 3.2.6) from memory"),
    MATERIAL("E355N", 210, 210, 80.8, 0.30, 7850, 12, 355, 355, 490, 355, 490, NONE, true, "source",
             "E355 +N precision tube. Yield, ultimate: EN 10305-1 as tabulated by a tube dealer; E, G, nu, expansion from memory"),
    MATERIAL("25CrMo4QT", 210, 210, 80.8, 0.30, 7850, 12, 700, 700, 900, NONE, NONE, 15, true, "source",
             "1.7218 +QT, t <= 8 mm. Yield, ultimate: EN 10083-3:2006 as tabulated by a steel maker; values beside a weld "
             "are not known; the rest from memory"),
    MATERIAL("15CDV6", 210, 210, 80.8, 0.30, 7850, 12, 790, 790, 980, 632, 784, 15, true, "memory",
             "1.7734.4. All from memory; beside a weld 0.8 of the parent, as TIG welded"),
    MATERIAL("316L", 200, 200, 77, 0.30, 8000, 16, 170, 170, 485, 170, 485, 7, true, "memory",
             "1.4404 annealed. ASTM A269, EN 10216-5, EN 1993-1-4; all from memory"),
    MATERIAL("6061-T6", 68.3, 69.6, 26.2, 0.33, 2710, 23.6, 241, 234, 290, 103, 165, 55, true, "source",
             "Drawn tube. Yield, ultimate 42/35 ksi and moduli from memory (US); beside a weld the lower of EN 1999-1-1 table "
             "3.2b (115/175 MPa) and 15 ksi (from memory)/24 ksi (AWS D1.2)"),
    MATERIAL("6082-T6", 69, 69, 26, 0.33, 2710, 23.4, 250, 250, 290, 125, 185, 32, true, "source",
             "Tube t <= 5 mm. E, G, density, yield, ultimate: extrusion catalogue after EN 755-2; beside a weld and n from memory"),
    MATERIAL("2024-T3", 72.4, 73.8, 27.6, 0.33, 2770, 23.2, 290, 290, 441, NONE, NONE, 10, false, "source",
             "Drawn tube, not for fusion welding. Yield, ultimate: ASTM B210 as tabulated by a metal dealer; the rest from memory"),
    MATERIAL("7075-T6", 71.0, 72.4, 26.9, 0.33, 2800, 23.4, 455, 455, 531, NONE, NONE, 20, false, "memory",
             "Drawn tube, not for fusion welding; all from memory"),
    MATERIAL("Ti-3Al-2.5V", 100, 100, 38, 0.32, 4480, 9.0, 724, 724, 862, 517, 621, 12, true, "memory",
             "AMS 4944, cold worked and stress relieved; beside a weld the annealed values (AMS 4943); all from memory"),
    MATERIAL("Ti-6Al-4V", 110, 113, 42.7, 0.31, 4430, 8.8, 827, 869, 896, 793, 862, 20, true, "memory",
             "Annealed; all from memory"),
};

const EfMaterial *material_builtin(size_t i) { return i < sizeof materials / sizeof *materials ? &materials[i] : NULL; }

const EfMaterial *material_named(const char *name)
{
    for (size_t i = 0; material_builtin(i); i++)
        if (strcmp(materials[i].name, name) == 0) return &materials[i];
    return NULL;
}
