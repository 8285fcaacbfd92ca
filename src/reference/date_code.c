#include "reference/date_code.h"

#include <stdlib.h>
#include <string.h>
#include <strings.h>

enum { FIRST_YEAR = 1920, LAST_YEAR = 1989, OPEN_FROM = 1930, OPEN_TO = 1979, WEEKS = 53 };

/* A stamp cut into runs of letters and of figures. */
enum { RUNS_MAX = 4 };
struct run {
    const char *start;
    size_t length;
    bool figures;
};
struct runs {
    struct run items[RUNS_MAX];
    size_t count;
};

static bool is_letter(char byte)
{
    return (byte >= 'a' && byte <= 'z') || (byte >= 'A' && byte <= 'Z');
}

static bool is_figure(char byte)
{
    return byte >= '0' && byte <= '9';
}

static bool cut(const char *text, struct runs *runs)
{
    while (*text) {
        if (!is_letter(*text) && !is_figure(*text)) {
            if (!strchr(" -/.'", *text))
                return false;
            text++;
            continue;
        }
        if (runs->count == RUNS_MAX)
            return false;
        struct run *run = &runs->items[runs->count++];
        *run = (struct run){text, 0, is_figure(*text)};
        while (run->figures ? is_figure(*text) : is_letter(*text)) {
            run->length++;
            text++;
        }
    }
    return runs->count > 0;
}

static int number_of(const struct run *run, size_t from, size_t length)
{
    int number = 0;
    for (size_t i = from; i < from + length; i++)
        number = 10 * number + (run->start[i] - '0');
    return number;
}

static void add(struct date_code *code, int year, int month, int week)
{
    if (year < FIRST_YEAR || year > LAST_YEAR || code->count == DATE_READINGS_MAX)
        return;
    size_t at = code->count;
    for (size_t i = 0; i < code->count; i++) {
        const struct date_reading *one = &code->readings[i];
        if (one->year == year && one->month == month && one->week == week)
            return;
    }
    while (at > 0 && code->readings[at - 1].year > year) {
        code->readings[at] = code->readings[at - 1];
        at--;
    }
    code->readings[at] = (struct date_reading){year, month, week};
    code->count++;
}

/* One figure of a year: every decade. */
static void add_open(struct date_code *code, int figure, int month, int week)
{
    code->decade_open = true;
    for (int decade = OPEN_FROM; decade <= OPEN_TO; decade += 10)
        add(code, decade + figure, month, week);
}

/* ---- plain */

static int month_named(const struct run *run)
{
    static const char *const months[] = {"january",   "february", "march",    "april",
                                         "may",       "june",     "july",     "august",
                                         "september", "october",  "november", "december"};
    if (run->figures || run->length < 3)
        return 0;
    for (int i = 0; i < 12; i++)
        if (strncasecmp(months[i], run->start, run->length) == 0 &&
            run->length <= strlen(months[i]))
            return i + 1;
    return strncasecmp("sept", run->start, run->length) == 0 && run->length == 4 ? 9 : 0;
}

static int year_of(const struct run *run)
{
    if (!run->figures)
        return 0;
    int number = number_of(run, 0, run->length);
    if (run->length == 2)
        return 1900 + number;
    return run->length == 4 && number >= FIRST_YEAR && number <= LAST_YEAR ? number : 0;
}

static void read_plain(const struct runs *runs, struct date_code *code)
{
    const struct run *first = &runs->items[0], *last = &runs->items[1];
    code->source = SOURCE_DATE_PLAIN;
    if (runs->count == 1 && first->figures && first->length == 4 && year_of(first))
        add(code, year_of(first), 0, 0);
    if (runs->count != 2)
        return;
    int month = month_named(first);
    if (month && year_of(last)) {
        add(code, year_of(last), month, 0);
    } else if (first->figures && last->figures && first->length <= 2 && year_of(last)) {
        month = number_of(first, 0, first->length);
        if (month >= 1 && month <= 12)
            add(code, year_of(last), month, 0);
    } else if (first->figures && last->figures && first->length == 4 && last->length <= 2) {
        month = number_of(last, 0, last->length);
        if (month >= 1 && month <= 12)
            add(code, year_of(first), month, 0);
    }
}

/* ---- letters */

static char upper(char byte)
{
    return (char)(byte >= 'a' ? byte - 'a' + 'A' : byte);
}

