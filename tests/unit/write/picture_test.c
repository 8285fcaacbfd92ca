/*
 * Pictures and fonts, whole and damaged. A damaged file must be answered with a status: no crash,
 * no hang, no leak (run under the sanitizers as well).
 */
#include "kit.h"
#include "pdf_kit.h"

#include "base/arena.h"
#include "base/file.h"
#include "write/font_charset.h"

#include <turbojpeg.h>
#include <unistd.h>

enum { CUTS = 60, FLIPS = 200 };

static char *folder;

static struct buffer contents_of(const char *path)
{
    struct buffer file = {0};
    if (file_read(path, 1u << 24, &file) != FILE_OK) {
        fprintf(stderr, "cannot read %s\n", path);
        exit(1);
    }
    return file;
}

static enum picture_status decode(const struct buffer *file, unsigned longest_side,
                                  struct picture *picture)
{
    const struct picture_limits limits = {longest_side, 4000000, 80};
    return picture_decode((const unsigned char *)file->data, file->length, &limits, picture);
}

static void test_kinds(void **state)
{
    (void)state;
    static const struct {
        const char *file;
        enum picture_status status;
        enum picture_kind kind;
        unsigned components;
    } rows[] = {
        {"base.jpg", PICTURE_OK, PICTURE_JPEG, 3},
        {"prog.jpg", PICTURE_OK, PICTURE_JPEG, 3},
        {"gray.jpg", PICTURE_OK, PICTURE_JPEG, 1},
        {"exif6.jpg", PICTURE_OK, PICTURE_JPEG, 3},
        {"cmyk.jpg", PICTURE_UNSUPPORTED, PICTURE_JPEG, 0},
        {"trunc2.jpg", PICTURE_DAMAGED, PICTURE_JPEG, 0},
        {"rgb.png", PICTURE_OK, PICTURE_PIXELS, 3},
        {"rgba16.png", PICTURE_OK, PICTURE_PIXELS, 3},
        {"adam7.png", PICTURE_OK, PICTURE_PIXELS, 3},
        {"pal.png", PICTURE_OK, PICTURE_PIXELS, 3},
        {"gray.png", PICTURE_OK, PICTURE_PIXELS, 1},
        {"corrupt.png", PICTURE_DAMAGED, PICTURE_PIXELS, 0},
    };
    struct arena arena = {0};
    for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
        struct buffer file = contents_of(arena_print(&arena, "tests/pdf/images/%s", rows[i].file));
        struct picture picture = {0};
        assert_int_equal(decode(&file, 1600, &picture), rows[i].status);
        if (rows[i].status == PICTURE_OK) {
            assert_int_equal(picture.kind, rows[i].kind);
            assert_int_equal(picture.components, rows[i].components);
            assert_null(memmem(picture.data.data, picture.data.length, "Exif", 4));
            picture_release(&picture);
        }
        buffer_release(&file);
    }
    struct buffer text = {0};
    struct picture picture;
    buffer_text(&text, "this is no picture, whatever its name says");
    assert_int_equal(decode(&text, 1600, &picture), PICTURE_UNKNOWN);
    buffer_clear(&text);
    assert_int_equal(decode(&text, 1600, &picture), PICTURE_UNKNOWN);
    buffer_release(&text);
    arena_release(&arena);
}

static void test_scaling_keeps_the_ratio(void **state)
{
    (void)state;
    static const char *const files[] = {"tests/pdf/images/base.jpg", "tests/pdf/images/rgb.png"};
    for (size_t i = 0; i < 2; i++) {
        struct buffer file = contents_of(files[i]);
        struct picture whole = {0}, small = {0};
        assert_int_equal(decode(&file, 1600, &whole), PICTURE_OK);
        assert_int_equal(decode(&file, 100, &small), PICTURE_OK);
        assert_int_equal(small.width_px > small.height_px ? small.width_px : small.height_px, 100);
        assert_close((double)small.width_px / small.height_px,
                     (double)whole.width_px / whole.height_px, 0.02);
        picture_release(&whole);
        picture_release(&small);
        buffer_release(&file);
    }
}

