#include "write/text_width.h"

#include "base/buffer.h"
#include "base/utf8.h"

#include <string.h>
#include <utf8proc.h>

enum { FIRST = 0x20, LAST = 0x7e, WIDE = 1000 };

/* Advance widths in thousandths of the em, rounded, of U+0020 to U+007E: table hmtx of
   OpenSans-Regular.ttf and OpenSans-Semibold.ttf (Debian 12, fonts-open-sans 1.11). */
static const unsigned short advances[2][LAST - FIRST + 1] = {
    {260, 267, 401, 646, 572, 823, 730, 221, 296, 296, 552, 572, 245, 322, 266, 367, 572, 572, 572,
     572, 572, 572, 572, 572, 572, 572, 266, 266, 572, 572, 572, 429, 899, 633, 648, 631, 729, 556,
     516, 728, 738, 279, 267, 614, 519, 903, 754, 779, 602, 779, 618, 549, 553, 728, 595, 926, 577,
     560, 571, 329, 367, 329, 542, 448, 577, 556, 613, 476, 613, 561, 339, 548, 614, 253, 253, 525,
     253, 930, 614, 604, 613, 613, 408, 477, 353, 614, 501, 778, 524, 504, 468, 379, 551, 379, 572},
    {260, 276, 436, 646, 571, 862, 740, 243, 317, 317, 548, 571, 267, 322, 275, 390,
     571, 571, 571, 571, 571, 571, 571, 571, 571, 571, 275, 278, 571, 571, 571, 453,
     898, 661, 660, 634, 734, 558, 532, 726, 751, 305, 299, 639, 542, 923, 783, 787,
     615, 787, 639, 550, 566, 742, 622, 946, 622, 592, 575, 330, 390, 330, 537, 429,
     592, 580, 623, 495, 623, 576, 363, 556, 635, 279, 279, 572, 279, 956, 635, 611,
     623, 623, 431, 487, 393, 635, 535, 817, 551, 536, 478, 386, 551, 371, 571}};

/* Signs of the trade outside ASCII, from the same tables. */
static const struct {
    unsigned short code_point, regular, semibold;
} signs[] = {{0x00a0, 260, 260}, {0x00b0, 428, 428}, {0x00b1, 572, 571}, {0x00b5, 619, 639},
             {0x00b7, 266, 275}, {0x00bd, 780, 830}, {0x00d7, 572, 571}, {0x03a9, 782, 784},
             {0x03bc, 619, 639}, {0x2009, 200, 200}, {0x2013, 500, 500}, {0x2019, 170, 193},
             {0x2026, 784, 819}, {0x2126, 782, 784}, {0x2212, 572, 571}, {0x2264, 572, 571},
             {0x2265, 572, 571}};

static unsigned advance_of(uint32_t code_point, bool semibold)
{
    if (code_point >= FIRST && code_point <= LAST)
        return advances[semibold][code_point - FIRST];
    for (size_t i = 0; i < sizeof signs / sizeof signs[0]; i++)
        if (signs[i].code_point == code_point)
            return semibold ? signs[i].semibold : signs[i].regular;
    /* Small letters with accents are as wide as those without; all but the ligature. */
    return code_point >= 0xe0 && code_point <= 0xff && code_point != 0xe6 ? 640 : WIDE;
}

unsigned text_width_milli(const char *text, bool semibold)
{
    unsigned sum = 0;
    if (!text)
        return 0;
    const char *end = text + strlen(text);
    while (text < end)
        sum += advance_of(utf8_next(&text, end), semibold);
    return sum;
}

size_t text_columns(const char *text, size_t length)
{
    size_t columns = 0;
    const char *end = text + length;
    while (text < end) {
        if ((unsigned char)*text < 0x80) {
            columns++;
            text++;
            continue;
        }
        uint32_t code_point = utf8_next(&text, end);
        int width =
            code_point == UTF8_ILL_FORMED ? 1 : utf8proc_charwidth((utf8proc_int32_t)code_point);
        columns += width > 0 ? (size_t)width : 0;
    }
    return columns;
}

const char *text_fitted(struct arena *arena, const char *text, unsigned limit_milli, bool semibold)
{
    if (!text || text_width_milli(text, semibold) <= limit_milli)
        return text;
    unsigned sum = advance_of(0x2026, semibold);
    const char *cursor = text, *end = text + strlen(text), *fits = text;
    while (cursor < end) {
        sum += advance_of(utf8_next(&cursor, end), semibold);
        if (sum > limit_milli)
            break;
        fits = cursor;
    }
    while (fits > text && fits[-1] == ' ')
        fits--;
    return arena_print(arena, "%.*s…", (int)(fits - text), text);
}
