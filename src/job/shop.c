#include "job/shop.h"

#include "job/reader.h"
#include "job/tables.h"

#include <math.h>
#include <string.h>

/* ---- policy: limits that nobody published ---- */

#define AT(member) offsetof(struct policy, member)
#define FORM_PURE                                                                                  \
    {                                                                                              \
        .unit = UNIT_NONE, .unit_optional = true                                                   \
    }

/* The example of a row is its default, which the tests hold against this. */
static const struct policy usual_policy = {
    .cathode_current_rise = 0.10,
    .dissipation_share = 0.05,
    .pushpull_difference = 0.10,
    .grid_shift = 0.10,
    .avc_line_loss = 0.05,
    .avc_feed_v = 0.2,
    .avc_feed_bias_share = 0.10,
    .screen_fall = 0.05,
    .screen_dropper_min_ohm = 100,
    .rail_drop = 0.02,
    .ht_current_share = 0.02,
    .detector_control_v = 0.010,
    .detector_grid_share = 0.10,
    .tuning_resistance_ratio = 20,
    .battery_share = 0.02,
    .battery_before_switch_a = 10e-6,
    .isolator_insulation_ohm = 100e6,
    .touch_current_a = 0.5e-3,
    .ageing_margin_waxed = 2,
    .ageing_margin_other = 1,
    .heat_paper_w = 0.02,
    .heat_can_w = 0.25,
    .heat_tubular_w = 0.05,
    .guard_band = 1,
    .instrument_share = 0.5,
    .working_c = 45,
    .working_near_heat_c = 55,
    .mains_rise = 1.1,
    .voltage_tolerance = 0.10,
    .repeatability = 0.005,
    .default_accuracy = 0.03,
    .volts_accuracy = 0.01,
    .reform_current_a = 5e-3,
    .reform_power_w = 0.5,
    .winding_tolerance = 0.15,
    .valve_least = 0.60,
    .leakage_rule = "JAN-C-62",
};

