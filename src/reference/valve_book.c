#include "reference/valve_book.h"

#include <math.h>
#include <string.h>

#define NONE NAN
#define VALVE(type_, kind_, name_, va, vg2, vg1, ia_ma, ig2_ma, gm_ma_v, mu_, mu12_, ra, pa, pg2,  \
              grid_leak_fixed, grid_leak_cathode, trust_, limits_trust_, doubtful_, source_)       \
    {.type = (type_),                                                                              \
     .kind = VALVE_##kind_,                                                                        \
     .name = (name_),                                                                              \
     .va_v = (va),                                                                                 \
     .vg2_v = (vg2),                                                                               \
     .vg1_v = (vg1),                                                                               \
     .ia_a = (ia_ma)*1e-3,                                                                         \
     .ig2_a = (ig2_ma)*1e-3,                                                                       \
     .gm_s = (gm_ma_v)*1e-3,                                                                       \
     .mu = (mu_),                                                                                  \
     .mu12 = (mu12_),                                                                              \
     .ra_ohm = (ra),                                                                               \
     .pa_max_w = (pa),                                                                             \
     .pg2_max_w = (pg2),                                                                           \
     .grid_leak_max_fixed_ohm = (grid_leak_fixed),                                                 \
     .grid_leak_max_cathode_ohm = (grid_leak_cathode),                                             \
     .source = (source_),                                                                          \
     .row_trust = TRUST_##trust_,                                                                  \
     .limits_trust = TRUST_##limits_trust_,                                                        \
     .doubtful = (doubtful_)},
static const struct valve_row rows[] = {
#include "reference/valve_rows.h"
};
#undef VALVE
enum { ROW_COUNT = sizeof rows / sizeof rows[0] };

/*
 * Other names of the types in the book. Cross-references as valve lists have carried them for
 * decades (common practice, recalled). Where only heater or base differ the electrodes are the
 * same, and so is everything computed here. Left out on purpose: relatives with other limits
 * (6L6GC, 5881, 6V6GTA, 6SN7GTB, 7027, 6550 without A, KT88).
 */
struct synonym {
    const char *name, *type; /* both as valve_key gives them */
};
static const struct synonym synonyms[] = {
    {"6v6", "6v6gt"},    {"6v6g", "6v6gt"},   {"6aq5a", "6aq5"},    {"el90", "6aq5"},
    {"6l6g", "6l6"},     {"6l6ga", "6l6"},    {"6l6gb", "6l6"},     {"35l6", "35l6gt"},
    {"50l6", "50l6gt"},  {"25l6", "25l6gt"},  {"25l6g", "25l6gt"},  {"hl92", "50c5"},
    {"hl94", "35c5"},    {"6y6", "6y6g"},     {"6y6gt", "6y6g"},    {"6k6", "6k6gt"},
    {"6k6g", "6k6gt"},   {"6f6g", "6f6"},     {"6f6gt", "6f6"},     {"2a5", "42"},
    {"25a6", "43"},      {"25a6g", "43"},     {"25a6gt", "43"},     {"dl95", "3q4"},
    {"dl94", "3v4"},     {"dl92", "3s4"},     {"6bq5", "el84"},     {"6ck5", "el41"},
    {"el3", "el3n"},     {"45a5", "ul41"},    {"45b5", "ul84"},     {"el86", "ul84"},
    {"6cw5", "ul84"},    {"6bm8", "ecl82"},   {"ucl82", "ecl82"},   {"50bm8", "ecl82"},
    {"pcl82", "ecl82"},  {"16a8", "ecl82"},   {"6gw8", "ecl86"},    {"pcl86", "ecl86"},
    {"14gw8", "ecl86"},  {"6a3", "2a3"},      {"6b4g", "2a3"},      {"ecc83", "12ax7"},
    {"12ax7a", "12ax7"}, {"7025", "12ax7"},   {"ebc91", "6av6"},    {"12av6", "6av6"},
    {"hbc91", "6av6"},   {"ecc82", "12au7"},  {"12au7a", "12au7"},  {"ecc81", "12at7"},
    {"12at7a", "12at7"}, {"6sn7gt", "6sn7"},  {"12sn7gt", "6sn7"},  {"12sn7", "6sn7"},
    {"6j5g", "6j5"},     {"6j5gt", "6j5"},    {"12j5gt", "6j5"},    {"l63", "6j5"},
    {"6sl7gt", "6sl7"},  {"12sl7gt", "6sl7"}, {"12sl7", "6sl7"},    {"6sq7gt", "6sq7"},
    {"12sq7", "6sq7"},   {"12sq7gt", "6sq7"}, {"ebc90", "6at6"},    {"12at6", "6at6"},
    {"hbc90", "6at6"},   {"6ak8", "eabc80"},  {"uabc80", "eabc80"}, {"pabc80", "eabc80"},
    {"9ak8", "eabc80"},  {"12bh7", "12bh7a"}, {"6sj7gt", "6sj7"},   {"12sj7", "6sj7"},
    {"12sj7gt", "6sj7"}, {"6j7g", "6j7"},     {"6j7gt", "6j7"},     {"12j7gt", "6j7"},
    {"6c6", "6j7"},      {"57", "6j7"},       {"6bx6", "ef80"},     {"6267", "ef86"},
    {"z729", "ef86"},    {"ef94", "6au6"},    {"6au6a", "6au6"},    {"12au6", "6au6"},
    {"hf94", "6au6"},    {"12sh7", "6sh7"},   {"6sk7gt", "6sk7"},   {"12sk7", "6sk7"},
    {"12sk7gt", "6sk7"}, {"ef93", "6ba6"},    {"12ba6", "6ba6"},    {"hf93", "6ba6"},
    {"6da6", "ef89"},    {"6cj5", "ef41"},    {"6k7g", "6k7"},      {"6k7gt", "6k7"},
    {"12k7gt", "6k7"},   {"12sg7", "6sg7"},   {"227", "27"},        {"uy227", "27"},
    {"245", "45"},       {"ux245", "45"},     {"247", "47"},        {"uy247", "47"},
    {"250", "50"},       {"ux250", "50"},     {"230", "30"},        {"233", "33"},
    {"237", "37"},       {"238", "38"},
};
enum { SYNONYM_COUNT = sizeof synonyms / sizeof synonyms[0] };

