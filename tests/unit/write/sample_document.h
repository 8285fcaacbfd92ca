/*
 * A whole document made by hand, with every kind of exhibit, for the writers' tests. Set, shop and
 * figures are invented; valve types are real. `copies` of 1 gives 22 capacitors, 3 gives 66.
 * sample_document_release gives it back.
 */
#ifndef TESTS_SAMPLE_DOCUMENT_H
#define TESTS_SAMPLE_DOCUMENT_H

#include "report/document.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#define SAMPLE_COUNT(rows) (sizeof(rows) / sizeof(rows)[0])

struct sample_part {
    const char *place, *ref;
    const char *whole, *fraction, *unit, *volts; /* marked */
    const char *set, *soak, *soak_unit;
    const char *bound, *leak_whole, *leak_fraction;
    const char *limit_whole, *limit_fraction;
    double ratio, found_ratio;
    const char *effect, *outcome, *why, *done, *notes, *lift;
    enum mark mark;
};

#define NONE (0.0 / 0.0)
static const struct sample_part sample_parts[] = {
    {"coupling",
     "C17",
     "0",
     ".05",
     "µF",
     "350",
     "100",
     "60",
     "s",
     "",
     "2",
     ".10",
     "0",
     ".19",
     11.1,
     NONE,
     "output grid +6.1 V; cathode current +41 %",
     "fail",
     NULL,
     "restuffed",
     NULL,
     "grid end",
     MARK_FAIL},
    {"avc bypass",
     "C3",
     "0",
     ".1",
     "µF",
     "350",
     "50",
     "60",
     "s",
     "",
     "0",
     ".25",
     "0",
     ".26",
     0.96,
     NONE,
     "AVC line −3.1 %",
     "conditional pass",
     NULL,
     "kept",
     "1",
     "line end",
     MARK_CONDITIONAL_PASS},
    {"avc bypass",
     "C10",
     "0",
     ".05",
     "µF",
     "350",
     "50",
     "60",
     "s",
     "",
     "0",
     ".71",
     "0",
     ".26",
     2.73,
     NONE,
     "AVC line −8.8 %",
     "fail",
     NULL,
     "restuffed",
     NULL,
     "line end",
     MARK_FAIL},
    {"avc feed",
     "C16",
     "27",
     "",
     "pF",
     "500",
     "250",
     "60",
     "s",
     "<",
     "0",
     ".01",
     "0",
     ".041",
     0.24,
     NONE,
     "AVC line under +0.05 V",
     "pass",
     NULL,
     "kept",
     NULL,
     "line end",
     MARK_PASS},
    {"screen bypass",
     "C4",
     "0",
     ".1",
     "µF",
     "350",
     "100",
     "60",
     "s",
     "",
     "0",
     ".88",
     "31",
     "",
     0.028,
     NONE,
     "screen −0.1 V of 88 V",
     "pass",
     NULL,
     "kept",
     NULL,
     "screen end",
     MARK_PASS},
    {"screen bypass",
     "C11",
     "0",
     ".1",
     "µF",
     "350",
     "100",
     "60",
     "s",
     "",
     "3",
     ".40",
     "31",
     "",
     0.11,
     NONE,
     "screen −0.4 V of 88 V",
     "pass",
     NULL,
     "kept",
     NULL,
     "screen end",
     MARK_PASS},
    {"decoupling",
     "C18",
     "0",
     ".25",
     "µF",
     "350",
     "250",
     "60",
     "s",
     "",
     "9",
     ".6",
     "9",
     ".1",
     1.05,
     NONE,
     "rail 2 −2.1 %",
     "conditional fail",
     NULL,
     "restuffed",
     "1",
     "rail end",
     MARK_CONDITIONAL_FAIL},
    {"cathode bypass",
     "C5",
     "0",
     ".1",
     "µF",
     "150",
     "100",
     "60",
     "s",
     "",
     "1",
     ".10",
     "520",
     "",
     0.0021,
     NONE,
     "cathode current under +0.1 %",
     "pass",
     NULL,
     "kept",
     "2",
     "cathode end",
     MARK_PASS},
    {"cathode bypass",
     "C20",
     "50",
     "",
     "µF",
     "25",
     "25",
     "10",
     "min",
     "",
     "1 480",
     "",
     "610",
     "",
     2.43,
     NONE,
     "cathode current +24 %",
     "fail",
     NULL,
     "disconnected",
     NULL,
     "plus",
     MARK_FAIL},
    {"reservoir", "C21",
     "16",        "",
     "µF",        "450",
     "450",       "5",
     "min",       "",
     "260",       "",
     "940",       "",
     0.277,       3.3,
     "0.12 W",    "pass",
     NULL,        "reformed",
     "3",         "plus, red tag",
     MARK_PASS},
    {"smoothing", "C22",
     "32",        "",
     "µF",        "450",
     "450",       "5",
     "min",       "",
     "610",       "",
     "1 300",     "",
     0.47,        5.2,
     "0.27 W",    "pass",
     NULL,        "reformed",
     "3",         "plus, blue tag",
     MARK_PASS},
    {"tone",
     "C19",
     "0",
     ".005",
     "µF",
     "1000",
     "250",
     "60",
     "s",
     "",
     "0",
     ".31",
     "6",
     ".4",
     0.048,
     NONE,
     "0.31 µA through the primary",
     "pass",
     NULL,
     "kept",
     NULL,
     "anode end",
     MARK_PASS},
    {"detector",
     "C14",
     "100",
     "",
     "pF",
     "500",
     "250",
     "60",
     "s",
     "<",
     "0",
     ".01",
     "0",
     ".22",
     0.045,
     NONE,
     "under 5 mV on the volume control",
     "pass",
     NULL,
     "kept",
     NULL,
     "hot end",
     MARK_PASS},
    {"detector",
     "C15",
     "0",
     ".01",
     "µF",
     "350",
     "50",
     "60",
     "s",
     "<",
     "0",
     ".01",
     "0",
     ".014",
     0.71,
     NONE,
     "under 7 mV on the volume control",
     "not judged",
     "meter too coarse",
     "kept",
     "4",
     "hot end",
     MARK_NOT_JUDGED},
    {"tuning",
     "C1",
     "470",
     "",
     "pF",
     "500",
     "250",
     "60",
     "s",
     "<",
     "0",
     ".01",
     "22",
     "",
     0.00045,
     NONE,
     "none measurable",
     "pass",
     NULL,
     "kept",
     NULL,
     "aerial end",
     MARK_PASS},
    {"tuning",
     "C6",
     "560",
     "",
     "pF",
     "500",
     "250",
     "60",
     "s",
     "<",
     "0",
     ".01",
     "22",
     "",
     0.00045,
     NONE,
     "none measurable",
     "pass",
     NULL,
     "kept",
     NULL,
     "either",
     MARK_PASS},
    {"tuning",
     "C7",
     "100",
     "",
     "pF",
     "500",
     "250",
     "60",
     "s",
     "<",
     "0",
     ".01",
     "4",
     ".4",
     0.0023,
     NONE,
     "none measurable",
     "pass",
     NULL,
     "kept",
     NULL,
     "grid end",
     MARK_PASS},
    {"tuning",
     "C8",
     "110",
     "",
     "pF",
     "500",
     NULL,
     NULL,
     NULL,
     "",
     NULL,
     NULL,
     "22",
     "",
     NONE,
     NONE,
     "",
     "not judged",
     "not lifted",
     "kept untested",
     NULL,
     "in IF can 1",
     MARK_NOT_JUDGED},
    {"tuning",
     "C9",
     "110",
     "",
     "pF",
     "500",
     NULL,
     NULL,
     NULL,
     "",
     NULL,
     NULL,
     "22",
     "",
     NONE,
     NONE,
     "",
     "not judged",
     "not lifted",
     "kept untested",
     NULL,
     "in IF can 1",
     MARK_NOT_JUDGED},
    {"tuning",
     "C12",
     "110",
     "",
     "pF",
     "500",
     NULL,
     NULL,
     NULL,
     "",
     NULL,
     NULL,
     "22",
     "",
     NONE,
     NONE,
     "",
     "not judged",
     "not lifted",
     "kept untested",
     NULL,
     "in IF can 2",
     MARK_NOT_JUDGED},
    {"tuning",
     "C13",
     "110",
     "",
     "pF",
     "500",
     NULL,
     NULL,
     NULL,
     "",
     NULL,
     NULL,
     "22",
     "",
     NONE,
     NONE,
     "",
     "not judged",
     "not lifted",
     "kept untested",
     NULL,
     "in IF can 2",
     MARK_NOT_JUDGED},
    {"across mains",
     "C23",
     "0",
     ".01",
     "µF",
     "1000",
     NULL,
     NULL,
     NULL,
     "",
     NULL,
     NULL,
     NULL,
     NULL,
     NONE,
     NONE,
     "fire, if it shorts",
     "fail",
     "no reading passes",
     "replaced",
     "5",
     "not tested",
     MARK_FAIL},
};

