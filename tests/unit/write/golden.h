/*
 * Golden files: what a writer made, compared byte by byte with a file of the repository. UPDATE=1
 * in the environment writes them anew: read the difference before it is committed.
 */
#ifndef TESTS_GOLDEN_H
#define TESTS_GOLDEN_H

#include "kit.h"

#include "base/buffer.h"
#include "base/file.h"

#include <stdlib.h>
#include <string.h>

static inline size_t golden_line(const char *one, const char *other)
{
    size_t line = 1;
    for (; *one && *one == *other; one++, other++)
        line += *one == '\n';
    return line;
}

static inline void golden_compare(struct buffer *made, const char *path)
{
    struct buffer expected = {0};
    if (getenv("UPDATE")) {
        assert_int_equal(file_write(path, made->data, made->length, NULL), FILE_OK);
        return;
    }
    assert_int_equal(file_read(path, 4 << 20, &expected), FILE_OK);
    if (expected.length != made->length || memcmp(expected.data, made->data, made->length) != 0) {
        print_error("%s differs from line %zu on\n", path,
                    golden_line(buffer_string(&expected), buffer_string(made)));
        buffer_release(&expected);
        fail();
    }
    buffer_release(&expected);
}

static inline struct buffer golden_read(const char *path)
{
    struct buffer contents = {0};
    assert_int_equal(file_read(path, 4 << 20, &contents), FILE_OK);
    return contents;
}

#endif
