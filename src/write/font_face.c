#include "write/font_face.h"

#include "base/memory.h"

#include <hb-ot.h>
#include <hb-subset.h>
#include <hb.h>
#include <stdlib.h>

/* 256 code points a page, planes 0 to 2. */
enum { PAGE_COUNT = 0x300 };

struct font_face {
    hb_face_t *outlines; /* only the tables a PDF needs; see open_outlines */
    char name[64];       /* PostScript names have at most 63 characters */
    struct font_metrics metrics;
    uint16_t *advances; /* by glyph */
    unsigned glyph_count;
    uint16_t *pages[PAGE_COUNT]; /* glyph by code point; NULL: none on that page */
};

/* Big-endian fields of a table; 0 beyond its end, so a cut table is harmless. */
struct table {
    hb_blob_t *blob;
    const unsigned char *data;
    unsigned length;
};

static struct table table_open(hb_face_t *face, hb_tag_t tag)
{
    struct table table = {.blob = hb_face_reference_table(face, tag)};
    table.data = (const unsigned char *)hb_blob_get_data(table.blob, &table.length);
    return table;
}

static void table_close(struct table *table)
{
    hb_blob_destroy(table->blob);
}

static unsigned field_u16(const struct table *table, unsigned offset)
{
    if (table->length < 2 || offset > table->length - 2)
        return 0;
    return (unsigned)table->data[offset] << 8 | table->data[offset + 1];
}

static int field_s16(const struct table *table, unsigned offset)
{
    return (int16_t)field_u16(table, offset);
}

static uint32_t field_u32(const struct table *table, unsigned offset)
{
    return (uint32_t)field_u16(table, offset) << 16 | field_u16(table, offset + 2);
}

const char *font_status_text(enum font_status status)
{
    switch (status) {
    case FONT_OK:
        return "no error";
    case FONT_NOT_READABLE:
        return "the file cannot be read";
    case FONT_NOT_TRUETYPE:
        return "not a TrueType font with glyf outlines";
    case FONT_NOT_EMBEDDABLE:
        return "its licence bits forbid embedding or subsetting";
    case FONT_SUBSET_FAILED:
        return "its tables contradict each other";
    }
    return "unknown status";
}

/*
 * Whether every table of the file's directory lies inside the file (OpenType, "Table
 * Directory"). HarfBuzz takes a cut table for a short one, and glyphs go missing.
 */
static bool directory_is_whole(hb_blob_t *file)
{
    struct table all = {.blob = file};
    all.data = (const unsigned char *)hb_blob_get_data(file, &all.length);
    bool collection = field_u32(&all, 0) == HB_TAG('t', 't', 'c', 'f');
    unsigned directory = collection ? field_u32(&all, 12) : 0;
    if (directory > all.length)
        return false;
    unsigned count = field_u16(&all, directory + 4);
    for (unsigned i = 0; i < count; i++) {
        unsigned record = directory + 12 + 16 * i;
        uint64_t offset = field_u32(&all, record + 8);
        if (record + 16 > all.length || offset + field_u32(&all, record + 12) > all.length)
            return false;
    }
    return count > 0;
}

/* OS/2 fsType: low four bits 2 = restricted licence; 0x0100 no subsetting; 0x0200 bitmaps only. */
static bool embedding_allowed(hb_face_t *face)
{
    struct table os2 = table_open(face, HB_TAG('O', 'S', '/', '2'));
    unsigned type = field_u16(&os2, 8);
    table_close(&os2);
    return (type & 0x000F) != 0x0002 && (type & 0x0300) == 0;
}

static int thousandths(int units, unsigned units_per_em)
{
    int em = (int)units_per_em;
    int rounding = units < 0 ? -em / 2 : em / 2;
    return (units * 1000 + rounding) / em;
}

static int metric(hb_font_t *font, hb_ot_metrics_tag_t tag, unsigned units_per_em)
{
    hb_position_t value = 0;
    hb_ot_metrics_get_position_with_fallback(font, tag, &value);
    return thousandths(value, units_per_em);
}

static void read_metrics(struct font_metrics *metrics, hb_face_t *face, hb_font_t *font)
{
    unsigned em = hb_face_get_upem(face);
    struct table head = table_open(face, HB_TAG('h', 'e', 'a', 'd'));
    struct table post = table_open(face, HB_TAG('p', 'o', 's', 't'));
    int weight = (int)hb_style_get_value(font, HB_STYLE_TAG_WEIGHT);
    *metrics = (struct font_metrics){
        .ascent = metric(font, HB_OT_METRICS_TAG_HORIZONTAL_ASCENDER, em),
        .descent = metric(font, HB_OT_METRICS_TAG_HORIZONTAL_DESCENDER, em),
        .cap_height = metric(font, HB_OT_METRICS_TAG_CAP_HEIGHT, em),
        .x_height = metric(font, HB_OT_METRICS_TAG_X_HEIGHT, em),
        .left = thousandths(field_s16(&head, 36), em),
        .bottom = thousandths(field_s16(&head, 38), em),
        .right = thousandths(field_s16(&head, 40), em),
        .top = thousandths(field_s16(&head, 42), em),
        /* 88 for regular, 166 for bold; DejaVu's l measures 90 and 175 */
        .stem_v = 50 + weight * weight / (65 * 65),
        .weight = weight,
        .italic_angle_deg = field_s16(&post, 4) + field_u16(&post, 6) / 65536.0,
        .fixed_pitch = field_u32(&post, 12) != 0,
    };
    table_close(&head);
    table_close(&post);
}

