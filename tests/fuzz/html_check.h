/*
 * Whether a page is what its writer meant: every tag closed by its own end, attributes quoted,
 * characters escaped, nothing inside a paragraph that would end it, no id twice, no link to an id
 * that is not there, and nothing that runs. Stricter than the HTML standard, which forgives.
 */
#ifndef TESTS_HTML_CHECK_H
#define TESTS_HTML_CHECK_H

#include "base/arena.h"
#include "base/utf8.h"

#include <stdbool.h>
#include <string.h>

enum { HTML_DEPTH_MAX = 200, HTML_NAME_MAX = 32 };

struct html_name {
    char text[HTML_NAME_MAX];
};

struct html_check {
    const char *at;
    const char *problem; /* NULL: none so far */
    struct html_name open[HTML_DEPTH_MAX];
    size_t depth;
    const char **ids, **targets;
    size_t id_count, id_capacity, target_count, target_capacity;
    struct arena *arena;
};

static inline bool html_is_one_of(const char *name, const char *const *names)
{
    for (; *names; names++)
        if (strcmp(name, *names) == 0)
            return true;
    return false;
}

static inline bool html_wrong(struct html_check *check, const char *problem)
{
    if (!check->problem)
        check->problem = problem;
    return false;
}

static inline bool html_read_name(struct html_check *check, struct html_name *name)
{
    static const char signs[] = "abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ0123456789-";
    size_t length = strspn(check->at, signs);
    if (length == 0 || length >= sizeof name->text)
        return html_wrong(check, "no name of a tag or an attribute");
    memcpy(name->text, check->at, length);
    name->text[length] = '\0';
    check->at += length;
    return true;
}

/* `&amp;`, `&#8217;`; *at is at the &. */
static inline bool html_is_entity(const char *at)
{
    static const char *const names[] = {"&amp;", "&lt;", "&gt;", "&quot;", NULL};
    for (const char *const *name = names; *name; name++)
        if (strncmp(at, *name, strlen(*name)) == 0)
            return true;
    size_t digits = at[1] == '#' ? strspn(at + 2, "0123456789") : 0;
    return digits > 0 && at[2 + digits] == ';';
}

/* Characters up to one of `ends`. */
static inline bool html_characters(struct html_check *check, const char *ends)
{
    for (const char *at = check->at; *at && !strchr(ends, *at); at++) {
        if (*at == '&' && !html_is_entity(at))
            return html_wrong(check, "a bare &");
        if (*at == '<')
            return html_wrong(check, "a bare <");
        if ((unsigned char)*at < 0x20 && *at != '\n' && *at != '\t')
            return html_wrong(check, "a control character");
    }
    check->at += strcspn(check->at, ends);
    return true;
}

static inline bool html_may_link_to(const char *target)
{
    static const char *const schemes[] = {"#", "http://", "https://", "mailto:", "tel:", NULL};
    for (const char *const *scheme = schemes; *scheme; scheme++)
        if (strncasecmp(target, *scheme, strlen(*scheme)) == 0)
            return true;
    return strncmp(target, "pictures/", 9) == 0 && !strstr(target, "..");
}

static inline bool html_attribute(struct html_check *check)
{
    struct html_name name;
    if (!html_read_name(check, &name))
        return false;
    if (strncasecmp(name.text, "on", 2) == 0)
        return html_wrong(check, "an attribute that runs something");
    if (strncmp(check->at, "=\"", 2) != 0)
        return true; /* `reversed`, alone */
    const char *start = check->at += 2;
    if (!html_characters(check, "\"") || *check->at++ != '"')
        return html_wrong(check, "an attribute without its end");
    const char *value = arena_text(check->arena, start, (size_t)(check->at - 1 - start));
    if (strcmp(name.text, "id") == 0) {
        check->ids = arena_grow(check->arena, check->ids, check->id_count, &check->id_capacity,
                                sizeof *check->ids);
        check->ids[check->id_count++] = value;
    }
    if (strcmp(name.text, "href") != 0 && strcmp(name.text, "src") != 0)
        return true;
    if (!html_may_link_to(value))
        return html_wrong(check, "a link that is not allowed");
    if (value[0] == '#') {
        check->targets = arena_grow(check->arena, check->targets, check->target_count,
                                    &check->target_capacity, sizeof *check->targets);
        check->targets[check->target_count++] = value + 1;
    }
    return true;
}

