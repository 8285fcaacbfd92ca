/*
 * What the tests of lines share: a line somewhere in a file, and what a refusal must say.
 */
#ifndef TESTS_UNIT_JOB_LINE_KIT_H
#define TESTS_UNIT_JOB_LINE_KIT_H

#include "kit.h"

#include "job/line.h"

#include <string.h>

static const struct position start = {7, 15};

static inline struct line line_in(struct arena *arena, const char *text)
{
    return line_of(arena, text, strlen(text), start);
}

/* What is expected of a line that is refused. */
struct refusal {
    const char *text;
    enum diagnostic_code code;
    const char *where; /* the bytes under the caret */
    const char *hint;  /* part of it; NULL: none asked for */
};

static inline void assert_refused(const struct line *line, const struct refusal *refusal)
{
    const struct line_problem *problem = &line->problem;
    char where[256];
    assert_non_null(problem->text);
    assert_true(problem->offset + problem->length <= line->length);
    snprintf(where, sizeof where, "%.*s", (int)problem->length, line->text + problem->offset);
    if (problem->code != refusal->code)
        print_error("'%s': %s\n", refusal->text, problem->text);
    assert_int_equal(problem->code, refusal->code);
    assert_string_equal(where, refusal->where);
    if (refusal->hint != NULL) {
        assert_non_null(problem->hint);
        if (strstr(problem->hint, refusal->hint) == NULL)
            print_error("'%s': hint '%s'\n", refusal->text, problem->hint);
        assert_non_null(strstr(problem->hint, refusal->hint));
    }
    assert_int_equal(problem->at.line, start.line);
    assert_true(problem->at.column >= start.column);
}

#endif
