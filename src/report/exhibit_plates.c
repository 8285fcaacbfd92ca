/* Plates: photographs, the same view before and after side by side. */
#include "report/composition.h"

#include <string.h>

static bool has_picture(const struct composition *composition, size_t photo)
{
    return composition->pictures && composition->pictures[photo].file;
}

bool has_plates(const struct composition *composition)
{
    for (size_t i = 0; i < composition->job->photo_count; i++)
        if (has_picture(composition, i))
            return true;
    return false;
}

static const char *picture_text(const struct photo *photo)
{
    return photo->caption.text ? photo->caption.text : photo->shows.text ? photo->shows.text : "";
}

static void add_picture(const struct composition *composition, struct plate *plate, size_t index,
                        bool paired)
{
    const struct photo *photo = &composition->job->photos[index];
    const struct report_picture *picture = &composition->pictures[index];
    plate->pictures[plate->picture_count++] = (struct plate_picture){
        .file = picture->file,
        .when = paired ? phrase_in(&composition->say, "plate", photo->after ? "after" : "before")
                       : NULL,
        .text = text_sentence(composition->arena, picture_text(photo)),
        .width_px = picture->width_px,
        .height_px = picture->height_px,
        .picture = picture->picture,
    };
}

/* The other picture of a pair, behind this one in the list; NOT_LISTED: none. */
static int partner_of(const struct composition *composition, size_t index)
{
    const struct job *job = composition->job;
    for (size_t i = index + 1; job->photos[index].pair && i < job->photo_count; i++)
        if (job->photos[i].pair == job->photos[index].pair && has_picture(composition, i))
            return (int)i;
    return NOT_LISTED;
}

static bool is_second(const struct composition *composition, size_t index)
{
    const struct job *job = composition->job;
    for (size_t i = 0; job->photos[index].pair && i < index; i++)
        if (job->photos[i].pair == job->photos[index].pair && has_picture(composition, i))
            return partner_of(composition, i) == (int)index;
    return false;
}

/* What the pair shows and when it was taken; other NULL: it stands alone. */
static const char *caption(const struct composition *composition, const struct photo *photo,
                           const struct photo *other)
{
    const char *dates[] = {date_text(&photo->taken), other ? date_text(&other->taken) : NULL};
    const char *taken =
        text_join(composition->arena, phrase(&composition->say, "plate.and", NULL), dates, 2);
    char *shows = arena_copy(composition->arena, text_refs(composition->arena, photo->shows.text));
    size_t length = shows ? strlen(shows) : 0;
    if (length && shows[length - 1] == '.')
        shows[length - 1] = '\0';
    return phrase(&composition->say, "caption.plate", "shows",
                  text_sentence(composition->arena, shows), "taken", taken, NULL);
}

void exhibit_plates(struct composition *composition, size_t index)
{
    (void)index;
    unsigned number = 0;
    for (size_t i = 0; i < composition->job->photo_count; i++) {
        if (!has_picture(composition, i) || is_second(composition, i))
            continue;
        int partner = partner_of(composition, i);
        bool swapped = partner != NOT_LISTED && composition->job->photos[i].after &&
                       !composition->job->photos[partner].after;
        const char *id = arena_print(composition->arena, "plate-%u", ++number);
        struct exhibit *exhibit = exhibit_begin(composition, EXHIBIT_PLATE, id);
        add_picture(composition, &exhibit->plate, swapped ? (size_t)partner : i, partner >= 0);
        if (partner >= 0)
            add_picture(composition, &exhibit->plate, swapped ? i : (size_t)partner, true);
        const struct photo *photos = composition->job->photos;
        exhibit->plate.caption =
            caption(composition, &photos[i], partner == NOT_LISTED ? NULL : &photos[partner]);
        exhibit->number = exhibit_number(composition, NUMBERED_PLATE);
        exhibit_place(composition, exhibit);
    }
}
