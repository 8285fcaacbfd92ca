/*
 * A sale copy must not name the owner. What the copy leaves out is filtered elsewhere; this looks
 * for what slipped into the texts that stay.
 */
#include "base/memory.h"
#include "report/report.h"
#include "report/shown_text.h"

#include <stdlib.h>
#include <string.h>
#include <utf8proc.h>

enum { WANTED_MAX = 16, LAST_WORD_MIN = 3, CONTACT_PIECE_MIN = 5 };

/* A text to be found, folded, and what it is. */
struct wanted {
    const char *folded, *what;
};

struct search {
    const struct job *job;
    struct arena *arena;
    struct diagnostics *diagnostics;
    struct wanted wanted[WANTED_MAX];
    size_t wanted_count;
    bool found;
};

/* Runs of space as one, none at the end; line ends kept as '\n' when told so. In place. */
static const char *close_gaps(char *text, bool keep_lines)
{
    char *end = text;
    for (const char *at = text; *at; at++) {
        bool space = *at == ' ' || *at == '\t' || *at == '\r' || (*at == '\n' && !keep_lines);
        if (!space)
            *end++ = *at;
        else if (end > text && end[-1] != ' ' && end[-1] != '\n')
            *end++ = ' ';
    }
    while (end > text && (end[-1] == ' ' || end[-1] == '\n'))
        end--;
    *end = '\0';
    return text;
}

/* A copy in small letters, NULL when not all is ASCII. */
static char *fold_ascii(struct arena *arena, const char *text)
{
    for (const char *at = text; *at; at++)
        if ((unsigned char)*at >= 0x80)
            return NULL;
    char *copy = arena_copy(arena, text);
    for (char *at = copy; *at; at++)
        if (*at >= 'A' && *at <= 'Z')
            *at = (char)(*at - 'A' + 'a');
    return copy;
}

/* Without case and accents, gaps closed. */
static const char *fold(struct arena *arena, const char *text, bool keep_lines)
{
    char *ascii = fold_ascii(arena, text); /* most texts are, and the tables of Unicode are slow */
    if (ascii)
        return close_gaps(ascii, keep_lines);
    utf8proc_uint8_t *folded = NULL;
    utf8proc_ssize_t length =
        utf8proc_map((const utf8proc_uint8_t *)text, 0, &folded,
                     UTF8PROC_NULLTERM | UTF8PROC_STABLE | UTF8PROC_DECOMPOSE | UTF8PROC_COMPAT |
                         UTF8PROC_CASEFOLD | UTF8PROC_STRIPMARK | UTF8PROC_IGNORE);
    if (length == UTF8PROC_ERROR_NOMEM)
        memory_exhausted();
    if (length < 0)
        return arena_copy(arena, text);
    char *copy = arena_text(arena, (const char *)folded, (size_t)length);
    free(folded);
    return close_gaps(copy, keep_lines);
}

/* A letter or digit of any script begins here. */
static bool is_word_at(const char *at)
{
    utf8proc_int32_t code_point;
    if (utf8proc_iterate((const utf8proc_uint8_t *)at, -1, &code_point) <= 0)
        return false;
    utf8proc_category_t category = utf8proc_category(code_point);
    return category <= UTF8PROC_CATEGORY_NO && category != UTF8PROC_CATEGORY_CN;
}

static bool is_word_before(const char *text, const char *at)
{
    if (at == text)
        return false;
    at--;
    while (at > text && ((unsigned char)*at & 0xC0) == 0x80)
        at--;
    return is_word_at(at);
}

static bool is_gap(char c)
{
    return c == ' ' || c == '\n';
}

/* The length of `wanted` at this place, a gap matching any gap (also a line end); 0: not here. */
static size_t match_at(const char *place, const char *wanted)
{
    const char *at = place;
    for (; *wanted; wanted++, at++) {
        if (is_gap(*wanted) && is_gap(*at)) {
            while (is_gap(at[1]))
                at++;
            continue;
        }
        if (*at != *wanted)
            return 0;
    }
    return (size_t)(at - place);
}

