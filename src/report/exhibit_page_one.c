/* Page 1: who, what, when, and the headline "kept original parts: n of m". */
#include "report/composition.h"
#include "report/typography.h"

#include <string.h>

static const char *set_name(const struct composition *composition)
{
    const struct job *job = composition->job;
    const char *names[] = {job->set.maker.text, job->set.model.text};
    const char *name = text_join(composition->arena, " ", names, 2);
    return name ? name : phrase(&composition->say, "title.unnamed_set", NULL);
}

/* The set on papers whose title is their own name: "Lindmere Tern A42, chassis A42/3". */
static const char *set_line(const struct composition *composition)
{
    const struct phrasing *say = &composition->say;
    const struct job *job = composition->job;
    const char *parts[] = {
        set_name(composition),
        job->set.chassis.text ? phrase(say, "title.chassis", "chassis", job->set.chassis.text, NULL)
                              : NULL,
        job->set.serial.text ? phrase(say, "fact.serial_is", "serial", job->set.serial.text, NULL)
                             : NULL,
    };
    return text_join(composition->arena, ", ", parts, sizeof parts / sizeof *parts);
}

static void name_document(const struct composition *composition, struct title_block *block)
{
    const struct phrasing *say = &composition->say;
    const char *job = composition->job->number;
    const char *in_progress =
        composition->findings->in_progress ? phrase(say, "title.in_progress", NULL) : NULL;
    block->title = set_name(composition);
    block->subtitle = "";
    switch (composition->kind) {
    case DOCUMENT_RECORD:
        block->subtitle = phrase(say, "title.record", "job", job, "copy",
                                 phrase_in(say, "copy", copy_text(composition->findings->copy)),
                                 "in_progress", in_progress, NULL);
        break;
    case DOCUMENT_SHEET:
        block->title = phrase(say, "title.sheet", "job", job, NULL);
        block->subtitle = set_line(composition);
        break;
    case DOCUMENT_ASSESSMENT:
        block->title =
            phrase(say, "title.assessment", "job", job, "in_progress", in_progress, NULL);
        block->subtitle = set_line(composition);
        break;
    case DOCUMENT_WORKING:
        block->title = phrase(say, "title.working", "job", job, NULL);
        block->subtitle = set_line(composition);
        break;
    case DOCUMENT_MANUAL:
        block->title = phrase(say, "title.manual", NULL);
        break;
    }
}

/* The picture behind the last photograph. */
static const struct plate_picture *logo(const struct composition *composition)
{
    const struct report_picture *given =
        composition->pictures ? &composition->pictures[composition->job->photo_count] : NULL;
    if (!given || !given->file)
        return NULL;
    struct plate_picture *picture = arena_get(composition->arena, sizeof *picture);
    *picture = (struct plate_picture){.file = given->file,
                                      .text = composition->shop->name,
                                      .width_px = given->width_px,
                                      .height_px = given->height_px,
                                      .picture = given->picture};
    return picture;
}

void exhibit_title(struct composition *composition, size_t index)
{
    (void)index;
    struct exhibit *exhibit = exhibit_begin(composition, EXHIBIT_TITLE, "title");
    const struct shop *shop = composition->shop;
    exhibit->title = (struct title_block){
        .shop_name = shop->name,
        .shop_trade = shop->trade,
        .shop_address = shop->address,
        .shop_contact = shop->contact,
        .logo = logo(composition),
    };
    name_document(composition, &exhibit->title);
    exhibit_place(composition, exhibit);
}

/* ---- facts */

struct fact_list {
    struct fact items[8];
    size_t count;
};

static void add_fact(const struct composition *composition, struct fact_list *list, const char *key,
                     const char *text)
{
    if (text && *text)
        list->items[list->count++] = (struct fact){phrase_in(&composition->say, "fact", key),
                                                   text_typeset(composition->arena, text)};
}

static const char *set_text(const struct composition *composition)
{
    const struct job *job = composition->job;
    const char *parts[] = {job->set.description.text,
                           job->set.year.set ? job->set.year.written : NULL};
    return text_join(composition->arena, ", ", parts, 2);
}

static const char *chassis_text(const struct composition *composition)
{
    const struct job *job = composition->job;
    const char *serial = job->set.serial.text ? phrase(&composition->say, "fact.serial_is",
                                                       "serial", job->set.serial.text, NULL)
                                              : NULL;
    const char *parts[] = {job->set.chassis.text, serial};
    return text_join(composition->arena, ", ", parts, 2);
}