static struct exhibit *sample_append(struct document *document, enum exhibit_kind kind,
                                     const char *id, const char *number)
{
    struct exhibit *exhibit = arena_get(document->arena, sizeof *exhibit);
    *exhibit = (struct exhibit){.kind = kind, .id = id, .number = number};
    cmark_node *node = cmark_node_new(CMARK_NODE_CUSTOM_BLOCK);
    cmark_node_set_user_data(node, exhibit);
    cmark_node_append_child(document->root, node);
    return exhibit;
}

/* Parse CommonMark by itself and graft its children. */
static void sample_prose(struct document *document, const char *text)
{
    cmark_node *prose = cmark_parse_document(text, strlen(text), CMARK_OPT_DEFAULT);
    for (cmark_node *node; (node = cmark_node_first_child(prose)) != NULL;)
        cmark_node_append_child(document->root, node);
    cmark_node_free(prose);
}

static struct figures sample_figures(const char *bound, const char *whole, const char *fraction,
                                     const char *unit)
{
    return (struct figures){.bound = bound ? bound : "",
                            .whole = whole,
                            .fraction = fraction ? fraction : "",
                            .unit = unit ? unit : ""};
}

static void sample_table_of(struct document *document, struct table *table,
                            const struct column *columns, size_t column_count, size_t row_count)
{
    table->columns = arena_array(document->arena, column_count, sizeof *columns);
    memcpy(table->columns, columns, column_count * sizeof *columns);
    table->column_count = column_count;
    table->rows = arena_array(document->arena, row_count, sizeof *table->rows);
    for (size_t i = 0; i < row_count; i++)
        table->rows[i].cells =
            arena_array(document->arena, column_count, sizeof *table->rows[i].cells);
}

