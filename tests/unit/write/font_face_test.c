/*
 * Subsets against the fonts they come from, outline by outline, as HarfBuzz draws both; and the
 * numbers of characters.
 */
#include "kit.h"
#include "pdf_kit.h"

#include "base/arena.h"
#include "base/file.h"
#include "write/font_charset.h"

#include <hb.h>

enum { AT_A_TIME = 10 };

static char *folder;

static const char *const faces[] = {"OpenSans-Regular", "OpenSans-Semibold", "DejaVuSansMono",
                                    "DejaVuSansCondensed-Bold"};

static char *path_of(struct arena *arena, const char *name)
{
    return arena_print(arena, "%s/%s.ttf", folder, name);
}

/* FNV-1a over the drawing operations of one outline. */
static void mix(void *outline, unsigned operation, float x, float y)
{
    uint64_t *hash = outline;
    *hash = (*hash ^ operation) * 0x100000001B3u;
    *hash = (*hash ^ (uint64_t)(int64_t)(x * 64)) * 0x100000001B3u;
    *hash = (*hash ^ (uint64_t)(int64_t)(y * 64)) * 0x100000001B3u;
}

static void move_to(hb_draw_funcs_t *funcs, void *outline, hb_draw_state_t *state, float x, float y,
                    void *user_data)
{
    (void)funcs, (void)state, (void)user_data;
    mix(outline, 1, x, y);
}

static void line_to(hb_draw_funcs_t *funcs, void *outline, hb_draw_state_t *state, float x, float y,
                    void *user_data)
{
    (void)funcs, (void)state, (void)user_data;
    mix(outline, 2, x, y);
}

static void quadratic_to(hb_draw_funcs_t *funcs, void *outline, hb_draw_state_t *state,
                         float control_x, float control_y, float x, float y, void *user_data)
{
    (void)funcs, (void)state, (void)user_data;
    mix(outline, 3, control_x, control_y);
    mix(outline, 4, x, y);
}

static hb_draw_funcs_t *hashing_funcs(void)
{
    hb_draw_funcs_t *funcs = hb_draw_funcs_create();
    hb_draw_funcs_set_move_to_func(funcs, move_to, NULL, NULL);
    hb_draw_funcs_set_line_to_func(funcs, line_to, NULL, NULL);
    hb_draw_funcs_set_quadratic_to_func(funcs, quadratic_to, NULL, NULL);
    return funcs;
}

static uint64_t outline_of(hb_font_t *font, hb_draw_funcs_t *funcs, hb_codepoint_t glyph)
{
    uint64_t hash = 0xCBF29CE484222325u;
    hb_font_get_glyph_shape(font, glyph, funcs, &hash);
    return hash;
}

static hb_font_t *font_of(const struct buffer *file)
{
    hb_blob_t *blob =
        hb_blob_create(file->data, (unsigned)file->length, HB_MEMORY_MODE_READONLY, NULL, NULL);
    hb_face_t *face = hb_face_create(blob, 0);
    hb_font_t *font = hb_font_create(face);
    hb_face_destroy(face);
    hb_blob_destroy(blob);
    return font;
}

/* A face with its original, as HarfBuzz opens the whole file. */
struct pair {
    struct font_face *face;
    struct buffer file;
    hb_font_t *original;
    hb_draw_funcs_t *funcs;
    unsigned characters, different;
};

static void compare(struct pair *pair, const uint16_t *glyphs, size_t count)
{
    struct buffer program = {0};
    uint16_t subset_glyphs[AT_A_TIME];
    assert_int_equal(font_face_subset(pair->face, glyphs, count, &program, subset_glyphs), FONT_OK);
    hb_font_t *subset = font_of(&program);
    for (size_t i = 0; i < count; i++)
        pair->different += outline_of(pair->original, pair->funcs, glyphs[i]) !=
                           outline_of(subset, pair->funcs, subset_glyphs[i]);
    hb_font_destroy(subset);
    buffer_release(&program);
}