/* A half or a connection, written behind the type. */
static const char *const halves[] = {"triodeconn", "triode", "pentode", ""};

enum { KEY_MAX = 32 };
struct valve_key {
    char base[KEY_MAX];
    const char *half; /* of halves[] */
};

const struct valve_row *valve_book(size_t *count)
{
    *count = ROW_COUNT;
    return rows;
}

static bool is_filler(char letter)
{
    return letter == ' ' || letter == '-' || letter == '\t';
}

static char lower(char letter)
{
    return (char)(letter >= 'A' && letter <= 'Z' ? letter - 'A' + 'a' : letter);
}

/* Lower case without spaces and hyphens; "" when it is too long to be any type. */
static void squeeze(const char *name, char squeezed[KEY_MAX])
{
    size_t length = 0;
    for (; *name; name++) {
        if (is_filler(*name))
            continue;
        if (length + 1 == KEY_MAX) {
            length = 0;
            break;
        }
        squeezed[length++] = lower(*name);
    }
    squeezed[length] = '\0';
}

/* Whether a type of the book begins with the squeezed text; *type moves behind it. */
static bool begins(const char **type, const char *squeezed)
{
    const char *at = *type;
    for (; *squeezed; at++) {
        if (is_filler(*at))
            continue;
        if (lower(*at) != *squeezed++)
            return false;
    }
    while (is_filler(*at))
        at++;
    *type = at;
    return true;
}

/* half NULL: any half, but a half there must be. */
static bool is_type(const char *type, const char *base, const char *half)
{
    if (!begins(&type, base))
        return false;
    if (half)
        return begins(&type, half) && *type == '\0';
    for (size_t i = 0; halves[i][0]; i++) {
        const char *rest = type;
        if (begins(&rest, halves[i]) && *rest == '\0')
            return true;
    }
    return false;
}

/* Cut the suffix off the key's base when it ends with it and something stands before it. */
static bool cut(char *base, const char *suffix)
{
    size_t length = strlen(base), suffix_length = strlen(suffix);
    if (length <= suffix_length || strcmp(base + length - suffix_length, suffix) != 0)
        return false;
    base[length - suffix_length] = '\0';
    return true;
}

static struct valve_key key_of(const char *name)
{
    struct valve_key key;
    squeeze(name, key.base);
    if (cut(key.base, "triodeconnected"))
        key.half = halves[0];
    else
        for (size_t i = 0; i < sizeof halves / sizeof halves[0]; i++)
            if (halves[i][0] == '\0' || cut(key.base, halves[i])) {
                key.half = halves[i];
                break;
            }
    for (size_t i = 0; i < SYNONYM_COUNT; i++)
        if (strcmp(key.base, synonyms[i].name) == 0) {
            strcpy(key.base, synonyms[i].type);
            break;
        }
    return key;
}

/* The first row of the only type with this base and half. */
static const struct valve_row *first_row(const char *base, const char *half)
{
    const struct valve_row *found = NULL;
    for (size_t i = 0; i < ROW_COUNT; i++) {
        if (!is_type(rows[i].type, base, half) || (found && strcmp(found->type, rows[i].type) == 0))
            continue;
        if (found)
            return NULL;
        found = &rows[i];
    }
    return found;
}

/* "12AX7 triode" is a half of a double triode, "EL84 pentode" says what is known. */
static bool half_fits(const struct valve_row *row, const char *half)
{
    return strcmp(half, "triodeconn") != 0 &&
           (strcmp(half, "triode") == 0) == valve_kind_is_triode(row->kind);
}

const struct valve_row *valve_rows_of(const char *type, size_t *count)
{
    *count = 0;
    struct valve_key key = key_of(type);
    const struct valve_row *first = first_row(key.base, key.half);
    if (!first && key.half[0] == '\0')
        first = first_row(key.base, NULL); /* EABC80: it has one half that amplifies */
    if (!first && key.half[0] != '\0') {
        first = first_row(key.base, "");
        if (first && !half_fits(first, key.half))
            first = NULL;
    }
    if (!first)
        return NULL;
    const struct valve_row *end = rows + ROW_COUNT;
    for (const struct valve_row *row = first; row < end && strcmp(row->type, first->type) == 0;
         row++)
        ++*count;
    return first;
}

const char *valve_kind_text(enum valve_kind kind)
{
    switch (kind) {
    case VALVE_TRIODE:
        return "triode";
    case VALVE_POWER_TRIODE:
        return "power triode";
    case VALVE_BEAM:
        return "beam tetrode";
    case VALVE_OUTPUT_PENTODE:
        return "output pentode";
    case VALVE_SMALL_PENTODE:
        return "small pentode";
    case VALVE_REMOTE_PENTODE:
        return "remote cut-off pentode";
    }
    return "";
}

bool valve_kind_is_output(enum valve_kind kind)
{
    return kind == VALVE_POWER_TRIODE || kind == VALVE_BEAM || kind == VALVE_OUTPUT_PENTODE;
}

bool valve_kind_is_triode(enum valve_kind kind)
{
    return kind == VALVE_TRIODE || kind == VALVE_POWER_TRIODE;
}