/* HarfBuzz is asked once for all glyphs: 35 instructions each instead of 130. */
static void read_advances(struct font_face *face, hb_font_t *font, unsigned units_per_em)
{
    hb_codepoint_t *glyphs = memory_get(face->glyph_count * sizeof *glyphs);
    hb_position_t *positions = memory_get(face->glyph_count * sizeof *positions);
    for (unsigned glyph = 0; glyph < face->glyph_count; glyph++)
        glyphs[glyph] = glyph;
    hb_font_get_glyph_h_advances(font, face->glyph_count, glyphs, sizeof *glyphs, positions,
                                 sizeof *positions);

    face->advances = memory_get(face->glyph_count * sizeof *face->advances);
    for (unsigned glyph = 0; glyph < face->glyph_count; glyph++) {
        int advance = thousandths(positions[glyph], units_per_em);
        face->advances[glyph] = (uint16_t)(advance < 0 ? 0 : advance > 65535 ? 65535 : advance);
    }
    free(glyphs);
    free(positions);
}

static void add_character(struct font_face *face, hb_codepoint_t code_point, hb_codepoint_t glyph)
{
    if (code_point >= PAGE_COUNT * 256 || glyph >= face->glyph_count)
        return;
    uint16_t **page = &face->pages[code_point >> 8];
    if (!*page)
        *page = memory_get_cleared(256, sizeof **page);
    (*page)[code_point & 255] = (uint16_t)glyph;
}

static void read_characters(struct font_face *face, hb_face_t *source, hb_font_t *font)
{
    hb_set_t *set = hb_set_create();
    hb_face_collect_unicodes(source, set);
    unsigned count = hb_set_get_population(set);
    hb_codepoint_t *code_points = memory_get(count * sizeof *code_points);
    hb_codepoint_t *glyphs = memory_get(count * sizeof *glyphs);
    count = hb_set_next_many(set, HB_SET_VALUE_INVALID, code_points, count);
    for (unsigned done = 0; done < count; done++) { /* one without a glyph ends a call */
        unsigned got = hb_font_get_nominal_glyphs(font, count - done, code_points + done,
                                                  sizeof *code_points, glyphs, sizeof *glyphs);
        for (unsigned i = 0; i < got; i++)
            add_character(face, code_points[done + i], glyphs[i]);
        done += got;
    }
    free(code_points);
    free(glyphs);
    hb_set_destroy(set);
}

/*
 * A face with the outline tables alone. hb-subset walks the whole cmap and the
 * layout tables of what it is given, even when told to drop them: 5.1 M
 * instructions a subset with DejaVu Sans, 0.3 M with this face.
 */
static hb_face_t *open_outlines(hb_face_t *source)
{
    static const hb_tag_t tags[] = {HB_TAG('g', 'l', 'y', 'f'), HB_TAG('l', 'o', 'c', 'a'),
                                    HB_TAG('h', 'e', 'a', 'd'), HB_TAG('h', 'h', 'e', 'a'),
                                    HB_TAG('h', 'm', 't', 'x'), HB_TAG('m', 'a', 'x', 'p')};
    hb_face_t *outlines = hb_face_builder_create();
    for (size_t i = 0; i < sizeof tags / sizeof tags[0]; i++) {
        hb_blob_t *table = hb_face_reference_table(source, tags[i]);
        bool empty = hb_blob_get_length(table) == 0;
        bool added = !empty && hb_face_builder_add_table(outlines, tags[i], table);
        hb_blob_destroy(table);
        if (!added) {
            hb_face_destroy(outlines);
            return NULL;
        }
    }
    return outlines;
}

static enum font_status read_face(hb_face_t *source, struct font_face *face)
{
    unsigned glyph_count = hb_face_get_glyph_count(source);
    if (glyph_count == 0 || glyph_count > 65535)
        return FONT_NOT_TRUETYPE;
    if (!embedding_allowed(source))
        return FONT_NOT_EMBEDDABLE;
    face->outlines = open_outlines(source);
    if (!face->outlines)
        return FONT_NOT_TRUETYPE;
    face->glyph_count = glyph_count;

    unsigned name_size = sizeof face->name;
    hb_ot_name_get_utf8(source, HB_OT_NAME_ID_POSTSCRIPT_NAME, HB_LANGUAGE_INVALID, &name_size,
                        face->name);
    hb_font_t *font = hb_font_create(source);
    read_metrics(&face->metrics, source, font);
    read_advances(face, font, hb_face_get_upem(source));
    read_characters(face, source, font);
    hb_font_destroy(font);