/* A 1946 ... R 1960 ... Z 1968; 0: no year. */
static int letter_year(char letter)
{
    static const char years[] = "ABCDEFGHJKLMNPRSTUVWXYZ";
    const char *found = strchr(years, upper(letter));
    return found ? 1946 + (int)(found - years) : 0;
}

/* Both ways of counting months: without I, and with it. */
static void add_pair(struct date_code *code, char year_letter, char month_letter)
{
    static const char without_i[] = "ABCDEFGHJKLM", with_i[] = "ABCDEFGHIJKL";
    int year = letter_year(year_letter);
    const char *one = strchr(without_i, upper(month_letter));
    const char *other = strchr(with_i, upper(month_letter));
    if (year && one)
        add(code, year, (int)(one - without_i) + 1, 0);
    if (year && other)
        add(code, year, (int)(other - with_i) + 1, 0);
}

static int whitsunday(char letter)
{
    static const char key[] = "WHITSUNDAY";
    const char *found = strchr(key, upper(letter));
    return found ? (int)(found - key + 1) % 10 : -1;
}

/* Blocks of letters may stand apart: "D YW". */
static void read_hunts(const char *letters, struct date_code *code)
{
    int figures[3];
    for (size_t i = 0; i < 3; i++) {
        figures[i] = whitsunday(letters[i]);
        if (figures[i] < 0)
            return;
    }
    code->source = SOURCE_DATE_HUNTS;
    int week = 10 * figures[0] + figures[1];
    if (week >= 1 && week <= WEEKS)
        add_open(code, figures[2], 0, week);
    week = 10 * figures[1] + figures[2];
    if (week >= 1 && week <= WEEKS)
        add_open(code, figures[0], 0, week);
}

static void read_letters(const struct runs *runs, struct date_code *code)
{
    char letters[4] = "";
    size_t count = 0;
    for (size_t i = 0; i < runs->count; i++) {
        if (runs->items[i].figures)
            return;
        for (size_t k = 0; k < runs->items[i].length; k++) {
            if (count == 3)
                return;
            letters[count++] = runs->items[i].start[k];
        }
    }
    if (count == 3) {
        read_hunts(letters, code);
    } else if (count == 2) {
        code->source = SOURCE_DATE_LETTERS;
        add_pair(code, letters[0], letters[1]);
        add_pair(code, letters[1], letters[0]);
    }
}

static void read_letter_figure(const struct runs *runs, struct date_code *code)
{
    const struct run *first = &runs->items[0], *last = &runs->items[1];
    if (runs->count != 2 || first->figures || first->length != 1 || !last->figures ||
        last->length != 1)
        return;
    char month = upper(first->start[0]);
    code->source = SOURCE_DATE_LETTERS;
    if (month >= 'A' && month <= 'L')
        add_open(code, number_of(last, 0, 1), month - 'A' + 1, 0);
}

/* ---- EIA */

static void read_eia(const struct runs *runs, struct date_code *code)
{
    const struct run *run = &runs->items[0];
    size_t index = 0;
    if (!run->figures && run->length == 3 && strncasecmp(run->start, "EIA", 3) == 0)
        run = &runs->items[++index];
    if (index >= runs->count || !run->figures)
        return;
    const char *maker = NULL;
    size_t from = 0;
    if (run->length == 3 && index + 2 == runs->count && runs->items[index + 1].figures) {
        maker = run->start;
        run = &runs->items[++index];
    } else if (run->length == 6 || run->length == 7) {
        maker = run->start;
        from = 3;
    }
    size_t length = run->length - from;
    if (index + 1 != runs->count || (length != 3 && length != 4))
        return;
    int week = number_of(run, run->length - 2, 2);
    if (week < 1 || week > WEEKS)
        return;
    code->source = SOURCE_DATE_EIA;
    code->maker_code = maker;
    if (length == 4)
        add(code, 1900 + number_of(run, from, 2), 0, week);
    else
        add_open(code, number_of(run, from, 1), 0, week);
}

bool date_code_read(const char *text, struct date_code *code)
{
    static void (*const readers[])(const struct runs *, struct date_code *) = {
        read_plain, read_eia, read_letters, read_letter_figure};
    struct runs runs = {0};
    if (!cut(text, &runs))
        return false;
    for (size_t i = 0; i < sizeof readers / sizeof *readers; i++) {
        struct date_code found = {0};
        readers[i](&runs, &found);
        if (found.count == 0)
            continue;
        *code = found;
        return true;
    }
    return false;
}