static const struct field policy_fields[] = {
    {.key = "cathode_current_rise",
     .kind = FIELD_FRACTION,
     .offset = AT(cathode_current_rise),
     .form = FORM_PERCENT,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "coupling, cathode and bias bypass: rise of cathode current",
     .example = "10 %",
     .why = "a new valve may already differ from the book by a quarter; a tenth more is still "
            "within its ratings, and can be measured at the cathode"},
    {.key = "dissipation_share",
     .kind = FIELD_FRACTION,
     .offset = AT(dissipation_share),
     .form = FORM_PERCENT,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "share of the rated watts that a leak may add above the rating",
     .example = "5 %",
     .why = "a stage may stand above its rating without any leak; a part fails for what it adds, "
            "not for what it finds"},
    {.key = "pushpull_difference",
     .kind = FIELD_FRACTION,
     .offset = AT(pushpull_difference),
     .form = FORM_PERCENT,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "difference of the two anode currents, of one of them",
     .example = "10 %",
     .why = "more standing current in one half magnetises the output transformer, and hum no "
            "longer cancels"},
    {.key = "grid_shift",
     .kind = FIELD_FRACTION,
     .offset = AT(grid_shift),
     .form = FORM_PERCENT,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "voltage amplifiers: shift of the grid, of the bias",
     .example = "10 %",
     .why =
         "a tenth of the bias is less than the spread of valves, and leaves the swing as it was"},
    {.key = "avc_line_loss",
     .kind = FIELD_FRACTION,
     .offset = AT(avc_line_loss),
     .form = FORM_PERCENT,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "avc bypass: fraction of the line lost",
     .example = "5 %",
     .why = "half a decibel of control, which nobody hears"},
    {.key = "avc_feed",
     .kind = FIELD_NUMBER,
     .offset = AT(avc_feed_v),
     .form = FORM_VOLTS,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "avc feed: positive volts on the line",
     .example = "0.2 V",
     .why = "about the contact potential that the line carries anyhow"},
    {.key = "avc_feed_bias_share",
     .kind = FIELD_FRACTION,
     .offset = AT(avc_feed_bias_share),
     .form = FORM_PERCENT,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "avc feed: the same, of the least bias on the line",
     .example = "10 %",
     .why = "a valve with little bias is shifted by less than 0.2 V"},
    {.key = "screen_fall",
     .kind = FIELD_FRACTION,
     .offset = AT(screen_fall),
     .form = FORM_PERCENT,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "screen bypass: fall of the screen volts",
     .example = "5 %",
     .why = "gain follows the screen; a twentieth is less than the droppers' tolerance"},
    {.key = "screen_dropper_min",
     .kind = FIELD_NUMBER,
     .offset = AT(screen_dropper_min_ohm),
     .form = FORM_OHMS,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "screen droppers below this are judged as decoupling",
     .example = "100 ohm",
     .why = "a smaller resistor is a decoupling, no dropper: the screen stands on the rail"},
    {.key = "rail_drop",
     .kind = FIELD_FRACTION,
     .offset = AT(rail_drop),
     .form = FORM_PERCENT,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "decoupling: drop of the fed rail",
     .example = "2 %",
     .why = "less than the mains varies in a day"},
    {.key = "ht_current_share",
     .kind = FIELD_FRACTION,
     .offset = AT(ht_current_share),
     .form = FORM_PERCENT,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "reservoir, smoothing: share of the HT current",
     .example = "2 %",
     .why = "less than the HT current varies from valve to valve"},
    {.key = "detector_control",
     .kind = FIELD_NUMBER,
     .offset = AT(detector_control_v),
     .form = FORM_VOLTS,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "detector: volts on a control",
     .example = "0.01 V",
     .why = "a control begins to scrape when direct current flows through its wiper"},
    {.key = "detector_grid_share",
     .kind = FIELD_FRACTION,
     .offset = AT(detector_grid_share),
     .form = FORM_PERCENT,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "detector: shift of a grid, of the bias",
     .example = "10 %",
     .why = "as grid_shift"},
    {.key = "tuning_resistance_ratio",
     .kind = FIELD_NUMBER,
     .offset = AT(tuning_resistance_ratio),
     .form = FORM_PURE,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "tuning: insulation, in times the circuit's resistance",
     .example = "20",
     .why = "the circuit then loses a twentieth of its resistance",
     .source = SOURCE_TWENTY_TIMES},
    {.key = "battery_share",
     .kind = FIELD_FRACTION,
     .offset = AT(battery_share),
     .form = FORM_PERCENT,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "battery bypass: share of the drain",
     .example = "2 %",
     .why = "less than one battery differs from the next"},
    {.key = "battery_before_switch",
     .kind = FIELD_NUMBER,
     .offset = AT(battery_before_switch_a),
     .form = FORM_AMPERES,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "battery bypass before the switch",
     .example = "10 uA",
     .why = "0.09 Ah a year, drawn while nobody listens"},
    {.key = "isolator_insulation",
     .kind = FIELD_NUMBER,
     .offset = AT(isolator_insulation_ohm),
     .form = FORM_OHMS,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "classed mains parts: least insulation",
     .example = "100 M",
     .why = "at 250 V a hundredth of the touch current that is allowed"},
    {.key = "touch_current",
     .kind = FIELD_NUMBER,
     .offset = AT(touch_current_a),
     .form = FORM_AMPERES,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "all isolators of the set together",
     .example = "0.5 mA",
     .why = "the test after repair; two readings, the plug both ways round",
     .source = SOURCE_TOUCH_CURRENT},
    {.key = "ageing_margin_waxed",
     .kind = FIELD_NUMBER,
     .offset = AT(ageing_margin_waxed),
     .form = FORM_PURE,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "waxed and moulded paper that stays: the limit is divided by this",
     .example = "2",
     .why = "its leakage goes on rising in service; 2 leaves time until the next look"},
    {.key = "ageing_margin_other",
     .kind = FIELD_NUMBER,
     .offset = AT(ageing_margin_other),
     .form = FORM_PURE,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "other parts that stay",
     .example = "1",
     .why = "no margin: mica, ceramic, film and a reformed electrolytic do not run away like waxed "
            "paper"},
    {.key = "heat_paper",
     .kind = FIELD_NUMBER,
     .offset = AT(heat_paper_w),
     .form = FORM_WATTS,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "heat limit of a paper capacitor without a case size",
     .example = "0.02 W",
     .why = "that of a tubular of 12 x 27 mm",
     .source = SOURCE_SELF_HEATING},
    {.key = "heat_can",
     .kind = FIELD_NUMBER,
     .offset = AT(heat_can_w),
     .form = FORM_WATTS,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "of a can",
     .example = "0.25 W",
     .why = "that of a can of 30 x 40 mm",
     .source = SOURCE_SELF_HEATING},
    {.key = "heat_tubular",
     .kind = FIELD_NUMBER,
     .offset = AT(heat_tubular_w),
     .form = FORM_WATTS,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "of a tubular electrolytic",
     .example = "0.05 W",
     .why = "that of a tubular of 12 x 21 mm",
     .source = SOURCE_SELF_HEATING},
    {.key = "guard_band",
     .kind = FIELD_NUMBER,
     .offset = AT(guard_band),
     .form = FORM_PURE,
     .limit = LIMIT_NOT_NEGATIVE,
     .text = "guard band, in times the expanded uncertainty; 0 for none",
     .example = "1",
     .why = "with w = U a pass is wrong in fewer than one of forty",
     .source = SOURCE_ILAC_G8},
    {.key = "instrument_share",
     .kind = FIELD_FRACTION,
     .offset = AT(instrument_share),
     .form = FORM_PERCENT,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "uncertainty above this share of the limit: not judged",
     .example = "50 %",
     .why = "above it the meter decides, not the part"},
    {.key = "working",
     .kind = FIELD_NUMBER,
     .offset = AT(working_c),
     .form = FORM_CELSIUS,
     .limit = LIMIT_RANGE,
     .min = 0,
     .max = 130,
     .text = "inside of the working set",
     .example = "45 C",
     .why = "assumed; a thermometer in your own cabinet is better: conditions, working"},
    {.key = "working_near_heat",
     .kind = FIELD_NUMBER,
     .offset = AT(working_near_heat_c),
     .form = FORM_CELSIUS,
     .limit = LIMIT_RANGE,
     .min = 0,
     .max = 130,
     .text = "within 50 mm of an output valve, rectifier or dropper",
     .example = "55 C",
     .why = "assumed, as above"},
    {.key = "mains_rise",
     .kind = FIELD_NUMBER,
     .offset = AT(mains_rise),
     .form = FORM_PURE,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "highest mains, in times the mains",
     .example = "1.1",
     .why = "public supplies are held within 10 % of their nominal volts (recalled)"},
    {.key = "voltage_tolerance",
     .kind = FIELD_FRACTION,
     .offset = AT(voltage_tolerance),
     .form = FORM_PERCENT,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "tolerance of a service sheet's volts",
     .example = "10 %",
     .why = "service sheets name no tolerance, or 10 %"},
    {.key = "repeatability",
     .kind = FIELD_FRACTION,
     .offset = AT(repeatability),
     .form = FORM_PERCENT,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "of one instrument from reading to reading",
     .example = "0.5 %",
     .why = "of one meter on one range within an hour"},
    {.key = "default_accuracy",
     .kind = FIELD_FRACTION,
     .offset = AT(default_accuracy),
     .form = FORM_PERCENT,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "of an instrument that gives none, beside one digit",
     .example = "3 %",
     .why = "an ordinary moving-coil or digital meter in good order"},
    {.key = "volts_accuracy",
     .kind = FIELD_FRACTION,
     .offset = AT(volts_accuracy),
     .form = FORM_PERCENT,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "of the test volts, where the instrument gives none",
     .example = "1 %",
     .why = "a stabilised tester; an unstabilised one is worse and should say so"},
    {.key = "reform_current",
     .kind = FIELD_NUMBER,
     .offset = AT(reform_current_a),
     .form = FORM_AMPERES,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "reforming: ceiling of the current",
     .example = "5 mA",
     .why = "keeps the heat of a forming part small"},
    {.key = "reform_power",
     .kind = FIELD_NUMBER,
     .offset = AT(reform_power_w),
     .form = FORM_WATTS,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "reforming: ceiling of a can's watts",
     .example = "0.5 W",
     .why = "a can in still air stays hand-warm"},
    {.key = "winding_tolerance",
     .kind = FIELD_FRACTION,
     .offset = AT(winding_tolerance),
     .form = FORM_PERCENT,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "windings without a marked tolerance: resistance against the service sheet",
     .example = "15 %",
     .why = "makers changed wire and turns within a model; a shorted layer shows as more"},
    {.key = "valve_least",
     .kind = FIELD_FRACTION,
     .offset = AT(valve_least),
     .form = FORM_PERCENT,
     .limit = LIMIT_ABOVE_ZERO,
     .text = "valves: least share of what the tester itself calls new",
     .example = "60 %",
     .why = "testers call a valve weak between one half and two thirds of a new one's figure"},
    {.key = "leakage_rule",
     .kind = FIELD_TEXT,
     .offset = AT(leakage_rule),
     .text = "rule for electrolytics",
     .example = "JAN-C-62",
     .why = "written for parts bought new; of the rules known here the widest",
     .source = SOURCE_JAN_C_62},
};
_Static_assert(FIELD_COUNT_OF(policy_fields) <= 64, "policy_changed has 64 places");