    /* Subset once now: HarfBuzz loads tables at first use, and threads should find them loaded. */
    struct buffer trial = {0};
    uint16_t glyph = 0;
    enum font_status status = font_face_subset(face, &glyph, 1, &trial, &glyph);
    buffer_release(&trial);
    return face->name[0] ? status : FONT_NOT_TRUETYPE;
}

/*
 * HarfBuzz 6.0.0 does not survive every allocation that fails: let memory end here, in our hands,
 * where less is left than it takes for a face. Never touched, and too large for malloc's own
 * store, so that it costs two calls of the system.
 */
static void make_sure_of_room(void)
{
    enum { ROOM_BYTES = 33 << 20 };
    free(memory_get(ROOM_BYTES));
}

enum font_status font_face_open(const char *path, struct font_face **face)
{
    make_sure_of_room();
    hb_blob_t *blob = hb_blob_create_from_file_or_fail(path);
    if (!blob)
        return FONT_NOT_READABLE;
    if (!directory_is_whole(blob)) {
        hb_blob_destroy(blob);
        return FONT_NOT_TRUETYPE;
    }
    hb_face_t *source = hb_face_create(blob, 0);
    struct font_face *opened = memory_get_cleared(1, sizeof *opened);
    enum font_status status = read_face(source, opened);
    hb_face_destroy(source);
    hb_blob_destroy(blob);
    if (status == FONT_OK)
        *face = opened;
    else
        font_face_close(opened);
    return status;
}

void font_face_close(struct font_face *face)
{
    if (!face)
        return;
    for (size_t i = 0; i < PAGE_COUNT; i++)
        free(face->pages[i]);
    free(face->advances);
    hb_face_destroy(face->outlines);
    free(face);
}

const char *font_face_name(const struct font_face *face)
{
    return face->name;
}

const struct font_metrics *font_face_metrics(const struct font_face *face)
{
    return &face->metrics;
}

uint16_t font_face_glyph(const struct font_face *face, uint32_t code_point)
{
    if (code_point >= PAGE_COUNT * 256)
        return 0;
    const uint16_t *page = face->pages[code_point >> 8];
    return page ? page[code_point & 255] : 0;
}

uint16_t font_face_advance(const struct font_face *face, uint16_t glyph)
{
    return glyph < face->glyph_count ? face->advances[glyph] : 0;
}

static hb_subset_input_t *subset_input(const uint16_t *glyphs, size_t count)
{
    hb_subset_input_t *input = hb_subset_input_create_or_fail();
    if (!input)
        return NULL;
    hb_subset_input_set_flags(input, HB_SUBSET_FLAGS_NO_HINTING | HB_SUBSET_FLAGS_NOTDEF_OUTLINE);
    hb_set_t *wanted = hb_subset_input_glyph_set(input);
    for (size_t i = 0; i < count; i++)
        hb_set_add(wanted, glyphs[i]);
    return input;
}

/* HarfBuzz goes on without what it found no memory for: look whether all is there. */
static bool subset_is_whole(hb_blob_t *file, unsigned glyph_count)
{
    static const hb_tag_t tags[] = {HB_TAG('g', 'l', 'y', 'f'), HB_TAG('l', 'o', 'c', 'a'),
                                    HB_TAG('h', 'e', 'a', 'd'), HB_TAG('h', 'h', 'e', 'a'),
                                    HB_TAG('h', 'm', 't', 'x'), HB_TAG('m', 'a', 'x', 'p')};
    hb_face_t *face = hb_face_create(file, 0);
    bool whole = hb_face_get_glyph_count(face) == glyph_count;
    for (size_t i = 0; i < sizeof tags / sizeof tags[0] && whole; i++) {
        struct table table = table_open(face, tags[i]);
        whole = table.length > 0;
        table_close(&table);
    }
    hb_face_destroy(face);
    return whole;
}

enum font_status font_face_subset(const struct font_face *face, const uint16_t *glyphs,
                                  size_t count, struct buffer *program, uint16_t *subset_glyphs)
{
    make_sure_of_room();
    hb_subset_input_t *input = subset_input(glyphs, count);
    hb_subset_plan_t *plan = input ? hb_subset_plan_create_or_fail(face->outlines, input) : NULL;
    hb_face_t *subset = plan ? hb_subset_plan_execute_or_fail(plan) : NULL;
    enum font_status status = FONT_SUBSET_FAILED;
    if (subset) {
        hb_blob_t *file = hb_face_reference_blob(subset);
        unsigned length;
        const char *data = hb_blob_get_data(file, &length);
        const hb_map_t *renumbered = hb_subset_plan_old_to_new_glyph_mapping(plan);
        bool all = length > 0 && subset_is_whole(file, hb_map_get_population(renumbered));
        for (size_t i = 0; i < count && all; i++) {
            subset_glyphs[i] = (uint16_t)hb_map_get(renumbered, glyphs[i]);
            all = hb_map_has(renumbered, glyphs[i]);
        }
        if (all) {
            buffer_append(program, data, length);
            status = FONT_OK;
        }
        hb_blob_destroy(file);
    }
    hb_face_destroy(subset);
    if (plan)
        hb_subset_plan_destroy(plan);
    if (input)
        hb_subset_input_destroy(input);
    return status;
}
