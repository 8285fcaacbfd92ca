/*
 * PDFs of whole documents. Without an argument: checks that need no other program. With a folder:
 * writes the documents there for tests/pdf/run.sh, which looks at them with other programs.
 */
#include "kit.h"
#include "pdf_kit.h"
#include "sample_document.h"

#include "base/file.h"

#include <pthread.h>

static struct pdf_resources *resources;

struct made {
    struct arena arena;
    struct diagnostics diagnostics;
    struct buffer file;
    bool good;
};

static void made_release(struct made *made)
{
    buffer_release(&made->file);
    arena_release(&made->arena);
}

static struct made make(const struct document *document)
{
    struct made made = {0};
    made.diagnostics = (struct diagnostics){.arena = document->arena};
    made.good = pdf_write(document, resources, 1, &made.file, &made.diagnostics);
    return made;
}

static bool holds(const struct buffer *file, const char *text)
{
    return memmem(file->data, file->length, text, strlen(text)) != NULL;
}

/* ---- documents */

static struct document *letter_document(struct arena *arena)
{
    struct document *document = sample_document(arena, 1);
    document->page = PAGE_LETTER;
    document->fingerprint = NULL;
    document->date.set = false;
    return document;
}

static struct document *empty_document(struct arena *arena, enum document_kind kind)
{
    struct document *document = sample_empty(arena, kind);
    document->title = "Title";
    document->running_head = "Bench sheet 2031-022";
    return document;
}

/* A bench sheet as the shop would print it: all 22 parts on one page. */
static struct document *sheet_document(struct arena *arena)
{
    struct document *document = empty_document(arena, DOCUMENT_SHEET);
    sample_append(document, EXHIBIT_TITLE, "title", NULL)->title =
        (struct title_block){.shop_name = "Marsh & Tolley",
                             .shop_trade = "Care and repair of valve radios",
                             .shop_address = "3 Ropewalk Yard, Netherby",
                             .shop_contact = "bench@marsh-tolley.example",
                             .title = "Bench sheet 2031-022",
                             .subtitle = "Ashdene Plover 54, chassis P54/2, serial 20817. Fixed "
                                         "before measuring; the limits allow for a chassis at "
                                         "45 °C."};
    sample_bench(document);
    struct table *table =
        &((struct exhibit *)cmark_node_get_user_data(cmark_node_last_child(document->root)))->table;
    struct column *columns = arena_array(arena, 10, sizeof *columns);
    memcpy(columns, table->columns, 10 * sizeof *columns);
    sample_table_of(document, table, columns, 10, SAMPLE_COUNT(sample_parts));
    table->row_count = SAMPLE_COUNT(sample_parts);
    for (size_t i = 0; i < table->row_count; i++) {
        const struct sample_part *part = &sample_parts[i];
        struct cell *cells = table->rows[i].cells;
        cells[0].text = part->ref;
        cells[1] = (struct cell){.text = part->place, .second = part->lift};
        cells[2].figures = sample_figures("", part->whole, part->fraction, part->unit);
        cells[2].second_figures = sample_figures("", part->volts, "", "V");
        if (part->set) {
            cells[3].figures = sample_figures("", part->set, "", "V");
            cells[4].figures = sample_figures("", part->soak, "", part->soak_unit);
            cells[5].figures = sample_figures("", part->limit_whole, part->limit_fraction, "");
        } else {
            cells[3].text = "no reading passes: fit class X2";
        }
    }
    sample_append(document, EXHIBIT_PAGE_BREAK, "break", NULL);
    sample_prose(document, "## Reforming C21\n\nLimiter 68 kΩ 4 W or more. Ceiling 5 mA.\n");
    return document;
}