static const char *sample_ref(struct document *document, const struct sample_part *part,
                              unsigned copy)
{
    return copy == 0 ? part->ref : arena_print(document->arena, "%s-%u", part->ref, copy + 1);
}

static void sample_leakage_row(struct document *document, struct cell *cells,
                               const struct sample_part *part, unsigned copy)
{
    bool fail = part->mark == MARK_FAIL;
    cells[0] = (struct cell){.text = sample_ref(document, part, copy), .notes = part->notes};
    cells[1].figures = sample_figures("", part->whole, part->fraction, part->unit);
    cells[1].second_figures = sample_figures("", part->volts, "", "V");
    cells[2].figures = sample_figures("", part->set, "", "V");
    cells[3].figures = sample_figures("", part->soak, "", part->soak_unit);
    cells[4].figures = sample_figures(part->bound, part->leak_whole, part->leak_fraction, "");
    cells[5].figures = sample_figures("", part->limit_whole, part->limit_fraction, "");
    cells[6].text = part->effect;
    cells[7] = (struct cell){
        .text = part->outcome, .mark = part->mark, .second = part->why, .strong = fail};
    cells[8].text = part->done;
}

static void sample_leakage(struct document *document, unsigned copies)
{
    static const struct column columns[] = {
        {"Ref", NULL, NULL, COLUMN_REF, 6.2, 1},
        {"Marked", NULL, NULL, COLUMN_NUMBER, 15.3, 2},
        {"Tested at", NULL, "tested at", COLUMN_NUMBER, 6.8, 2},
        {"Soak", NULL, NULL, COLUMN_NUMBER, 7.8, 2},
        {"Leakage", "µA", NULL, COLUMN_NUMBER, 8.4, 1},
        {"Limit", "µA", NULL, COLUMN_NUMBER, 8.8, 1},
        {"Effect in its place", NULL, NULL, COLUMN_TEXT, 20.2, 3},
        {"Outcome", NULL, NULL, COLUMN_OUTCOME, 15.6, 1},
        {"Done", NULL, NULL, COLUMN_TEXT, 10.9, 3}};
    static const char *const notes[] = {
        "Within its uncertainty of the limit; read again at the next visit.",
        "Earlier repair, about 1963; not counted as original.",
        "Against the rule named JAN-C-62. Other rules for 16 µF 450 V: 18 µA, 92 µA, 290 µA.",
        "The meter resolves 0.01 µA, more than half the limit.",
        "A part across the mains must carry a safety class; its leakage does not count."};
    struct table *table = &sample_append(document, EXHIBIT_TABLE, "leakage", "Table 1")->table;
    size_t count = SAMPLE_COUNT(sample_parts);
    sample_table_of(document, table, columns, SAMPLE_COUNT(columns), count * (copies + 1));
    table->caption =
        "Capacitors by place, one lead lifted, at 19 °C and 52 % humidity. Leakage and "
        "limit at the volts of the test; the limit allows for a chassis at 45 °C.";
    for (size_t i = 0; i < count; i++) {
        if (i == 0 || strcmp(sample_parts[i].place, sample_parts[i - 1].place) != 0) {
            table->rows[table->row_count].group = true;
            table->rows[table->row_count++].cells[0].text = sample_parts[i].place;
        }
        for (unsigned copy = 0; copy < copies; copy++)
            sample_leakage_row(document, table->rows[table->row_count++].cells, &sample_parts[i],
                               copy);
    }
    table->notes = arena_array(document->arena, SAMPLE_COUNT(notes), sizeof *table->notes);
    memcpy(table->notes, notes, sizeof notes);
    table->note_count = SAMPLE_COUNT(notes);
}

