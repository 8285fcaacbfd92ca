#include "write/font_charset.h"

#include "base/memory.h"
#include "base/utf8.h"

#include <stdio.h>
#include <stdlib.h>

/* 256 code points a page, planes 0 to 2, as in font_face. */
enum { PAGE_COUNT = 0x300, CID_MAX = 65535 };

struct character {
    uint32_t code_point;
    uint16_t glyph; /* in the face */
    uint16_t advance;
};

struct font_charset {
    const struct font_face *face;
    struct character *characters; /* by CID */
    size_t count;                 /* .notdef included */
    size_t capacity;
    uint16_t *pages[PAGE_COUNT]; /* CID by code point; NULL: none on that page */
    bool sealed;
    struct font_streams streams;
};

static void append_character(struct font_charset *set, uint32_t code_point, uint16_t glyph)
{
    if (set->count == set->capacity) {
        set->capacity = set->capacity ? set->capacity * 2 : 128;
        set->characters = memory_resize(set->characters, set->capacity * sizeof *set->characters);
    }
    set->characters[set->count++] =
        (struct character){code_point, glyph, font_face_advance(set->face, glyph)};
}

struct font_charset *font_charset_create(const struct font_face *face)
{
    struct font_charset *set = memory_get_cleared(1, sizeof *set);
    set->face = face;
    set->pages[0] = memory_get_cleared(256, sizeof *set->pages[0]);
    append_character(set, 0, 0);
    return set;
}

const uint16_t *font_charset_latin(const struct font_charset *set)
{
    return set->pages[0];
}

static void release_streams(struct font_streams *streams)
{
    buffer_release(&streams->program);
    buffer_release(&streams->glyph_map);
    buffer_release(&streams->to_unicode);
    buffer_release(&streams->cid_set);
    buffer_release(&streams->widths);
}

void font_charset_destroy(struct font_charset *set)
{
    if (!set)
        return;
    release_streams(&set->streams);
    for (size_t i = 0; i < PAGE_COUNT; i++)
        free(set->pages[i]);
    free(set->characters);
    free(set);
}

const struct font_face *font_charset_face(const struct font_charset *set)
{
    return set->face;
}

/* Number of a character; 0 when it is not in the set. */
static uint16_t cid_of(const struct font_charset *set, uint32_t code_point)
{
    if (code_point >= PAGE_COUNT * 256)
        return 0;
    const uint16_t *page = set->pages[code_point >> 8];
    return page ? page[code_point & 255] : 0;
}

uint16_t font_charset_add(struct font_charset *set, uint32_t code_point)
{
    uint16_t cid = cid_of(set, code_point);
    if (cid != 0 || set->sealed || set->count > CID_MAX)
        return cid;
    uint16_t glyph = font_face_glyph(set->face, code_point);
    if (glyph == 0)
        return 0;
    uint16_t **page = &set->pages[code_point >> 8];
    if (!*page)
        *page = memory_get_cleared(256, sizeof **page);
    cid = (uint16_t)set->count;
    (*page)[code_point & 255] = cid;
    append_character(set, code_point, glyph);
    return cid;
}

/*
 * Six letters from the characters (FNV-1a): PDF wants different tags for different
 * subsets of a face in one file, and we want the same tag in every run.
 */
static void write_name(struct font_streams *streams, const struct font_charset *set)
{
    uint64_t hash = 0xCBF29CE484222325u;
    for (size_t cid = 1; cid < set->count; cid++)
        hash = (hash ^ set->characters[cid].code_point) * 0x100000001B3u;
    char tag[7] = "";
    for (int i = 0; i < 6; i++) {
        tag[i] = (char)('A' + hash % 26);
        hash /= 26;
    }
    snprintf(streams->name, sizeof streams->name, "%s+%s", tag, font_face_name(set->face));
}

static enum font_status write_program(struct font_streams *streams, const struct font_charset *set,
                                      struct deflater *deflater)
{
    uint16_t *glyphs = memory_get(2 * set->count * sizeof *glyphs);
    uint16_t *subset_glyphs = glyphs + set->count;
    for (size_t cid = 0; cid < set->count; cid++)
        glyphs[cid] = set->characters[cid].glyph;

    struct buffer plain = {0};
    enum font_status status =
        font_face_subset(set->face, glyphs, set->count, &plain, subset_glyphs);
    if (status == FONT_SUBSET_FAILED)
        memory_exhausted(); /* the face could be cut when it was opened */
    if (status == FONT_OK) {
        streams->program_length = plain.length;
        deflate_append(deflater, &streams->program, plain.data, plain.length);
        buffer_clear(&plain);
        for (size_t cid = 0; cid < set->count; cid++)
            buffer_be16(&plain, subset_glyphs[cid]);
        deflate_append(deflater, &streams->glyph_map, plain.data, plain.length);
    }
    buffer_release(&plain);
    free(glyphs);
    return status;
}