static bool ends_at(const char *start, const char *end)
{
    return !is_word_at(end) || !is_word_before(start, end);
}

/* As words of their own: an owner named Wax does not stand in "waxed". The family does in the
   plural: "the Estcourts". */
static const char *find_words(const char *text, const char *wanted)
{
    for (const char *at = text; *at; at++) {
        size_t length = match_at(at, wanted);
        if (length == 0)
            continue;
        const char *end = at + length;
        bool begins = !is_word_before(text, at) || !is_word_at(at);
        size_t plural = strncmp(end, "es", 2) == 0 ? 2 : *end == 's';
        if (begins && (ends_at(at, end) || ends_at(at, end + plural)))
            return at;
    }
    return NULL;
}

static void want(struct search *search, const char *folded, const char *what)
{
    if (!*folded || search->wanted_count == WANTED_MAX)
        return;
    search->wanted[search->wanted_count++] = (struct wanted){folded, what};
}

/* Letters, not bytes: "Øye" has three. */
static size_t count_letters(const char *text)
{
    size_t letters = 0;
    for (; *text; text++)
        letters += ((unsigned char)*text & 0xC0) != 0x80;
    return letters;
}

static void want_name(struct search *search, const char *name)
{
    const char *folded = fold(search->arena, name, false);
    const char *end = folded + strlen(folded);
    while (end > folded && !is_word_before(folded, end))
        end--;
    const char *last = end;
    while (last > folded && !is_gap(last[-1]))
        last--;
    want(search, folded, "the owner's name");
    const char *word = arena_text(search->arena, last, (size_t)(end - last));
    if (last > folded && count_letters(word) >= LAST_WORD_MIN)
        want(search, word, "the owner's last name");
}

static bool tells_where(const char *piece)
{
    return strlen(piece) >= CONTACT_PIECE_MIN && strpbrk(piece, "@0123456789") != NULL;
}

/* The contact whole, and those of its pieces that alone tell where somebody is. */
static void want_contact(struct search *search, const char *contact)
{
    const char *folded = fold(search->arena, contact, false);
    want(search, folded, "the owner's contact");
    for (const char *start = folded; *start;) {
        size_t length = strcspn(start, ",;");
        const char *piece = fold(search->arena, arena_text(search->arena, start, length), false);
        if (strcmp(piece, folded) != 0 && tells_where(piece))
            want(search, piece, "a part of the owner's contact");
        start += length + strspn(start + length, ",; ");
    }
}

static struct position position_of(struct position at, const char *text, const char *place)
{
    for (const char *c = text; c < place; c++)
        at.line += at.line && *c == '\n';
    return at;
}

static void look_at(void *data, const char *text, struct position at, const char *what)
{
    struct search *search = data;
    const char *folded = fold(search->arena, text, true);
    for (size_t i = 0; i < search->wanted_count; i++) {
        const char *place = find_words(folded, search->wanted[i].folded);
        if (!place)
            continue;
        search->found = true;
        diagnostic_add(search->diagnostics, &search->job->source, position_of(at, folded, place),
                       DIAGNOSTIC_OWNER_IN_SALE_COPY,
                       "the sale copy is not written until it is out",
                       "%s stands in %s, which a sale copy shows", search->wanted[i].what, what);
        return; /* one for each text: the name holds the last name too */
    }
}

bool report_sale_copy_is_clean(const struct job *job, struct arena *arena,
                               struct diagnostics *diagnostics)
{
    struct search search = {.job = job, .arena = arena, .diagnostics = diagnostics};
    if (job->owner.name.text)
        want_name(&search, job->owner.name.text);
    if (job->owner.contact.text)
        want_contact(&search, job->owner.contact.text);
    if (search.wanted_count)
        shown_text_visit(job, look_at, &search);
    return !search.found;
}