/* ---- EXIF orientations: a picture that is dark in its upper left corner only */

enum { WIDTH = 96, HEIGHT = 64 };

/* Where the upright picture's pixel (x, y) is stored (EXIF 2.3, tag 0x0112, as JEITA draws it). */
static size_t stored_index(unsigned orientation, size_t x, size_t y)
{
    size_t last_x = WIDTH - 1, last_y = HEIGHT - 1;
    switch (orientation) {
    case 2:
        return y * WIDTH + (last_x - x);
    case 3:
        return (last_y - y) * WIDTH + (last_x - x);
    case 4:
        return (last_y - y) * WIDTH + x;
    case 5:
        return x * HEIGHT + y;
    case 6:
        return (last_x - x) * HEIGHT + y;
    case 7:
        return (last_x - x) * HEIGHT + (last_y - y);
    case 8:
        return x * HEIGHT + (last_y - y);
    default:
        return y * WIDTH + x;
    }
}

/* JPEG of the stored picture with an APP1 segment that says how it is to be shown. */
static struct buffer oriented_jpeg(unsigned orientation, bool little_endian)
{
    unsigned char pixels[WIDTH * HEIGHT];
    for (size_t y = 0; y < HEIGHT; y++)
        for (size_t x = 0; x < WIDTH; x++)
            pixels[stored_index(orientation, x, y)] = x < 32 && y < 16 ? 20 : 230;
    bool turned = orientation >= 5;
    unsigned char *jpeg = NULL;
    unsigned long length = 0;
    tjhandle handle = tjInitCompress();
    tjCompress2(handle, pixels, turned ? HEIGHT : WIDTH, 0, turned ? WIDTH : HEIGHT, TJPF_GRAY,
                &jpeg, &length, TJSAMP_GRAY, 95, 0);
    tjDestroy(handle);
    char order = little_endian ? 'I' : 'M';
    const char high[] = {0, (char)orientation}, low[] = {(char)orientation, 0};
    struct buffer file = {0};
    buffer_append(&file, jpeg, 2);
    buffer_append(&file,
                  "\xFF\xE1\x00\x22"
                  "Exif\0\0",
                  10);
    buffer_byte(&file, order);
    buffer_byte(&file, order);
    if (little_endian)
        buffer_append(&file, "\x2A\0\x08\0\0\0\x01\0\x12\x01\x03\0\x01\0\0\0", 16);
    else
        buffer_append(&file, "\0\x2A\0\0\0\x08\0\x01\x01\x12\0\x03\0\0\0\x01", 16);
    buffer_append(&file, little_endian ? low : high, 2);
    buffer_append(&file, "\0\0\0\0\0\0", 6);
    buffer_append(&file, jpeg + 2, length - 2);
    tjFree(jpeg);
    return file;
}

static void assert_upright(const struct picture *picture)
{
    unsigned char pixels[WIDTH * HEIGHT];
    tjhandle handle = tjInitDecompress();
    assert_int_equal(tjDecompress2(handle, (const unsigned char *)picture->data.data,
                                   picture->data.length, pixels, (int)picture->width_px, 0,
                                   (int)picture->height_px, TJPF_GRAY, 0),
                     0);
    tjDestroy(handle);
    size_t width = picture->width_px, height = picture->height_px;
    assert_true(pixels[height / 16 * width + width / 16] < 90);
    assert_true(pixels[height / 16 * width + width - 4] > 180);
    assert_true(pixels[(height - 4) * width + width / 16] > 180);
    assert_true(pixels[(height - 4) * width + width - 4] > 180);
}