static void sample_glance(struct document *document, unsigned copies)
{
    struct plot *plot = &sample_append(document, EXHIBIT_PLOT, "glance", "Figure 1")->plot;
    struct glance *glance = &plot->glance;
    plot->kind = PLOT_GLANCE;
    plot->title = "Leakage of every capacitor as a multiple of its own limit; the numbers are in "
                  "table 1.";
    plot->caption =
        "Last reading on each original part. Arrow to the left: at most this much. Dash "
        "joined to a circle: as found, before reforming. No ratio: nothing was "
        "measured, or no reading could decide.";
    *glance = (struct glance){.axis_text = "leakage as a multiple of the part’s own limit",
                              .limit_word = "limit",
                              .no_ratio_word = "no ratio",
                              .times_sign = "×"};
    size_t count = SAMPLE_COUNT(sample_parts);
    glance->rows = arena_array(document->arena, count * copies, sizeof *glance->rows);
    for (size_t i = 0; i < count * copies; i++) {
        const struct sample_part *part = &sample_parts[i / copies];
        bool coarse = strcmp(part->ref, "C15") == 0;
        double half = coarse ? 0.48 : isnan(part->ratio) ? NONE : 0.08;
        glance->rows[glance->row_count++] = (struct glance_row){
            .place = part->place,
            .ref = sample_ref(document, part, (unsigned)(i % copies)),
            .ratio = part->ratio,
            .at_most = part->bound[0] == '<',
            .band_low = 1 - half,
            .band_high = 1 + half,
            .found_ratio = part->found_ratio,
            .mark = part->mark,
            .outcome = arena_print(document->arena, "%s, %s", part->outcome, part->done),
            .outcome_narrow = part->outcome,
            .strong = part->mark == MARK_FAIL};
    }
}

static void sample_title(struct document *document)
{
    static struct fact left[] = {{"Set", "five-valve superhet, about 1954"},
                                 {"Chassis", "P54/2, serial 20817"},
                                 {"Supply", "transformer, 230 V 50 Hz"},
                                 {"Valves", "ECH81, EF89, EBC81, EL84, EZ80"}};
    static struct fact right[] = {{"Owner", "T. Amberley"},
                                  {"Received", "2031-04-02"},
                                  {"Returned", "2031-05-20"},
                                  {"Restorer", "N. Tolley"}};
    sample_append(document, EXHIBIT_TITLE, "title", NULL)->title =
        (struct title_block){.shop_name = "Marsh & Tolley",
                             .shop_trade = "Care and repair of valve radios",
                             .shop_address = "3 Ropewalk Yard, Netherby",
                             .shop_contact = "bench@marsh-tolley.example",
                             .title = "Ashdene Plover 54",
                             .subtitle = "Restoration record 2031-022, client’s copy"};
    sample_append(document, EXHIBIT_FACTS, "facts", NULL)->facts =
        (struct facts){left, right, SAMPLE_COUNT(left), SAMPLE_COUNT(right)};
}

static void sample_headline(struct document *document)
{
    static struct headline_line lines[] = {
        {STROKE_KEPT, "45 kept: 40 tested, 2 reformed, 3 untested"},
        {STROKE_LIFTED, "1 left in place, disconnected"},
        {STROKE_SHELL, "3 shells kept, new inside"},
        {STROKE_REMOVED, "3 removed, in bag 1"}};
    static struct headline_kind kinds[] = {{"capacitors", {16, 1, 3, 1}, "16 of 21"},
                                           {"resistors", {17, 0, 0, 2}, "17 of 19"},
                                           {"windings", {7, 0, 0, 0}, "7 of 7"},
                                           {"switches, controls", {5, 0, 0, 0}, "5 of 5"}};
    sample_append(document, EXHIBIT_HEADLINE, "kept", NULL)->headline = (struct headline){
        .heading = "Kept original parts",
        .kept = "45",
        .of = "of 52",
        .lines = lines,
        .line_count = SAMPLE_COUNT(lines),
        .kinds = kinds,
        .kind_count = SAMPLE_COUNT(kinds),
        .below = "Seen from above 14 of 14, from below 29 of 36, hidden 2 of 2. "
                 "Valves 4 of 5. One earlier repair (C5) is kept and not counted.",
        .title = "One stroke for each original part, by kind"};
}

static void sample_replaced(struct document *document)
{
    static const struct column columns[] = {{"Ref", NULL, NULL, COLUMN_REF, 0, 1},
                                            {"Original", NULL, "was", COLUMN_TEXT, 0, 3},
                                            {"Now", NULL, "now", COLUMN_TEXT, 0, 3},
                                            {"Why", NULL, "why", COLUMN_TEXT, 0, 3},
                                            {"The original", NULL, "where", COLUMN_TEXT, 0, 3}};
    static const char *const texts[][5] = {
        {"C10", "0.05 µF 350 V waxed paper", "polypropylene 0.047 µF 630 V", "AVC line loses 8.8 %",
         "shell in place, signed inside the end"},
        {"C17", "0.05 µF 350 V waxed paper", "polypropylene 0.047 µF 630 V",
         "output valve over its rating", "shell in place, signed inside the end"},
        {"C18", "0.25 µF 350 V waxed paper", "polypropylene 0.22 µF 630 V",
         "over the limit, within the uncertainty", "shell in place, signed inside the end"},
        {"C20", "50 µF 25 V electrolytic", "electrolytic 47 µF 63 V", "leakage rule not met",
         "in place, one lead lifted"},
        {"C23", "0.01 µF 1000 V waxed paper", "class X2, 0.01 µF 310 V a.c.",
         "across the mains without a class", "bag 1, with the set"},
        {"R9", "47 kΩ ½ W, measured 69 kΩ", "47 kΩ 1 W carbon film", "rail to V3 15 % low",
         "bag 1, with the set"}};
    struct table *table = &sample_append(document, EXHIBIT_TABLE, "replaced", "Table 2")->table;
    sample_table_of(document, table, columns, 5, SAMPLE_COUNT(texts));
    table->caption = "What was changed, and where the original is.";
    table->lined = table->text_only = true;
    table->row_count = SAMPLE_COUNT(texts);
    for (size_t i = 0; i < table->row_count; i++)
        for (size_t j = 0; j < 5; j++)
            table->rows[i].cells[j].text = texts[i][j];
}