/* What people and machines can put into a text field. */
static struct document *awkward_document(struct arena *arena)
{
    struct document *document = empty_document(arena, DOCUMENT_RECORD);
    char *endless = arena_get(arena, 9001);
    memset(endless, 'x', 9000);
    char *subject = arena_get(arena, 70001);
    memset(subject, 's', 70000);
    char *name = arena_get(arena, 3001);
    for (size_t i = 0; i < 3000; i++)
        name[i] = i % 9 == 8 ? ' ' : 'N';
    document->title = "  (un\\balanced( <b>&amp;</b> \t\x01\xC2\x85\xEF\xBF\xBE\xFF \U0001F600  ";
    document->author = "";
    document->subject = subject;
    document->running_head = arena_print(arena, "Record %s", endless);
    document->accent = "red";
    sample_append(document, EXHIBIT_TITLE, "title", NULL)->title =
        (struct title_block){.shop_name = endless, .title = name, .subtitle = endless};
    struct fact *facts = arena_array(arena, 2, sizeof *facts);
    facts[0] = (struct fact){"Owner", name};
    facts[1] = (struct fact){endless, "(\\) <>&\" brackets \\( \r\n\t and\x07 controls \x80\xC3("};
    sample_append(document, EXHIBIT_FACTS, "facts", NULL)->facts =
        (struct facts){facts, facts + 1, 1, 1};
    sample_prose(document,
                 "## Heading with \U0001F4FB and 日本 and \xFF\n\n"
                 "Łódź Ψυχή naïve; Ohm sign \u2126 and Omega \u03A9, micro \u00B5 and mu \u03BC; "
                 "Nested composites: š Ё Ά ǖ Ấ ṩ; **bold š Ё Ά** *italic š* `mono š Ё`; "
                 "arrows ← ↑ → ↓; שלום مرحبا \u202Eabc\u202C; soft\u00ADhyphen.\n\n"
                 "![a picture](x.png) <b>raw</b> [bad](javascript:alert(1)) "
                 "[good](https://example.org/a%20b?q=Łódź) <mailto:bench@shop.example>\n\n"
                 "```\ncode  with   spaces\n\n(\\)\n```\n\n---\n\n"
                 "> quoted\n>\n> - in it a list\n>   1. deeper\n>      - deepest\n\n"
                 "10. ten\n11. eleven\n12.\n\n");
    sample_prose(document, arena_print(arena, "%s %s\n", endless, endless));
    char *deep = arena_get(arena, 6001);
    for (size_t i = 0; i < 3000; i++)
        memcpy(deep + 2 * i, "> ", 2);
    sample_prose(document, arena_print(arena, "%sdeep\n", deep));
    struct table *table = &sample_append(document, EXHIBIT_TABLE, "t", "Table 1")->table;
    static const struct column columns[] = {{"Ref", NULL, NULL, COLUMN_REF, 0, 1},
                                            {"Number", "µA", NULL, COLUMN_NUMBER, 0, 1},
                                            {"Text", NULL, NULL, COLUMN_TEXT, 0, 1},
                                            {"", NULL, NULL, COLUMN_OUTCOME, 0, 1}};
    sample_table_of(document, table, columns, 4, 4);
    table->row_count = 4;
    table->caption = endless;
    table->rows[0].group = true;
    table->rows[0].cells[0].text = endless;
    for (size_t i = 1; i < 4; i++) {
        table->rows[i].cells[0].text = i == 1 ? "C1" : endless;
        table->rows[i].cells[1].figures =
            sample_figures(i == 2 ? "<" : "", "123 456 789 012 345 678", ".000 001", "MΩ");
        table->rows[i].cells[2].text = i == 2 ? name : "";
        table->rows[i].cells[3] = (struct cell){
            .text = i == 3 ? name : "", .mark = MARK_CONDITIONAL_PASS, .second = "because"};
    }
    return document;
}

/* Pictures of all kinds that can be opened. */
static struct document *pictures_document(struct arena *arena, struct picture *pictures)
{
    static const char *const files[] = {"base.jpg", "prog.jpg",   "gray.jpg",  "exif6.jpg",
                                        "rgb.png",  "rgba16.png", "adam7.png", "pal.png"};
    struct document *document = empty_document(arena, DOCUMENT_RECORD);
    for (size_t i = 0; i < 8; i++)
        pictures[i] = pdf_picture(arena_print(arena, "tests/pdf/images/%s", files[i]));
    struct plate_picture *logo = arena_get(arena, sizeof *logo);
    *logo = (struct plate_picture){.file = "logo.png",
                                   .width_px = pictures[7].width_px,
                                   .height_px = pictures[7].height_px,
                                   .picture = &pictures[7]};
    sample_append(document, EXHIBIT_TITLE, "title", NULL)->title = (struct title_block){
        .shop_name = "Marsh & Tolley", .shop_trade = "Radios", .title = "Pictures", .logo = logo};
    for (size_t i = 0; i + 1 < 8; i += 2) {
        struct plate *plate = &sample_append(document, EXHIBIT_PLATE, "p", "Plate 1")->plate;
        plate->picture_count = i == 6 ? 1 : 2;
        plate->caption = "Underside of the chassis.";
        for (size_t side = 0; side < plate->picture_count; side++)
            plate->pictures[side] =
                (struct plate_picture){.file = files[i + side],
                                       .when = side ? "After." : "Before.",
                                       .text = files[i + side],
                                       .width_px = pictures[i + side].width_px,
                                       .height_px = pictures[i + side].height_px,
                                       .picture = &pictures[i + side]};
    }
    return document;
}