static void compare_all(struct pair *pair)
{
    uint16_t glyphs[AT_A_TIME];
    size_t count = 0;
    for (uint32_t code_point = 0; code_point < 0x30000; code_point++) {
        uint16_t glyph = font_face_glyph(pair->face, code_point);
        if (glyph == 0)
            continue;
        pair->characters++;
        glyphs[count++] = glyph;
        if (count == AT_A_TIME) {
            compare(pair, glyphs, count);
            count = 0;
        }
    }
    if (count > 0)
        compare(pair, glyphs, count);
}

static void test_outlines_survive(void **state)
{
    (void)state;
    struct arena arena = {0};
    for (size_t i = 0; i < sizeof faces / sizeof faces[0]; i++) {
        const char *path = path_of(&arena, faces[i]);
        struct pair pair = {.funcs = hashing_funcs()};
        assert_int_equal(font_face_open(path, &pair.face), FONT_OK);
        assert_int_equal(file_read(path, 1u << 24, &pair.file), FILE_OK);
        pair.original = font_of(&pair.file);
        /* the comparison sees differences */
        assert_int_not_equal(
            outline_of(pair.original, pair.funcs, font_face_glyph(pair.face, 'A')),
            outline_of(pair.original, pair.funcs, font_face_glyph(pair.face, 'B')));
        compare_all(&pair);
        assert_true(pair.characters > 800);
        assert_int_equal(pair.different, 0);
        hb_font_destroy(pair.original);
        hb_draw_funcs_destroy(pair.funcs);
        buffer_release(&pair.file);
        font_face_close(pair.face);
    }
    arena_release(&arena);
}

/* Of the font itself: units per em and advances as HarfBuzz reads them from hmtx. */
static void test_advances(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct font_face *face;
    struct buffer file = {0};
    const char *path = path_of(&arena, "OpenSans-Regular");
    assert_int_equal(font_face_open(path, &face), FONT_OK);
    assert_int_equal(file_read(path, 1u << 24, &file), FILE_OK);
    hb_font_t *font = font_of(&file);
    double em = hb_face_get_upem(hb_font_get_face(font));
    for (uint32_t code_point = 0x20; code_point < 0x17F; code_point++) {
        uint16_t glyph = font_face_glyph(face, code_point);
        if (glyph != 0)
            assert_close(font_face_advance(face, glyph),
                         hb_font_get_glyph_h_advance(font, glyph) * 1000 / em, 0.5);
    }
    /* tabular figures, and signs as wide as they are: what tables rely on */
    uint16_t zero = font_face_advance(face, font_face_glyph(face, '0'));
    for (uint32_t digit = '1'; digit <= '9'; digit++)
        assert_int_equal(font_face_advance(face, font_face_glyph(face, digit)), zero);
    assert_int_equal(font_face_advance(face, font_face_glyph(face, 0x2212)), zero);
    hb_font_destroy(font);
    buffer_release(&file);
    font_face_close(face);
    arena_release(&arena);
}

static void test_characters_have_numbers_of_their_own(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct font_face *face;
    assert_int_equal(font_face_open(path_of(&arena, "OpenSans-Regular"), &face), FONT_OK);
    struct font_charset *set = font_charset_create(face);
    uint16_t ohm = font_charset_add(set, 0x2126), omega = font_charset_add(set, 0x3A9);
    assert_true(ohm != 0 && omega != 0 && ohm != omega);
    assert_int_equal(font_charset_add(set, 0x2126), ohm);
    assert_int_equal(font_charset_add(set, 0x65E5), 0);
    struct deflater deflater = deflater_open(1);
    assert_int_equal(font_charset_seal(set, &deflater), FONT_OK);
    deflater_close(&deflater);
    assert_int_equal(font_charset_add(set, 'A'), 0); /* sealed */
    font_charset_destroy(set);
    font_face_close(face);
    arena_release(&arena);
}

int main(int argc, char **argv)
{
    (void)argc;
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_outlines_survive),
        cmocka_unit_test(test_advances),
        cmocka_unit_test(test_characters_have_numbers_of_their_own),
    };
    folder = pdf_fonts_folder(argv[0]);
    int failed = cmocka_run_group_tests(tests, NULL, NULL);
    free(folder);
    return failed;
}