static struct curve *sample_curve(struct document *document, struct curve_panel *panel,
                                  const double (*points)[2], size_t count)
{
    struct curve *curve = &panel->curves[panel->curve_count++];
    curve->points = arena_array(document->arena, count, sizeof *curve->points);
    curve->point_count = count;
    curve->broken = true;
    curve->fit_from_s = curve->fit_to_s = NONE;
    for (size_t i = 0; i < count; i++)
        curve->points[i] = (struct curve_point){.x_s = points[i][0], .y = points[i][1] * 1e-6};
    return curve;
}

static void sample_reform(struct document *document)
{
    static const double steps[5][5][2] = {
        {{30, 180}, {120, 74}, {300, 33}, {600, 19}, {840, 15}},
        {{930, 1700}, {1200, 820}, {1800, 410}, {2400, 290}, {3000, 240}},
        {{3090, 2400}, {3600, 1300}, {4500, 760}, {5700, 520}, {6600, 430}},
        {{6690, 2900}, {7200, 1700}, {8400, 1000}, {9600, 760}, {10800, 640}},
        {{10890, 3100}, {11700, 1900}, {13200, 1200}, {15000, 850}, {16800, 690}}};
    static const double rest[5][2] = {{30, 1100}, {60, 700}, {120, 450}, {180, 340}, {300, 260}};
    static double volts[] = {50, 150, 250, 350, 450}, rest_volts[] = {450};
    static const char *const labels[] = {"1", "2", "3", "4", "5"};
    struct plot *plot = &sample_append(document, EXHIBIT_PLOT, "reform-c21", "Figure 2")->plot;
    plot->kind = PLOT_CURVES;
    plot->title = "Current and volts against time while C21 was reformed";
    plot->caption =
        "C21, 16 µF 450 V. Current (log scale) and volts across the part; 1 to 5 are the "
        "steps. Circles are readings; the filled circle is the reading that decides.";
    struct curves *curves = &plot->curves;
    *curves = (struct curves){.panel_count = 2,
                              .y_log = true,
                              .y_scale = 1e-6,
                              .y_unit = "µA",
                              .limit = 940e-6,
                              .limit_word = "limit",
                              .limit_text = "940 µA",
                              .deciding_text = "260 µA",
                              .volts_word = "volts"};
    struct curve_panel *log = &curves->panels[0], *after = &curves->panels[1];
    log->curves = arena_array(document->arena, 5, sizeof *log->curves);
    after->curves = arena_array(document->arena, 1, sizeof *after->curves);
    for (int i = 0; i < 5; i++)
        sample_curve(document, log, steps[i], 5)->label = labels[i];
    sample_curve(document, after, rest, 5)->points[4].deciding = true;
    log->step_volts = volts;
    log->x_max_s = 16800;
    after->step_volts = rest_volts;
    after->x_max_s = 300;
    after->title = "after 12 h rest";
}

static void sample_soak(struct document *document)
{
    static const double points[][2] = {{15, 3.9},   {30, 3.1},   {60, 2.62},
                                       {120, 2.34}, {300, 2.15}, {600, 2.10}};
    static const struct column columns[] = {{"Time", "s", NULL, COLUMN_NUMBER, 0, 1},
                                            {"Leakage", "µA", NULL, COLUMN_NUMBER, 0, 1}};
    static const char *const numbers[][3] = {{"15", "3", ".90"},  {"30", "3", ".10"},
                                             {"60", "2", ".62"},  {"120", "2", ".34"},
                                             {"300", "2", ".15"}, {"600", "2", ".10"}};
    struct plot *plot = &sample_append(document, EXHIBIT_PLOT, "soak-c17", "Figure 3")->plot;
    plot->kind = PLOT_CURVES;
    plot->title = "Leakage of C17 against time at 100 V; it levels at 2.0 µA, above its limit";
    plot->caption =
        "C17 at 100 V. The line is fitted to the readings; it levels at 2.0 µA ± 0.1 µA.";
    struct curves *curves = &plot->curves;
    *curves = (struct curves){.panel_count = 1,
                              .y_scale = 1e-6,
                              .y_unit = "µA",
                              .limit = 0.19e-6,
                              .limit_word = "limit",
                              .limit_text = "0.19 µA",
                              .deciding_text = "2.10 µA"};
    struct curve_panel *panel = &curves->panels[0];
    panel->curves = arena_array(document->arena, 1, sizeof *panel->curves);
    panel->x_log = true;
    panel->x_max_s = 600;
    struct curve *curve = sample_curve(document, panel, points, SAMPLE_COUNT(points));
    curve->points[SAMPLE_COUNT(points) - 1].deciding = true;
    curve->fit_from_s = 15;
    curve->fit_to_s = 600;
    curve->fit_count = 24;
    curve->fit_y = arena_array(document->arena, curve->fit_count, sizeof *curve->fit_y);
    for (size_t i = 0; i < curve->fit_count; i++) {
        double time_s = 15 * pow(40, (double)i / (double)(curve->fit_count - 1));
        curve->fit_y[i] = (2.0 + 0.62 * pow(time_s / 60, -0.8)) * 1e-6;
    }
    struct table *table = plot->numbers = arena_get(document->arena, sizeof *table);
    sample_table_of(document, table, columns, 2, SAMPLE_COUNT(numbers));
    table->row_count = SAMPLE_COUNT(numbers);
    for (size_t i = 0; i < table->row_count; i++) {
        table->rows[i].cells[0].figures = sample_figures("", numbers[i][0], "", "");
        table->rows[i].cells[1].figures = sample_figures("", numbers[i][1], numbers[i][2], "");
    }
}