static const struct record policy_record = {
    .name = "policy",
    .section = "policy (of shop.yaml)",
    .text = "Limits that nobody published: the shop's own. The examples are the defaults.",
    .size = sizeof(struct policy),
    .fields = policy_fields,
    .field_count = FIELD_COUNT_OF(policy_fields),
};

#undef AT
#define AT(member) offsetof(struct shop, member)

/* ---- the shop ---- */

/* An address may have several lines. */
static void lines_read(struct reader *reader, const struct field *field, const struct node *node,
                       void *record)
{
    if (node->kind != NODE_SCALAR) {
        struct line line;
        reader_line(reader, field->key, node, &line); /* tells the shape */
        return;
    }
    size_t length = node->length;
    while (length && (node->text[length - 1] == '\n' || node->text[length - 1] == ' '))
        length--;
    *(const char **)(void *)((char *)record + field->offset) =
        arena_text(reader->arena, node->text, length);
}

static int digit_of(char byte)
{
    if (byte >= '0' && byte <= '9')
        return byte - '0';
    if (byte >= 'a' && byte <= 'f')
        return byte - 'a' + 10;
    return byte >= 'A' && byte <= 'F' ? byte - 'A' + 10 : -1;
}

/* Relative luminance of #rrggbb (WCAG 2.2, definition); below 0: no colour. */
static double luminance(const char *colour)
{
    static const double weights[3] = {0.2126, 0.7152, 0.0722};
    double sum = 0;
    if (strlen(colour) != 7 || colour[0] != '#')
        return -1;
    for (int i = 0; i < 3; i++) {
        int high = digit_of(colour[1 + 2 * i]), low = digit_of(colour[2 + 2 * i]);
        if (high < 0 || low < 0)
            return -1;
        double share = (high * 16 + low) / 255.0;
        sum += weights[i] * (share <= 0.04045 ? share / 12.92 : pow((share + 0.055) / 1.055, 2.4));
    }
    return sum;
}

