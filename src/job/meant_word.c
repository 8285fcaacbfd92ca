#include "job/meant_word.h"

#include "base/diagnostic.h"

#include <stdbool.h>
#include <string.h>
#include <strings.h>

/*
 * Words of the trade that are no words of a job file (common practice, recalled), and what a job
 * file calls it. One word may stand for a key in one place and for a choice in another.
 */
static const struct {
    const char *word, *meant;
} trade_words[] = {
    /* keys */
    {"tube", "valve"},
    {"tubes", "valves"},
    {"plate", "anode"},
    {"plate load", "anode"},
    {"b+", "supply"},
    {"ht", "supply"},
    {"h.t.", "supply"},
    {"voltage", "service"},
    {"volts", "service"},
    {"working voltage", "service"},
    {"value", "marked"},
    {"rating", "marked"},
    {"marking", "marked"},
    {"make", "maker"},
    {"brand", "maker"},
    {"manufacturer", "maker"},
    {"position", "place"},
    {"location", "place"},
    {"function", "place"},
    {"kind", "type"},
    {"material", "type"},
    {"dielectric", "type"},
    {"capacity", "measured"},
    {"capacitance", "measured"},
    {"leakage", "readings"},
    {"tests", "readings"},
    {"action", "done"},
    {"status", "done"},
    {"replacement", "fitted"},
    {"replaced with", "fitted"},
    {"replaced by", "fitted"},
    {"comment", "note"},
    {"remark", "note"},
    {"remarks", "note"},
    {"customer", "owner"},
    {"client", "owner"},
    {"telephone", "contact"},
    {"phone", "contact"},
    {"address", "contact"},
    {"caps", "capacitors"},
    {"condensers", "capacitors"},
    {"chokes", "windings"},
    {"coils", "windings"},
    {"transformers", "windings"},
    {"switches", "controls"},
    {"pots", "controls"},
    {"pictures", "photos"},
    {"images", "photos"},
    {"ambient", "bench"},
    {"temperature", "bench"},
    {"line voltage", "mains"},
    /* places */
    {"grid", "coupling"},
    {"interstage", "coupling"},
    {"agc", "avc bypass"},
    {"agc bypass", "avc bypass"},
    {"agc feed", "avc feed"},
    {"b+ bypass", "decoupling"},
    {"rail", "decoupling"},
    {"filter", "smoothing"},
    {"second filter", "smoothing"},
    {"first filter", "reservoir"},
    {"input filter", "reservoir"},
    {"padder", "tuning"},
    {"trimmer", "tuning"},
    {"oscillator", "tuning"},
    {"line bypass", "across mains"},
    {"line filter", "across mains"},
    {"antenna isolator", "aerial isolator"},
    {"antenna", "aerial isolator"},
    {"ground isolator", "earth isolator"},
    /* types */
    {"wax", "waxed paper"},
    {"mp", "metallised paper"},
    {"film", "polyester"},
    {"mylar", "polyester"},
    {"dry", "electrolytic"},
    {"lytic", "electrolytic"},
    /* supply */
    {"ac", "transformer"},
    {"a.c.", "transformer"},
    {"mains", "transformer"},
    {"ac/dc", "live chassis"},
    {"ac-dc", "live chassis"},
    {"a.c./d.c.", "live chassis"},
    {"universal", "live chassis"},
    {"transformerless", "live chassis"},
    {"hot chassis", "live chassis"},
    /* what was done */
    {"changed", "replaced"},
    {"renewed", "replaced"},
    {"new", "replaced"},
    {"removed", "disconnected"},
    {"good", "kept"},
    {"ok", "kept"},
    {"tested", "kept"},
    {"repaired", "earlier repair"},
    {"replaced", "earlier repair"},
    /* names in a line */
    {"p", "anode"},
    {"a", "anode"},
    {"k", "cathode"},
    {"g", "grid"},
    {"g1", "grid"},
    {"g2", "screen"},
    {"sg", "screen"},
    {"before", "found"},
    {"after", "left"},
    {"warm", "hot"},
};

static const char *find(const char *word, const char *const *candidates)
{
    for (; *candidates; candidates++)
        if (strcasecmp(word, *candidates) == 0)
            return *candidates;
    return NULL;
}

static const char *by_trade(const char *word, const char *const *candidates)
{
    for (size_t i = 0; i < sizeof trade_words / sizeof *trade_words; i++) {
        const char *found = strcasecmp(word, trade_words[i].word) == 0
                                ? find(trade_words[i].meant, candidates)
                                : NULL;
        if (found)
            return found;
    }
    return NULL;
}

/* `part` stands in `whole` as a word or words of it. */
static bool holds(const char *whole, const char *part)
{
    size_t length = strlen(part);
    for (const char *at = whole; length > 0 && *at; at++) {
        bool begins = at == whole || at[-1] == ' ';
        if (begins && strncasecmp(at, part, length) == 0 && (!at[length] || at[length] == ' '))
            return true;
    }
    return false;
}

/* The longest candidate of which `grid coupling` says too much. */
static const char *within(const char *word, const char *const *candidates)
{
    const char *longest = NULL;
    for (; *candidates; candidates++)
        if (holds(word, *candidates) && (!longest || strlen(*candidates) > strlen(longest)))
            longest = *candidates;
    return longest;
}

/* All candidates of which `isolator` says too little. */
static const char *around(struct arena *arena, const char *word, const char *const *candidates)
{
    const char *list = NULL;
    size_t count = 0;
    for (; *candidates; candidates++) {
        if (!holds(*candidates, word))
            continue;
        list = list ? arena_print(arena, "%s, %s", list, *candidates) : *candidates;
        count++;
    }
    return list ? arena_print(arena, "write %s%s", count > 1 ? "one of: " : "", list) : NULL;
}

const char *meant_word_hint(struct arena *arena, const char *word, const char *const *candidates,
                            const char *nearest)
{
    const char *meant = by_trade(word, candidates);
    const char *near = nearest_word(word, candidates);
    if (!meant)
        meant = within(word, candidates);
    /* `wax paper` is a slip for waxed paper, though paper stands in it. */
    if (meant && !(near && holds(near, meant)))
        return arena_print(arena, "write %s", meant);
    const char *list = near ? NULL : around(arena, word, candidates);
    if (list)
        return list;
    return near ? arena_print(arena, "%s: %s", nearest, near) : NULL;
}