static inline bool html_is_open(const struct html_check *check, const char *name)
{
    for (size_t i = 0; i < check->depth; i++)
        if (strcmp(check->open[i].text, name) == 0)
            return true;
    return false;
}

static inline bool html_may_stand_here(struct html_check *check, const char *name)
{
    static const char *const run[] = {"script", "iframe", "object", "embed", "form",  "base",
                                      "link",   "input",  "audio",  "video", "style", NULL};
    static const char *const blocks[] = {
        "p",   "div",        "table",   "ul",     "ol",     "dl",     "h1",
        "h2",  "h3",         "h4",      "h5",     "h6",     "hr",     "li",
        "pre", "blockquote", "details", "figure", "header", "footer", NULL};
    if (strcmp(name, "style") != 0 || !html_is_open(check, "head"))
        if (html_is_one_of(name, run))
            return html_wrong(check, "an element that no document has");
    if (html_is_open(check, "p") && html_is_one_of(name, blocks))
        return html_wrong(check, "a block inside a paragraph");
    if (html_is_open(check, "a") && strcmp(name, "a") == 0)
        return html_wrong(check, "a link inside a link");
    return true;
}

static inline bool html_start_tag(struct html_check *check)
{
    static const char *const empty[] = {"meta", "img", "br", "hr", "col", "wbr", NULL};
    struct html_name name;
    check->at++;
    if (!html_read_name(check, &name) || !html_may_stand_here(check, name.text))
        return false;
    while (*check->at == ' ' && strncmp(check->at, " />", 3) != 0) {
        check->at++;
        if (!html_attribute(check))
            return false;
    }
    check->at += *check->at == ' ';
    bool closed = *check->at == '/';
    check->at += closed;
    if (*check->at++ != '>')
        return html_wrong(check, "a tag without its end");
    if (strcmp(name.text, "style") == 0) {
        const char *end = strstr(check->at, "</style>");
        if (!end)
            return html_wrong(check, "a style without its end");
        check->at = end;
    }
    if (closed || html_is_one_of(name.text, empty))
        return true;
    if (check->depth == HTML_DEPTH_MAX)
        return html_wrong(check, "nested too deep");
    check->open[check->depth++] = name;
    return true;
}

static inline bool html_end_tag(struct html_check *check)
{
    struct html_name name;
    check->at += 2;
    if (!html_read_name(check, &name))
        return false;
    if (*check->at++ != '>')
        return html_wrong(check, "an end tag without its end");
    if (check->depth == 0 || strcmp(check->open[check->depth - 1].text, name.text) != 0)
        return html_wrong(check, "a tag closed that was not the last one open");
    check->depth--;
    return true;
}

static inline int html_by_text(const void *a, const void *b)
{
    return strcmp(*(const char *const *)a, *(const char *const *)b);
}

static inline bool html_links_are_whole(struct html_check *check)
{
    if (check->id_count)
        qsort(check->ids, check->id_count, sizeof *check->ids, html_by_text);
    for (size_t i = 1; i < check->id_count; i++)
        if (strcmp(check->ids[i - 1], check->ids[i]) == 0)
            return html_wrong(check, "an id twice");
    for (size_t i = 0; i < check->target_count; i++)
        if (!check->id_count || !bsearch(&check->targets[i], check->ids, check->id_count,
                                         sizeof *check->ids, html_by_text))
            return html_wrong(check, "a link to an id that is not there");
    return true;
}

static inline bool html_is_utf8(const char *text)
{
    for (const char *end = text + strlen(text); text < end;)
        if (utf8_next(&text, end) == UTF8_ILL_FORMED)
            return false;
    return true;
}

/* The whole page; what is wrong stands in `problem`, where in `at`. */
static inline struct html_check html_check(const char *page, struct arena *arena)
{
    static const char doctype[] = "<!doctype html>";
    struct html_check check = {.at = page, .arena = arena};
    if (!html_is_utf8(page))
        html_wrong(&check, "no UTF-8");
    if (strncmp(page, doctype, sizeof doctype - 1) != 0)
        html_wrong(&check, "no doctype");
    else
        check.at += sizeof doctype - 1;
    while (*check.at && !check.problem) {
        if (*check.at != '<')
            html_characters(&check, "<");
        else if (check.at[1] == '/')
            html_end_tag(&check);
        else
            html_start_tag(&check);
    }
    if (check.depth)
        html_wrong(&check, "a tag left open");
    html_links_are_whole(&check);
    return check;
}

#endif