/* Links and limits are read in this colour: 4.5 to 1 on the paper (WCAG 2.2, 1.4.3). */
static void accent_read(struct reader *reader, const struct field *field, const struct node *node,
                        void *record)
{
    bool dark = strcmp(field->key, "accent_dark") == 0;
    struct line line;
    if (!reader_line(reader, field->key, node, &line))
        return;
    const char *colour = arena_print(reader->arena, "%s%.*s", line.text[0] == '#' ? "" : "#",
                                     (int)line.length, line.text);
    double own = luminance(colour), paper = luminance(dark ? "#14171a" : "#fdfdfb");
    if (own < 0) {
        reader_tell(reader, line.at, DIAGNOSTIC_UNKNOWN_CHOICE,
                    arena_print(reader->arena, "write it so: %s: '%s'", field->key, field->example),
                    "'%.*s' is no colour", (int)line.length, line.text);
        return;
    }
    double contrast = own > paper ? (own + 0.05) / (paper + 0.05) : (paper + 0.05) / (own + 0.05);
    if (contrast < 4.5) {
        reader_tell(reader, line.at, DIAGNOSTIC_VALUE_IMPOSSIBLE,
                    dark ? "take a lighter one" : "take a darker one",
                    "%s cannot be read on the %s paper: contrast %.1f to 1, 4.5 is the least",
                    colour, dark ? "dark" : "light", contrast);
        return;
    }
    *(const char **)(void *)((char *)record + field->offset) = colour;
}

static const char usual_accent[] = "#1b4b6b", usual_accent_dark[] = "#8fc3e6";

static const char *const page_choices[] = {"A4", "Letter", NULL};