static void test_orientations(void **state)
{
    (void)state;
    for (unsigned orientation = 1; orientation <= 8; orientation++) {
        for (unsigned way = 0; way < 4; way++) {
            struct buffer file = oriented_jpeg(orientation, way % 2 == 0);
            struct picture picture = {0};
            /* without loss, and scaled down */
            assert_int_equal(decode(&file, way < 2 ? 1600 : 48, &picture), PICTURE_OK);
            assert_int_equal(picture.width_px, way < 2 ? WIDTH : 48);
            assert_int_equal(picture.height_px, way < 2 ? HEIGHT : 32);
            assert_upright(&picture);
            picture_release(&picture);
            buffer_release(&file);
        }
    }
}

/* ---- damage */

/* Knuth's 64-bit linear congruential generator: the same places in every run. */
static size_t next_place(uint64_t *state, size_t limit)
{
    *state = *state * 6364136223846793005u + 1442695040888963407u;
    return (size_t)(*state >> 33) % limit;
}

static bool read_picture(const struct buffer *file)
{
    struct picture picture;
    bool good = decode(file, 120, &picture) == PICTURE_OK;
    if (good)
        picture_release(&picture);
    return good;
}

static bool read_font(const struct buffer *file)
{
    char path[] = "/tmp/picture_test_XXXXXX";
    int descriptor = mkstemp(path);
    assert_true(descriptor >= 0);
    assert_int_equal(write(descriptor, file->data, file->length), file->length);
    close(descriptor);
    struct font_face *face;
    bool good = font_face_open(path, &face) == FONT_OK;
    if (good) {
        struct font_charset *set = font_charset_create(face);
        for (uint32_t code_point = 0x20; code_point < 0x400; code_point++)
            font_charset_add(set, code_point);
        struct deflater deflater = deflater_open(1);
        font_charset_seal(set, &deflater);
        deflater_close(&deflater);
        font_charset_destroy(set);
        font_face_close(face);
    }
    unlink(path);
    return good;
}

/* How many of CUTS cut copies are taken for whole; flipped bits only must not do harm. */
static unsigned damage(const char *path, bool (*read)(const struct buffer *))
{
    struct buffer good = contents_of(path), bad = {0};
    unsigned taken = 0;
    uint64_t state = 1;
    for (int i = 0; i < CUTS; i++) {
        buffer_clear(&bad);
        buffer_append(&bad, good.data, next_place(&state, good.length - 64));
        taken += read(&bad);
    }
    for (int i = 0; i < FLIPS; i++) {
        buffer_clear(&bad);
        buffer_append(&bad, good.data, good.length);
        size_t reach = i % 2 || good.length < 600 ? good.length : 600;
        bad.data[next_place(&state, reach)] ^= (char)(1 << next_place(&state, 8));
        read(&bad);
    }
    buffer_release(&bad);
    buffer_release(&good);
    return taken;
}

static void test_damaged_pictures(void **state)
{
    (void)state;
    static const char *const files[] = {"base.jpg",  "prog.jpg",  "exif6.jpg", "gray.jpg",
                                        "cmyk.jpg",  "rgb.png",   "pal.png",   "gray.png",
                                        "adam7.png", "rgba16.png"};
    struct arena arena = {0};
    for (size_t i = 0; i < sizeof files / sizeof files[0]; i++)
        assert_int_equal(damage(arena_print(&arena, "tests/pdf/images/%s", files[i]), read_picture),
                         0);
    arena_release(&arena);
}

static void test_damaged_fonts(void **state)
{
    (void)state;
    struct arena arena = {0};
    assert_int_equal(damage(arena_print(&arena, "%s/OpenSans-Regular.ttf", folder), read_font), 0);
    assert_int_equal(damage(arena_print(&arena, "%s/DejaVuSansMono.ttf", folder), read_font), 0);
    arena_release(&arena);
}

int main(int argc, char **argv)
{
    (void)argc;
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_kinds),         cmocka_unit_test(test_scaling_keeps_the_ratio),
        cmocka_unit_test(test_orientations),  cmocka_unit_test(test_damaged_pictures),
        cmocka_unit_test(test_damaged_fonts),
    };
    folder = pdf_fonts_folder(argv[0]);
    int failed = cmocka_run_group_tests(tests, NULL, NULL);
    free(folder);
    return failed;
}
