/*
 * Runs of text broken into lines: ragged right, no hyphenation, a word longer than the line is
 * broken where it must be.
 *
 * A line may end at a space, after a hyphen between letters, and after a dash; never at a no-break
 * space, nor between a figure and its unit. Spaces at the ends of lines vanish. Line ends and tabs
 * count as spaces; soft hyphens, joiners and direction marks are left out, since there is no
 * shaping.
 */
#ifndef WRITE_PDF_LINES_H
#define WRITE_PDF_LINES_H

#include "base/arena.h"
#include "write/pdf_canvas.h"

struct text_run {
    const char *text;
    size_t length;
    struct text_style style;
    const char *uri; /* NULL: no link */
    bool line_end;   /* a new line begins behind this run */
};

struct text_runs {
    struct arena *arena;
    struct text_run *items;
    size_t count, capacity;
};

/* Append a run; text is cleaned (see above) and copied only when it must be. NULL: nothing. */
void text_runs_add(struct text_runs *runs, const char *text, struct text_style style);
void text_runs_add_part(struct text_runs *runs, const char *text, size_t length,
                        struct text_style style, const char *uri);

struct line_piece {
    const char *text;
    size_t length;
    struct text_style style;
    const char *uri;
    double x, width; /* from the line's start */
};

struct text_line {
    struct line_piece *pieces;
    size_t piece_count;
    double width;
};

struct text_lines {
    struct text_line *items;
    size_t count, capacity;
};

/* Break runs for this width. No text: no lines. Everything belongs to the runs' arena. */
struct text_lines text_lines_break(const struct text_runs *runs,
                                   const struct pdf_resources *resources, double width);

/* Width of the whole as one line. */
double text_runs_width(const struct text_runs *runs, const struct pdf_resources *resources);

#endif