static void sample_stage(struct document *document)
{
    static const struct column columns[] = {
        {"", NULL, NULL, COLUMN_REF, 22, 1},
        {"", NULL, NULL, COLUMN_TEXT, 8, 2},
        {"Designed", NULL, NULL, COLUMN_NUMBER, 12, 1},
        {"Found", NULL, NULL, COLUMN_NUMBER, 12, 1},
        {"Left", NULL, NULL, COLUMN_NUMBER, 12, 1},
        {"Found", "at the set", "found at the set", COLUMN_NUMBER, 13, 2},
        {"Left", "at the set", "left", COLUMN_NUMBER, 11, 2},
        {"Rating", NULL, "rating", COLUMN_NUMBER, 10, 2}};
    /* label, unit, then whole and fraction of designed, found, left, both at the set, rating */
    static const char *const texts[][14] = {
        {"grid", "V", "0", ".00", "6", ".1", "0", ".00", "5", ".6", "0", ".0", NULL, NULL},
        {"cathode", "V", "7", ".3", "10", ".2", "7", ".2", "10", ".0", "7", ".4", NULL, NULL},
        {"anode", "V", "243", "", "236", "", "244", "", "235", "", "245", "", NULL, NULL},
        {"anode current", "mA", "47", ".2", "66", ".0", "46", ".8", NULL, NULL, NULL, NULL, NULL,
         NULL},
        {"anode dissipation", "W", "11", ".1", "14", ".9", "11", ".1", NULL, NULL, NULL, NULL, "12",
         ".0"}};
    struct table *table = &sample_append(document, EXHIBIT_TABLE, "stage-output", "Table 3")->table;
    sample_table_of(document, table, columns, SAMPLE_COUNT(columns), SAMPLE_COUNT(texts));
    table->caption = "V4, EL84, to chassis. Calculated for a book valve with the resistors as "
                     "designed, as found and as left; beside it what the set itself showed.";
    table->remark =
        "Bold: above the valve’s rating. A real valve may differ from the book valve by 25 %.";
    table->row_count = SAMPLE_COUNT(texts);
    for (size_t i = 0; i < table->row_count; i++) {
        struct cell *cells = table->rows[i].cells;
        cells[0].text = texts[i][0];
        cells[1].text = texts[i][1];
        for (size_t j = 0; j < 6; j++)
            cells[2 + j].figures = sample_figures("", texts[i][2 + 2 * j], texts[i][3 + 2 * j], "");
    }
    table->rows[4].cells[3].strong = true;
}

static void sample_safety(struct document *document)
{
    static const struct column columns[] = {{"Measured", NULL, NULL, COLUMN_REF, 0, 1},
                                            {"Value", NULL, NULL, COLUMN_NUMBER, 0, 1},
                                            {"Figure to meet", NULL, NULL, COLUMN_NUMBER, 0, 1},
                                            {"Taken from", NULL, NULL, COLUMN_TEXT, 0, 3}};
    static const char *const texts[][8] = {
        {"earth bond, chassis to plug", "0", ".07", "Ω", "≤", "0", ".10",
         "standard recalled, not seen"},
        {"insulation, mains to chassis, 500 V", "150", "", "MΩ", "≥", "1", "", "shop policy"},
        {"touch current, worse polarity", "0", ".05", "mA", "≤", "0", ".50",
         "IEC 62368-1, recalled"}};
    struct table *table = &sample_append(document, EXHIBIT_TABLE, "safety", "Table 4")->table;
    sample_table_of(document, table, columns, SAMPLE_COUNT(columns), SAMPLE_COUNT(texts));
    table->caption = "Measured on 2031-05-19 at 239 V.";
    table->lined = true;
    table->row_count = SAMPLE_COUNT(texts);
    for (size_t i = 0; i < table->row_count; i++) {
        const char *const *text = texts[i];
        table->rows[i].cells[0].text = text[0];
        table->rows[i].cells[1].figures = sample_figures("", text[1], text[2], text[3]);
        table->rows[i].cells[2].figures = sample_figures(text[4], text[5], text[6], text[3]);
        table->rows[i].cells[3].text = text[7];
    }
}