static const struct field shop_fields[] = {
    {.key = "name",
     .kind = FIELD_TEXT,
     .offset = AT(name),
     .text = "of the shop",
     .example = "Hollins & Wray"},
    {.key = "trade",
     .kind = FIELD_TEXT,
     .offset = AT(trade),
     .text = "what it does",
     .example = "Repair and care of valve radios"},
    {.key = "address",
     .kind = FIELD_LINE,
     .offset = AT(address),
     .read = lines_read,
     .text = "one line, or several behind |",
     .example = "4 Tanner Row, Wexbridge"},
    {.key = "contact",
     .kind = FIELD_LINE,
     .offset = AT(contact),
     .read = lines_read,
     .text = "telephone, mail",
     .example = "bench@hollins-wray.example"},
    {.key = "logo",
     .kind = FIELD_TEXT,
     .offset = AT(logo),
     .text = "picture inside the archive",
     .example = "photos/shop.png"},
    {.key = "page",
     .kind = FIELD_CHOICE,
     .offset = AT(page),
     .choices = page_choices,
     .text = "paper; default A4",
     .example = "A4"},
    {.key = "wording",
     .kind = FIELD_TEXT,
     .offset = AT(wording),
     .text = "us: tube, B+, plate (words-us.yaml); without it valve, HT, anode",
     .example = "us"},
    {.key = "accent",
     .kind = FIELD_LINE,
     .offset = AT(accent),
     .read = accent_read,
     .text = "colour of links and limits, in quotes",
     .example = "#1b4b6b"},
    {.key = "accent_dark",
     .kind = FIELD_LINE,
     .offset = AT(accent_dark),
     .read = accent_read,
     .text = "the same on dark paper",
     .example = "#8fc3e6"},
    {.key = "policy",
     .kind = FIELD_RECORD,
     .offset = AT(policy),
     .record = &policy_record,
     .text = "the shop's limits",
     .example = "{guard_band: 1}"},
};

const struct record shop_record = {
    .name = "shop",
    .section = "shop.yaml",
    .text = "The shop, once for the whole archive, whose top folder holds it.",
    .size = sizeof(struct shop),
    .fields = shop_fields,
    .field_count = FIELD_COUNT_OF(shop_fields),
};

struct shop shop_default(void)
{
    return (struct shop){.page = PAGE_A4,
                         .accent = usual_accent,
                         .accent_dark = usual_accent_dark,
                         .policy = usual_policy};
}

/* `accent: #1b4b6b` is an empty value and a comment. */
static void tell_empty_colours(struct reader *reader)
{
    static const char *const keys[] = {"accent", "accent_dark"};
    for (size_t i = 0; i < FIELD_COUNT_OF(keys); i++) {
        const struct node *node = node_child(reader->root, keys[i]);
        if (node && node_is_empty(node) && !node->damaged)
            reader_tell(reader, node->key_at, DIAGNOSTIC_TEXT_CUT,
                        arena_print(reader->arena, "write it so: %s: '%s'", keys[i],
                                    i == 0 ? usual_accent : usual_accent_dark),
                        "'%s' is empty: a # begins a comment", keys[i]);
    }
}

static void mark_changes(struct shop *shop)
{
    const char *own = (const char *)&shop->policy, *usual = (const char *)&usual_policy;
    for (size_t i = 0; i < FIELD_COUNT_OF(policy_fields); i++) {
        size_t offset = policy_fields[i].offset;
        if (policy_fields[i].kind == FIELD_TEXT)
            shop->policy_changed[i] =
                strcmp(shop->policy.leakage_rule, usual_policy.leakage_rule) != 0;
        else
            shop->policy_changed[i] = *(const double *)(const void *)(own + offset) !=
                                      *(const double *)(const void *)(usual + offset);
    }
}

const struct shop *shop_read(const struct source *source, struct arena *arena,
                             struct diagnostics *diagnostics)
{
    struct shop *shop = arena_get(arena, sizeof *shop);
    *shop = shop_default();
    shop->source = *source;
    if (!source->text)
        return shop;
    struct reader reader = {.source = source, .arena = arena, .diagnostics = diagnostics};
    size_t first_blank = strspn(source->text, " \t\r\n");
    if (first_blank == source->length) /* an empty shop.yaml marks an archive: all defaults */
        return shop;
    reader.root = yaml_tree_read(source, arena, diagnostics);
    if (!reader.root || node_is_empty(reader.root))
        return shop;
    if (reader.root->kind != NODE_MAPPING) {
        reader_tell(&reader, reader.root->at, DIAGNOSTIC_WRONG_SHAPE,
                    "write it so: name: Hollins & Wray", "shop.yaml is made of keys");
        return shop;
    }
    record_read(&reader, &shop_record, reader.root, shop);
    tell_empty_colours(&reader);
    mark_changes(shop);
    return shop;
}