/* Two short sections beside each other, two that are too unequal, and prose in columns over pages.
 */
static struct document *beside_document(struct arena *arena)
{
    struct document *document = empty_document(arena, DOCUMENT_RECORD);
    document->sections_numbered = true;
    sample_append(document, EXHIBIT_SIDE_BY_SIDE, "b1", NULL);
    sample_prose(document, "## Leftmost\n\nAs it came.\n\nAs it was asked for.\n\n"
                           "## Rightmost\n\n1. first\n2. second\n\n");
    sample_append(document, EXHIBIT_SIDE_BY_SIDE, "b2", NULL);
    sample_prose(document, "## Longer\n\n");
    for (unsigned i = 0; i < 12; i++)
        sample_prose(document, "A paragraph among many.\n");
    sample_prose(document, "## Shorter\n\nOne line.\n\n## Columns\n");
    sample_append(document, EXHIBIT_TWO_COLUMNS, "c", NULL);
    for (unsigned i = 1; i <= 300; i++)
        sample_prose(document, arena_print(arena, "Paragraph %u of all of them.\n", i));
    sample_prose(document, "## Behind\n");
    return document;
}

/* ---- checks */

static void test_same_bytes_twice(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct document *document = sample_document(&arena, 3);
    struct made one = make(document), two = make(document);
    assert_true(one.good && two.good);
    assert_int_equal(one.diagnostics.count, 0);
    assert_int_equal(one.file.length, two.file.length);
    assert_memory_equal(one.file.data, two.file.data, one.file.length);
    made_release(&one);
    made_release(&two);
    sample_document_release(document);
    arena_release(&arena);
}

static void test_identifier_is_the_fingerprint(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct document *document = sample_document(&arena, 1);
    struct made made = make(document);
    /* PDF 1.4, 3.4.4: /ID with two strings, here the fingerprint's first 16 bytes */
    assert_true(holds(&made.file, "<5D41C7E290AB36F817D24E6BC3905FA1>"));
    assert_true(holds(&made.file, "/CreationDate (D:20310520000000+00'00')"));
    made_release(&made);
    sample_document_release(document);

    document = letter_document(&arena);
    made = make(document);
    assert_false(holds(&made.file, "CreationDate"));
    assert_true(holds(&made.file, "/ID"));
    made_release(&made);
    sample_document_release(document);
    arena_release(&arena);
}

static void test_missing_signs_are_told(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct document *document = empty_document(&arena, DOCUMENT_RECORD);
    sample_prose(document, "One \U0001F4FB, two \U0001F4FB, 日, a control \x07 and Ω.\n");
    struct made made = make(document);
    assert_true(made.good);
    assert_int_equal(made.diagnostics.count, 3);
    assert_int_equal(made.diagnostics.warnings, 3);
    assert_int_equal(made.diagnostics.items[0].code, DIAGNOSTIC_SIGN_MISSING);
    assert_non_null(strstr(made.diagnostics.items[0].text, "U+1F4FB"));
    assert_non_null(strstr(made.diagnostics.items[1].text, "U+65E5"));
    assert_non_null(strstr(made.diagnostics.items[2].text, "U+0007"));
    made_release(&made);
    sample_document_release(document);
    arena_release(&arena);
}

static void test_failure_leaves_the_buffer(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct document *document = empty_document(&arena, DOCUMENT_RECORD);
    document->date = (struct date){.set = true, .year = 2031, .month = 2, .day = 30};
    sample_prose(document, "text\n");
    struct diagnostics diagnostics = {.arena = &arena};
    struct buffer file = {0};
    buffer_text(&file, "before");
    assert_false(pdf_write(document, resources, 1, &file, &diagnostics));
    assert_string_equal(buffer_string(&file), "before");
    assert_int_equal(diagnostics.errors, 1);
    assert_int_equal(diagnostics.items[0].code, DIAGNOSTIC_PDF_FAILED);
    buffer_release(&file);
    sample_document_release(document);
    arena_release(&arena);
}