static void sample_plates(struct document *document)
{
    struct plate *pair = &sample_append(document, EXHIBIT_PLATE, "plate-1", "Plate 1")->plate;
    *pair = (struct plate){.picture_count = 2, .caption = "Underside, 2031-04-03 and 2031-05-19."};
    pair->pictures[0] =
        (struct plate_picture){.file = "01.jpg",
                               .when = "Before.",
                               .text = "Underside with the earlier repair C5 at the left",
                               .width_px = 1600,
                               .height_px = 1100};
    pair->pictures[1] = (struct plate_picture){.file = "02.jpg",
                                               .when = "After.",
                                               .text = "C10, C17 and C18 restuffed in their shells",
                                               .width_px = 1600,
                                               .height_px = 1100};
    struct plate *single = &sample_append(document, EXHIBIT_PLATE, "plate-2", "Plate 2")->plate;
    *single = (struct plate){.picture_count = 1, .caption = "Label, 2031-04-03."};
    single->pictures[0] = (struct plate_picture){.file = "03.jpg",
                                                 .text = "Paper label inside the cabinet",
                                                 .width_px = 900,
                                                 .height_px = 1200};
}

static void sample_shares(struct document *document)
{
    static struct share_row rows[] = {
        {"waxed paper", 0.61, 0.57, 0.66, 0.55, 0.66, {"1412 of 2318", "241 sets", "233"}},
        {"electrolytic", 0.48, 0.43, 0.53, 0.40, 0.57, {"402 of 838", "190 sets", "161"}},
        {"polyester", 0.02, 0.00, 0.05, 0.02, 0.02, {"3 of 176", "41 sets", "0"}},
        {"mica", 0.007, NONE, NONE, NONE, NONE, {"1 of 140", "4 sets", "2"}}};
    struct plot *plot = &sample_append(document, EXHIBIT_PLOT, "shares", "Figure 4")->plot;
    plot->kind = PLOT_SHARES;
    plot->title = "Share failed by type";
    plot->caption =
        "Share of parts that failed as found. Point: the share. Heavy line: where the "
        "true share lies, with 95 % confidence, parts of one set counted as alike. Thin "
        "line below it: the share if every part replaced unread had been good, or bad.";
    plot->shares =
        (struct shares){.rows = rows,
                        .row_count = SAMPLE_COUNT(rows),
                        .axis_words = {"none", "2 in 10", "4 in 10", "6 in 10", "8 in 10", "all"},
                        .count_heads = {"failed", "in", "unread"}};
}

static void sample_bench(struct document *document)
{
    static const struct column columns[] = {{"Ref", NULL, NULL, COLUMN_REF, 0, 1},
                                            {"Place", "lift this end", NULL, COLUMN_TEXT, 0, 1},
                                            {"Marked", NULL, NULL, COLUMN_NUMBER, 0, 1},
                                            {"Set", NULL, NULL, COLUMN_NUMBER, 0, 1},
                                            {"Soak", NULL, NULL, COLUMN_NUMBER, 0, 1},
                                            {"Limit", "µA", NULL, COLUMN_NUMBER, 0, 1},
                                            {"Earlier", "time, µA", NULL, COLUMN_BLANK, 13, 1},
                                            {"At soak", "µA", NULL, COLUMN_BLANK, 13, 1},
                                            {"Measured", "C", NULL, COLUMN_BLANK, 9, 1},
                                            {"Done", NULL, NULL, COLUMN_BLANK, 11, 1}};
    static struct write_on lines[] = {
        {"Date", "", 6}, {"Bench", "°C", 4}, {"Humidity", "%", 4}, {"Meter", "", 6}, {"By", "", 6}};
    sample_append(document, EXHIBIT_TWO_COLUMNS, "before", NULL);
    sample_prose(
        document,
        "- Plug out, discharge through 10 kΩ 5 W, prove under 10 V with a meter, then lift.\n"
        "- One lead lifted, part at bench temperature, never above its marked volts.\n"
        "- Soak from the last change of volts or range.\n");
    sample_append(document, EXHIBIT_WRITE_ON, "write-on", NULL)->write_on =
        (struct write_ons){lines, SAMPLE_COUNT(lines)};
    struct table *table = &sample_append(document, EXHIBIT_TABLE, "bench", "Sheet 1")->table;
    sample_table_of(document, table, columns, SAMPLE_COUNT(columns), 4);
    table->caption = "Leakage. Pass: reading at or under the limit less its uncertainty.";
    table->write_in = true;
    table->row_count = 4;
    for (size_t i = 0; i < 4; i++) {
        const struct sample_part *part = &sample_parts[i];
        struct cell *cells = table->rows[i].cells;
        cells[0].text = part->ref;
        cells[1] = (struct cell){.text = part->place, .second = part->lift};
        cells[2].figures = sample_figures("", part->whole, part->fraction, part->unit);
        cells[2].second_figures = sample_figures("", part->volts, "", "V");
        cells[3].figures = sample_figures("", part->set, "", "V");
        cells[4].figures = sample_figures("", part->soak, "", part->soak_unit);
        cells[5].figures = sample_figures("", part->limit_whole, part->limit_fraction, "");
    }
}

