/*
 * Exhibits: what stands in a document between its paragraphs. Built once in src/report, drawn by
 * every writer from the same struct, so that numbers agree to the digit in all formats.
 *
 * All text is final: words in the shop's wording, numbers formatted (quantity/format.h), UTF-8,
 * not escaped for any format. Everything belongs to the document's arena.
 */
#ifndef REPORT_EXHIBIT_H
#define REPORT_EXHIBIT_H

#include "quantity/format.h"

#include <stdbool.h>
#include <stddef.h>

/* The mark of an outcome; its shape carries it. */
enum mark {
    MARK_NONE,
    MARK_PASS,             /* hollow circle */
    MARK_CONDITIONAL_PASS, /* circle, lower half filled */
    MARK_NOT_JUDGED,       /* dash */
    MARK_CONDITIONAL_FAIL, /* square, lower half filled */
    MARK_FAIL              /* filled square */
};

/* ---- tables */

enum column_kind {
    COLUMN_REF,     /* left, weight 600, never broken; the row's head */
    COLUMN_TEXT,    /* left, may wrap */
    COLUMN_NUMBER,  /* decimal points in one line; slots for fraction and unit */
    COLUMN_OUTCOME, /* mark and word, a reason under it */
    COLUMN_BLANK    /* to be written in */
};

struct column {
    const char *head;  /* "" allowed */
    const char *unit;  /* second line of the head, NULL: none */
    const char *label; /* on a narrow screen, before the value ("kept"); NULL: none */
    enum column_kind kind;
    double width_percent; /* of the text block; 0: shared among those without */
    unsigned rank; /* narrow screens: 1 stays a column, 2 runs on below, 3 a line of its own */
};

struct cell {
    const char *text;              /* COLUMN_REF, TEXT, OUTCOME; and numbers in one string */
    struct figures figures;        /* COLUMN_NUMBER: whole == NULL means empty or `text` as it is */
    const char *second;            /* a second, soft line or the reason under an outcome; NULL */
    struct figures second_figures; /* COLUMN_NUMBER: a second number: right of the first, or under
                                      it in write_in tables; whole NULL */
    enum mark mark;
    bool strong;       /* a fail; a figure above its rating */
    const char *notes; /* raised note signs, "1" or "1 3"; NULL */
};

struct table_row {
    bool group;         /* a group line (place): only cells[0].text, spans all columns */
    struct cell *cells; /* column_count of them */
};

struct table {
    const char *caption;
    struct column *columns;
    size_t column_count;
    struct table_row *rows;
    size_t row_count;
    const char *group_head; /* what groups are, where they get a column of their own; NULL: none */
    const char **notes;     /* numbered 1.. in order; run on in one paragraph */
    size_t note_count;
    const char *remark; /* an unnumbered note; NULL */
    bool lined;         /* hairline between rows, for tables without groups */
    bool write_in;      /* bench sheet: fixed row height, blanks */
    bool text_only;     /* narrow: no head, one labelled line a cell */
};

/* ---- plots */

/* All capacitors at a glance: leakage over each part's own limit, log axis. */
struct glance_row {
    const char *place; /* shown in the first row of its group */
    const char *ref;
    double ratio;               /* NaN: in the "no ratio" column */
    bool at_most;               /* a bound: arrow to the left */
    double band_low, band_high; /* guard band as ratios, NaN: none */
    double found_ratio;         /* as found, before reforming; NaN: none */
    enum mark mark;
    const char *outcome;        /* "pass, kept" */
    const char *outcome_narrow; /* "pass" */
    bool strong;
    bool at_least; /* a bound the other way: arrow to the right */
};
struct glance {
    struct glance_row *rows;
    size_t row_count;
    const char *axis_text;     /* "leakage as a multiple of the part's own limit" */
    const char *limit_word;    /* "limit" */
    const char *no_ratio_word; /* "no ratio" */
    const char *times_sign;    /* "×", after 10 and 100 */
};

/* Current against time on log or linear axes, in panels side by side (soak, reform). */
struct curve_point {
    double x_s, y;
    bool deciding;
    bool bound;
};
struct curve {
    struct curve_point *points;
    size_t point_count;
    bool broken;                 /* do not join with the curve before */
    const char *label;           /* step number above, volts; NULL */
    double fit_from_s, fit_to_s; /* drawn as a line through fit_y; NaN: none */
    double *fit_y;               /* fit_count values, evenly spaced in log x or x as the axis is */
    size_t fit_count;
};
struct curve_panel {
    struct curve *curves;
    size_t curve_count;
    double *step_volts; /* one for each curve, for the lower axis; NULL: no lower axis */
    bool x_log;
    double x_max_s;
    const char *title; /* "after 12 h rest"; NULL */
};
struct curves {
    struct curve_panel panels[2];
    size_t panel_count;
    bool y_log;
    double y_scale;                      /* 1e-6: y is shown in µA */
    const char *y_unit;                  /* "µA" */
    double limit;                        /* NaN: none */
    const char *limit_word, *limit_text; /* "limit", "1100 µA" */
    const char *deciding_text;           /* "310 µA" at the filled reading; NULL */
    const char *volts_word;              /* "volts" */
};

