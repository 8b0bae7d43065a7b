/* keys.h - the keys of the frame file, for the reader's faults and for the JSON Schema alike.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef FRAME_KEYS_H
#define FRAME_KEYS_H

#include <stdbool.h>
#include <stddef.h>

typedef enum KeyKind { KEY_TEXT, KEY_BOOL, KEY_QUANTITY, KEY_VECTOR, KEY_NAMES, KEY_MAP, KEY_ANY } KeyKind;

typedef struct Key {
    const char *name; /* NULL ends a table */
    KeyKind kind;
    bool required;
    const char *help;
    const struct Key *inside; /* keys of a map, or of every named entry when `named` */
    bool named;
} Key;

extern const Key keys_top[], keys_units[], keys_material[], keys_size[], keys_tube[], keys_guy[], keys_support[],
    keys_equipment[], keys_case[], keys_load[], keys_combination[], keys_required[], keys_hand[], keys_people[],
    keys_credit[];

#endif