static const char *supply_fact(const struct composition *composition)
{
    const struct job *job = composition->job;
    const char *mains[] = {text_quantity(composition, &job->set.mains),
                           text_quantity(composition, &job->set.frequency)};
    const char *parts[] = {
        job->set.supply == SUPPLY_UNKNOWN
            ? NULL
            : phrase_in(&composition->say, "supply", supply_text(job->set.supply)),
        text_join(composition->arena, " ", mains, 2)};
    return text_join(composition->arena, ", ", parts, 2);
}

/* Each valve type once, in the order of the file; a half counts as its valve. */
static const char *valves_text(const struct composition *composition)
{
    const struct job *job = composition->job;
    struct buffer text = {0};
    for (size_t i = 0; i < job->valve_count + job->stage_count; i++) {
        const char *type = i < job->valve_count ? job->valves[i].type
                                                : job->stages[i - job->valve_count].valve_type;
        size_t length = type ? strcspn(type, " ") : 0;
        const char *known = buffer_string(&text);
        if (length == 0)
            continue;
        const char *found = memmem(known, text.length, type, length);
        if (found && (found[length] == ',' || found[length] == '\0'))
            continue;
        if (text.length)
            buffer_text(&text, ", ");
        buffer_append(&text, type, length);
    }
    const char *list = text.length ? arena_text(composition->arena, text.data, text.length) : NULL;
    buffer_release(&text);
    return list;
}

static struct fact *keep_facts(const struct composition *composition, const struct fact_list *list)
{
    struct fact *facts = arena_array(composition->arena, list->count, sizeof *facts);
    if (list->count)
        memcpy(facts, list->items, list->count * sizeof *facts);
    return facts;
}

void exhibit_facts(struct composition *composition, size_t index)
{
    (void)index;
    const struct job *job = composition->job;
    struct fact_list left = {0}, right = {0};
    add_fact(composition, &left, "set", set_text(composition));
    add_fact(composition, &left, "chassis", chassis_text(composition));
    add_fact(composition, &left, "supply", supply_fact(composition));
    add_fact(composition, &left, "valves", valves_text(composition));
    const char *owner[] = {job->owner.name.text, job->owner.contact.text};
    add_fact(composition, &right, "owner", text_join(composition->arena, ", ", owner, 2));
    add_fact(composition, &right, "received", date_text(&job->received));
    add_fact(composition, &right, "returned",
             job->returned.set ? job->returned.written
                               : phrase(&composition->say, "fact.not_returned", NULL));
    add_fact(composition, &right, "technician", job->technician.text);
    add_fact(composition, &right, "continues", job->continues.text);
    struct exhibit *exhibit = exhibit_begin(composition, EXHIBIT_FACTS, "facts");
    exhibit->facts = (struct facts){keep_facts(composition, &left), keep_facts(composition, &right),
                                    left.count, right.count};
    exhibit_place(composition, exhibit);
}

/* ---- headline */

enum { HEADLINE_STROKES_MAX = 120 }; /* beyond: words and numbers only */

static const char *number_text(const struct composition *composition, unsigned number)
{
    return arena_print(composition->arena, "%u", number);
}

/* "bag 1, bag 2" where few places hold the removed parts; NULL when there are many. */
static const char *removed_where(const struct composition *composition)
{
    const struct job *job = composition->job;
    const char *names[3] = {0};
    if (job->removed_count == 0 || job->removed_count > 3)
        return NULL;
    for (size_t i = 0; i < job->removed_count; i++)
        names[i] = job->removed[i].name;
    return text_join(composition->arena, ", ", names, 3);
}

static void add_line(struct headline *headline, enum stroke stroke, const char *text)
{
    headline->lines[headline->line_count++] = (struct headline_line){stroke, text};
}

static void add_lines(struct composition *composition, struct headline *headline,
                      const struct kept_count *total)
{
    const struct phrasing *say = &composition->say;
    headline->lines = arena_array(composition->arena, 4, sizeof *headline->lines);
    const char *kinds[] = {
        total->tested
            ? phrase(say, "headline.tested", "n", number_text(composition, total->tested), NULL)
            : NULL,
        total->reformed
            ? phrase(say, "headline.reformed", "n", number_text(composition, total->reformed), NULL)
            : NULL,
        total->untested
            ? phrase(say, "headline.untested", "n", number_text(composition, total->untested), NULL)
            : NULL,
    };
    add_line(headline, STROKE_KEPT,
             phrase(say, "headline.kept", "n", number_text(composition, total->kept), "how",
                    text_join(composition->arena, ", ", kinds, 3), NULL));
    if (total->disconnected)
        add_line(headline, STROKE_LIFTED,
                 phrase(say, "headline.disconnected", "n",
                        number_text(composition, total->disconnected), NULL));
    if (total->restuffed)
        add_line(headline, STROKE_SHELL,
                 phrase(say, "headline.restuffed", "n", number_text(composition, total->restuffed),
                        "one", total->restuffed == 1 ? "1" : NULL, NULL));
    if (total->removed)
        add_line(headline, STROKE_REMOVED,
                 phrase(say, "headline.removed", "n", number_text(composition, total->removed),
                        "where", removed_where(composition), NULL));
}