/* Shares with intervals, sorted (statistics). */
struct share_row {
    const char *label;
    double share, low, high;          /* NaN low: no interval */
    double bracket_low, bracket_high; /* unread parts all good, or all bad; NaN: none */
    const char *counts[3];            /* columns at the right */
};
struct shares {
    struct share_row *rows;
    size_t row_count;
    const char *axis_words[6]; /* "none", "2 in 10" ... "all" */
    const char *count_heads[3];
};

enum plot_kind { PLOT_GLANCE, PLOT_CURVES, PLOT_SHARES };
struct plot {
    enum plot_kind kind;
    union {
        struct glance glance;
        struct curves curves;
        struct shares shares;
    };
    const char *title; /* for screen readers, says what it shows and where the numbers stand */
    const char *caption;
    struct table *numbers; /* Markdown shows these under the picture's link; NULL: they stand in
                              a table of the document anyway */
};

/* ---- plates */

struct plate_picture {
    const char *file; /* "01.jpg", inside pictures/ */
    const char *when; /* "Before.", "After."; NULL */
    const char *text; /* what it shows; also the alt text */
    unsigned width_px, height_px;
    const struct picture
        *picture; /* decoded, for the PDF; NULL: the writer leaves its place empty */
};
struct plate {
    struct plate_picture pictures[2];
    size_t picture_count;
    const char *caption;
};

/* ---- page 1 */

struct title_block {
    const char *shop_name, *shop_trade;      /* letterhead, left */
    const char *shop_address, *shop_contact; /* right */
    const struct plate_picture *logo;        /* NULL: none */
    const char *title;                       /* the set's name */
    const char *subtitle;                    /* "Restoration record 2034-027, client's copy" */
};
struct fact {
    const char *label, *text;
};
struct facts {
    struct fact *left, *right; /* two columns of label and text */
    size_t left_count, right_count;
};

enum stroke { STROKE_KEPT, STROKE_LIFTED, STROKE_SHELL, STROKE_REMOVED, STROKE_COUNT };
struct headline_line {
    enum stroke stroke;
    const char *text; /* "43 kept: 38 tested, 1 reformed, 4 untested" */
};
struct headline_kind {
    const char *label; /* "capacitors" */
    unsigned strokes[STROKE_COUNT];
    const char *count_text; /* "15 of 20" */
};
struct headline {
    const char *heading;   /* "Kept original parts" */
    const char *kept, *of; /* "43", "of 50" */
    const char *qualifier; /* "of the parts listed"; NULL */
    struct headline_line *lines;
    size_t line_count;
    struct headline_kind *kinds;
    size_t kind_count;
    const char *below; /* by what is seen; valves; earlier repairs */
    const char *title; /* for screen readers */
};

/* Write-on lines of the bench sheet: label, blank, unit. */
struct write_on {
    const char *label, *unit; /* unit "" allowed */
    double width;             /* relative */
};
struct write_ons {
    struct write_on *items;
    size_t count;
};

/* Calculation lines: name, formula, value, source. */
struct working_line {
    const char *name, *formula, *value, *source;
};
struct working {
    const char *heading;
    struct working_line *lines;
    size_t line_count;
    bool screen_only; /* left out on paper, where it cannot be folded away */
};

/* The fingerprint: a hash as sha256sum prints it, which writers may set in groups. */
struct fingerprint {
    const char *text;
};

enum exhibit_kind {
    EXHIBIT_TITLE,
    EXHIBIT_FACTS,
    EXHIBIT_HEADLINE,
    EXHIBIT_TABLE,
    EXHIBIT_PLOT,
    EXHIBIT_PLATE,
    EXHIBIT_TWO_COLUMNS, /* prose that follows, up to a heading or exhibit, is set in two columns */
    EXHIBIT_SIDE_BY_SIDE, /* paper only: two short sections or exhibits that follow */
    EXHIBIT_WRITE_ON,
    EXHIBIT_WORKING, /* folded away on screen */
    EXHIBIT_FINGERPRINT,
    EXHIBIT_CONTENTS,   /* list of sections, screen only */
    EXHIBIT_PAGE_BREAK, /* paper only */
    EXHIBIT_SMALL       /* what follows, up to the next heading, is set in the note size */
};

struct exhibit {
    enum exhibit_kind kind;
    const char *id;     /* [a-z0-9-]+, unique in the document: file and anchor name */
    const char *number; /* "Table 1", "Figure 2", "Plate 1", "Sheet 3"; NULL: not numbered */
    union {
        struct title_block title;
        struct facts facts;
        struct headline headline;
        struct table table;
        struct plot plot;
        struct plate plate;
        struct write_ons write_on;
        struct working working;
        struct fingerprint fingerprint;
    };
};

#endif