static void test_resources_that_are_missing(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct diagnostics diagnostics = {.arena = &arena};
    assert_null(pdf_resources_open("/nowhere", &diagnostics));
    assert_int_equal(diagnostics.errors, 1);
    assert_int_equal(diagnostics.items[0].code, DIAGNOSTIC_FONT_UNUSABLE);
    assert_non_null(strstr(diagnostics.items[0].text, "/nowhere/OpenSans-Regular.ttf"));
    arena_release(&arena);
}

static void *make_in_thread(void *argument)
{
    struct arena arena = {0};
    struct document *document = sample_document(&arena, 1);
    struct made made = make(document);
    struct buffer *file = argument;
    if (made.good)
        buffer_append(file, made.file.data, made.file.length);
    made_release(&made);
    sample_document_release(document);
    arena_release(&arena);
    return NULL;
}

/* Resources are only read: run under helgrind as well. */
static void test_two_threads_share_the_resources(void **state)
{
    (void)state;
    pthread_t threads[2];
    struct buffer files[2] = {{0}};
    for (size_t i = 0; i < 2; i++)
        assert_int_equal(pthread_create(&threads[i], NULL, make_in_thread, &files[i]), 0);
    for (size_t i = 0; i < 2; i++)
        pthread_join(threads[i], NULL);
    assert_true(files[0].length > 10000);
    assert_int_equal(files[0].length, files[1].length);
    assert_memory_equal(files[0].data, files[1].data, files[0].length);
    buffer_release(&files[0]);
    buffer_release(&files[1]);
}

static void test_awkward_text(void **state)
{
    (void)state;
    struct arena arena = {0};
    struct document *document = awkward_document(&arena);
    struct made made = make(document);
    assert_true(made.good);
    assert_true(made.diagnostics.warnings > 0 && made.diagnostics.errors == 0);
    made_release(&made);
    sample_document_release(document);
    arena_release(&arena);
}

/* Prose and cells thrown together from pieces of CommonMark and odd bytes: the answer is a file, no
   crash, no hang. Knuth's generator: the same documents in every run. */
static const char *random_text(struct arena *arena, uint64_t *seed)
{
    static const char *const pieces[] = {"word ",
                                         "# ",
                                         "## ",
                                         "> ",
                                         "- ",
                                         "1. ",
                                         "999999999. ",
                                         "\n",
                                         "\n\n",
                                         "    ",
                                         "`",
                                         "```\n",
                                         "*",
                                         "**",
                                         "[a](",
                                         "http://x)",
                                         "<b>",
                                         "![",
                                         "](",
                                         "\\",
                                         "---\n",
                                         "\xFF",
                                         "\xE2\x80",
                                         "\x01",
                                         "Ω ",
                                         "5 %",
                                         "630 V",
                                         "-",
                                         "/",
                                         "—",
                                         "\u00A0",
                                         "\u00AD",
                                         "\u202E",
                                         "אבג ",
                                         "日",
                                         "(",
                                         ")",
                                         "\r",
                                         "\t",
                                         "x-y ",
                                         "abcdefghijklmnopqrstuvwxyzabcdefghijklmnopqrstuvwxyz"};
    struct buffer text = {0};
    for (unsigned i = 0; i < 150; i++) {
        *seed = *seed * 6364136223846793005u + 1442695040888963407u;
        buffer_text(&text, pieces[(*seed >> 33) % SAMPLE_COUNT(pieces)]);
    }
    const char *copy = arena_text(arena, text.data, text.length);
    buffer_release(&text);
    return copy;
}