static void sample_methods(struct document *document)
{
    static struct working_line lines[] = {
        {"leak of C17", "I = 2.10 µA at 100 V, 60 s", "47.6 MΩ", "reading"},
        {"grid shift", "(90 V − Vg)/(R + Rs) = Vg/Rg", "+6.1 V", "Kirchhoff"},
        {"cathode current", "book valve, Rk 150 Ω", "66.0 mA", "valve book, EL84"}};
    struct working *working =
        &sample_append(document, EXHIBIT_WORKING, "working-c17", NULL)->working;
    *working = (struct working){"Working for C17", lines, SAMPLE_COUNT(lines), false};
    sample_append(document, EXHIBIT_SMALL, "small", NULL);
    sample_prose(document,
                 "Leakage meter: 2 % + 0.01 µA, resolution 0.01 µA, 10 kΩ in series; compared "
                 "2031-01-12. Volts: 0.5 % + 1 digit, 10 MΩ.\n\nU is expanded, *k* = 2.\n");
}

/* A document without anything in it but the words that its pages need. */
static inline struct document *sample_empty(struct arena *arena, enum document_kind kind)
{
    struct document *document = arena_get(arena, sizeof *document);
    *document = (struct document){.kind = kind,
                                  .root = cmark_node_new(CMARK_NODE_DOCUMENT),
                                  .arena = arena,
                                  .language = "en",
                                  .page_word = "page",
                                  .page_word_of = "of",
                                  .continued = "(continued)",
                                  .accent = "#1b4b6b"};
    return document;
}

static void sample_words(struct document *document)
{
    document->title = "Record 2031-022, Ashdene Plover 54";
    document->author = "Marsh & Tolley";
    document->subject = "Restoration record";
    document->running_head = "Record 2031-022, client’s copy";
    document->contents_word = "Contents";
    document->skip_word = "To the text";
    document->footer = "Record 2031-022, client’s copy, written 2031-05-20. A change after that "
                       "date breaks the fingerprint.";
    document->sections_numbered = true;
    document->accent_dark = "#8fc3e6";
    document->date = (struct date){.set = true, .year = 2031, .month = 5, .day = 20};
    document->fingerprint = "5d41c7e290ab36f817d24e6bc3905fa1882e6d074bf9a315e06c2d9871f3b54a";
}

static inline struct document *sample_document(struct arena *arena, unsigned copies)
{
    struct document *document = sample_empty(arena, DOCUMENT_RECORD);
    sample_words(document);
    sample_title(document);
    sample_headline(document);
    sample_append(document, EXHIBIT_CONTENTS, "contents", NULL);
    sample_prose(document,
                 "## All capacitors at a glance\n\nA mark left of the line leaks less than its "
                 "place in the circuit allows, a mark right of it more. Within the shaded strip "
                 "the meter cannot tell.\n");
    sample_glance(document, copies);
    sample_prose(
        document,
        "## Condition on arrival\n\nComplete, one owner, in use until 2017. Mains lead perished at "
        "the grommet. On a limited supply the set hummed; the output valve ran hot within a "
        "minute.\n"
        "\n### Asked for\n\n> Working again for weekend use, and as little changed as is "
        "sensible.\n\n"
        "1. Keep the *waxed* cases.\n2. See the [maker’s sheet](https://example.org/plover-54).\n");
    sample_prose(document, "## Leakage\n");
    sample_leakage(document, copies);
    sample_prose(document, "## Replaced and restuffed\n");
    sample_replaced(document);
    sample_prose(document,
                 "## Reforming\n\nThe two sections of CAN1 were brought up through 68 kΩ in five "
                 "steps and tested again after a night’s rest.\n");
    sample_reform(document);
    sample_soak(document);
    sample_prose(document, "## Output stage\n");
    sample_stage(document);
    sample_prose(document, "## Plates\n");
    sample_plates(document);
    sample_prose(document, "## Safety measurements\n");
    sample_safety(document);
    sample_prose(document, "## What the archive shows\n");
    sample_shares(document);
    sample_append(document, EXHIBIT_PAGE_BREAK, "break", NULL);
    sample_prose(document, "## To write in\n");
    sample_bench(document);
    sample_prose(document,
                 "## Cautions\n\n- The chassis carries lethal volts, and its capacitors hold them "
                 "after the plug is out.\n- The measurements hold for the date given.\n");
    sample_prose(document, "## Methods and sources\n");
    sample_methods(document);
    sample_prose(document,
                 "## Fingerprint\n\nSHA-256 of `findings.json` in the same folder. Any change to "
                 "it changes this number.\n");
    sample_append(document, EXHIBIT_FINGERPRINT, "hash", NULL)->fingerprint.text =
        "5d41c7e290ab36f817d24e6bc3905fa1882e6d074bf9a315e06c2d9871f3b54a";
    return document;
}

/* The tree; the arena is the caller's. */
static inline void sample_document_release(struct document *document)
{
    cmark_node_free(document->root);
    document->root = NULL;
}

#endif