static void write_widths(struct buffer *widths, const struct font_charset *set)
{
    buffer_text(widths, "[0 [");
    for (size_t cid = 0; cid < set->count; cid++) {
        if (cid > 0)
            buffer_text(widths, " ");
        buffer_decimal(widths, (long long)set->characters[cid].advance);
    }
    buffer_text(widths, "]]");
}

static void write_cid_set(struct buffer *cid_set, const struct font_charset *set)
{
    for (size_t first = 0; first < set->count; first += 8) {
        size_t left = set->count - first;
        buffer_byte(cid_set, (char)(left >= 8 ? 0xFF : 0xFF00 >> left));
    }
}

/*
 * Length of the run from cid on whose code points follow one another. A run stays
 * inside 256 CIDs and 256 code points: a bfrange may only count in the last byte.
 */
static size_t run_length(const struct font_charset *set, size_t cid)
{
    uint32_t code_point = set->characters[cid].code_point;
    size_t length = 1;
    while (cid + length < set->count &&
           set->characters[cid + length].code_point == code_point + length &&
           (cid + length) % 256 != 0 && (code_point + length) % 256 != 0)
        length++;
    return length;
}

static void append_hex_utf16(struct buffer *text, uint32_t code_point)
{
    struct buffer utf16 = {0};
    utf8_append_utf16(&utf16, code_point);
    buffer_text(text, "<");
    for (size_t i = 0; i < utf16.length; i++)
        buffer_hex(text, (unsigned char)utf16.data[i], 2);
    buffer_text(text, ">\n");
    buffer_release(&utf16);
}

static void append_hex_cid(struct buffer *text, size_t cid)
{
    buffer_text(text, "<");
    buffer_hex(text, (uint32_t)cid, 4);
    buffer_text(text, ">");
}

/* Collects entries of one operator and writes them in blocks of at most 100, PDF's limit. */
struct cmap_section {
    const char *operator_name; /* bfchar or bfrange */
    struct buffer entries;
    unsigned entry_count;
};

static void flush_section(struct cmap_section *section, struct buffer *cmap)
{
    if (section->entry_count == 0)
        return;
    buffer_decimal(cmap, (long long)section->entry_count);
    buffer_text(cmap, " begin");
    buffer_text(cmap, section->operator_name);
    buffer_text(cmap, "\n");
    buffer_append(cmap, section->entries.data, section->entries.length);
    buffer_text(cmap, "end");
    buffer_text(cmap, section->operator_name);
    buffer_text(cmap, "\n");
    buffer_clear(&section->entries);
    section->entry_count = 0;
}

static void write_to_unicode(struct buffer *cmap, const struct font_charset *set)
{
    struct cmap_section single = {.operator_name = "bfchar"};
    struct cmap_section range = {.operator_name = "bfrange"};
    buffer_text(cmap, "/CIDInit /ProcSet findresource begin\n12 dict begin\nbegincmap\n"
                      "/CIDSystemInfo <</Registry (Adobe) /Ordering (UCS) /Supplement 0>> def\n"
                      "/CMapName /Adobe-Identity-UCS def\n/CMapType 2 def\n"
                      "1 begincodespacerange\n<0000><FFFF>\nendcodespacerange\n");
    for (size_t cid = 1; cid < set->count;) {
        size_t length = run_length(set, cid);
        struct cmap_section *section = length > 1 ? &range : &single;
        append_hex_cid(&section->entries, cid);
        if (length > 1)
            append_hex_cid(&section->entries, cid + length - 1);
        append_hex_utf16(&section->entries, set->characters[cid].code_point);
        if (++section->entry_count == 100)
            flush_section(section, cmap);
        cid += length;
    }
    flush_section(&single, cmap);
    flush_section(&range, cmap);
    buffer_text(cmap, "endcmap\nCMapName currentdict /CMap defineresource pop\nend\nend\n");
    buffer_release(&single.entries);
    buffer_release(&range.entries);
}

enum font_status font_charset_seal(struct font_charset *set, struct deflater *deflater)
{
    if (set->sealed)
        return FONT_OK;
    struct font_streams streams = {.name = ""};
    enum font_status status = write_program(&streams, set, deflater);
    if (status != FONT_OK) {
        release_streams(&streams);
        return status;
    }
    write_name(&streams, set);
    write_widths(&streams.widths, set);
    struct buffer plain = {0};
    write_cid_set(&plain, set);
    deflate_append(deflater, &streams.cid_set, plain.data, plain.length);
    buffer_clear(&plain);
    write_to_unicode(&plain, set);
    deflate_append(deflater, &streams.to_unicode, plain.data, plain.length);
    buffer_release(&plain);
    set->streams = streams;
    set->sealed = true;
    return FONT_OK;
}

const struct font_streams *font_charset_streams(const struct font_charset *set)
{
    return set->sealed ? &set->streams : NULL;
}