static void random_table(struct document *document, uint64_t *seed)
{
    struct table *table = &sample_append(document, EXHIBIT_TABLE, "t", "Table 1")->table;
    struct column columns[5] = {{.head = "Ref", .kind = COLUMN_REF}};
    for (size_t i = 1; i < 5; i++)
        columns[i] = (struct column){.head = i % 2 ? random_text(document->arena, seed) : "",
                                     .kind = (enum column_kind)((*seed >> 40) % 5),
                                     .width_percent = (double)(*seed >> 50 & 31)};
    sample_table_of(document, table, columns, 5, 6);
    table->row_count = 6;
    table->write_in = *seed >> 45 & 1;
    for (size_t i = 0; i < 6; i++) {
        struct table_row *row = &table->rows[i];
        row->group = i % 3 == 0;
        for (size_t k = 0; k < 5; k++) {
            row->cells[k].text = random_text(document->arena, seed);
            row->cells[k].mark = (enum mark)((*seed >> 37) % 6);
            if (*seed >> 44 & 1)
                row->cells[k].figures =
                    sample_figures("<", random_text(document->arena, seed), ".5", "µF");
        }
    }
}

static void test_random_documents(void **state)
{
    (void)state;
    uint64_t seed = 1;
    for (unsigned i = 0; i < 60; i++) {
        struct arena arena = {0};
        struct document *document =
            empty_document(&arena, i % 2 ? DOCUMENT_RECORD : DOCUMENT_SHEET);
        document->page = i % 3 ? PAGE_A4 : PAGE_LETTER;
        if (i % 4 == 0)
            sample_append(document, EXHIBIT_TWO_COLUMNS, "c", NULL);
        else if (i % 4 == 1)
            sample_append(document, EXHIBIT_SIDE_BY_SIDE, "s", NULL);
        sample_prose(document, random_text(&arena, &seed));
        random_table(document, &seed);
        sample_append(document, EXHIBIT_FINGERPRINT, "f", NULL)->fingerprint.text =
            random_text(&arena, &seed);
        struct made made = make(document);
        assert_true(made.good);
        made_release(&made);
        sample_document_release(document);
        arena_release(&arena);
    }
}

/* ---- files for other programs */

/* Where to, and which; wanted NULL: all. */
struct target {
    const char *folder, *wanted;
};

static void save(const struct target *target, const char *name, struct document *document)
{
    if (target->wanted && strcmp(target->wanted, name) != 0) {
        sample_document_release(document);
        return;
    }
    struct made made = make(document);
    char *path = arena_print(document->arena, "%s/%s.pdf", target->folder, name);
    if (!made.good || file_write(path, made.file.data, made.file.length, NULL) != FILE_OK) {
        fprintf(stderr, "cannot make %s\n", path);
        exit(1);
    }
    made_release(&made);
    sample_document_release(document);
}

static void save_all(const struct target *target)
{
    struct arena arena = {0};
    struct picture pictures[8];
    save(target, "record", sample_document(&arena, 1));
    save(target, "long", sample_document(&arena, 3));
    save(target, "letter", letter_document(&arena));
    save(target, "sheet", sheet_document(&arena));
    struct document *letter_sheet = sheet_document(&arena);
    letter_sheet->page = PAGE_LETTER;
    save(target, "letter-sheet", letter_sheet);
    save(target, "awkward", awkward_document(&arena));
    uint64_t seed = 7;
    struct document *random = empty_document(&arena, DOCUMENT_RECORD);
    sample_prose(random, random_text(&arena, &seed));
    random_table(random, &seed);
    save(target, "random", random);
    save(target, "empty", empty_document(&arena, DOCUMENT_RECORD));
    save(target, "beside", beside_document(&arena));
    save(target, "pictures", pictures_document(&arena, pictures));
    for (size_t i = 0; i < 8; i++)
        picture_release(&pictures[i]);
    arena_release(&arena);
}

int main(int argc, char **argv)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_same_bytes_twice),
        cmocka_unit_test(test_identifier_is_the_fingerprint),
        cmocka_unit_test(test_missing_signs_are_told),
        cmocka_unit_test(test_failure_leaves_the_buffer),
        cmocka_unit_test(test_resources_that_are_missing),
        cmocka_unit_test(test_two_threads_share_the_resources),
        cmocka_unit_test(test_awkward_text),
        cmocka_unit_test(test_random_documents),
    };
    resources = pdf_resources_of(argv[0]);
    int failed = 0;
    if (argc > 1)
        save_all(&(struct target){argv[1], argc > 2 ? argv[2] : NULL});
    else
        failed = cmocka_run_group_tests(tests, NULL, NULL);
    pdf_resources_close(resources);
    return failed;
}
