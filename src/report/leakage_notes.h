/*
 * Notes under the leakage table: what a reader must know about one row, and why.
 */
#ifndef REPORT_LEAKAGE_NOTES_H
#define REPORT_LEAKAGE_NOTES_H

#include "report/composition.h"

/* Note for `cell`, the ref of capacitor `index`, whatever applies to it. */
void leakage_notes(struct table_builder *builder, struct cell *cell, size_t index);

#endif