static const char *n_of_m(const struct composition *composition, const struct kept_count *count)
{
    return phrase(&composition->say, "headline.n_of_m", "n", number_text(composition, count->kept),
                  "m", number_text(composition, count->of), NULL);
}

static void add_kinds(struct composition *composition, struct headline *headline)
{
    const struct originality *originality = &composition->findings->originality;
    headline->kinds = arena_array(composition->arena, 4, sizeof *headline->kinds);
    for (size_t i = 0; i < 4; i++) {
        const struct kept_count *kind = &originality->kinds[i];
        if (kind->of == 0)
            continue;
        struct headline_kind *row = &headline->kinds[headline->kind_count++];
        row->label = phrase_in(&composition->say, "kind", kind->name);
        row->count_text = n_of_m(composition, kind);
        if (originality->total.of > HEADLINE_STROKES_MAX)
            continue;
        row->strokes[STROKE_KEPT] = kind->kept;
        row->strokes[STROKE_LIFTED] = kind->disconnected;
        row->strokes[STROKE_SHELL] = kind->restuffed;
        row->strokes[STROKE_REMOVED] = kind->removed;
    }
}

/* "Seen from above 13 of 13, from below 28 of 35." */
static const char *seen_sentence(const struct composition *composition)
{
    const struct originality *originality = &composition->findings->originality;
    static const enum seen order[] = {SEEN_ABOVE, SEEN_BELOW, SEEN_HIDDEN};
    const char *sides[3] = {0};
    for (size_t i = 0; i < 3; i++) {
        const struct kept_count *side = &originality->seen[order[i]];
        if (side->of == 0)
            continue;
        const char *key = arena_print(composition->arena, "headline.seen_%s", seen_text(order[i]));
        sides[i] = phrase(&composition->say, key, "count", n_of_m(composition, side), NULL);
    }
    const char *list = text_join(composition->arena, ", ", sides, 3);
    return list ? phrase(&composition->say, "headline.seen", "list", list, NULL) : NULL;
}

static const char *count_sentence(const struct composition *composition, const char *key,
                                  unsigned number)
{
    struct mustache_value *values = mustache_map(composition->arena);
    if (number == 0)
        return NULL;
    mustache_set_text(composition->arena, values, "n", number_text(composition, number));
    mustache_set_flag(composition->arena, values, "one", number == 1);
    return phrase_of(&composition->say, arena_print(composition->arena, "headline.%s", key),
                     values);
}

static const char *below_text(const struct composition *composition)
{
    const struct originality *originality = &composition->findings->originality;
    const char *sentences[] = {
        seen_sentence(composition),
        originality->valves.of ? phrase(&composition->say, "headline.valves", "count",
                                        n_of_m(composition, &originality->valves), NULL)
                               : NULL,
        count_sentence(composition, "repairs_kept", originality->earlier_repairs_kept),
        count_sentence(composition, "repairs_replaced", originality->earlier_repairs_replaced),
        count_sentence(composition, "missing", originality->missing),
        count_sentence(composition, "unmeasured", originality->replaced_unmeasured),
        count_sentence(composition, "open", originality->open),
    };
    return text_join(composition->arena, " ", sentences, sizeof sentences / sizeof *sentences);
}

void exhibit_headline(struct composition *composition, size_t index)
{
    (void)index;
    const struct phrasing *say = &composition->say;
    const struct originality *originality = &composition->findings->originality;
    const struct kept_count *total = &originality->total;
    if (total->of == 0)
        return;
    struct exhibit *exhibit = exhibit_begin(composition, EXHIBIT_HEADLINE, "kept");
    struct headline *headline = &exhibit->headline;
    const char *kept = number_text(composition, total->kept);
    const char *of = number_text(composition, total->of);
    headline->heading = phrase(say, "headline.heading", NULL);
    headline->kept = kept;
    headline->of = phrase(say, "headline.of", "m", of, NULL);
    headline->qualifier =
        originality->of_the_parts_listed ? phrase(say, "headline.of_the_parts_listed", NULL) : NULL;
    headline->title = phrase(say, "headline.title", "n", kept, "m", of, NULL);
    headline->below = below_text(composition);
    add_lines(composition, headline, total);
    add_kinds(composition, headline);
    exhibit_place(composition, exhibit);
}
