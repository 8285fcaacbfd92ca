#include "report/tree_memory.h"

#include "base/memory.h"

#include <stdint.h>
#include <stdlib.h>

static const cmark_mem memory = {memory_get_cleared, memory_resize, free};

/* cmark never writes to what it takes the functions from. */
static cmark_mem *unfailing(void)
{
    return (cmark_mem *)(uintptr_t)&memory;
}

cmark_node *tree_node(cmark_node_type type)
{
    return cmark_node_new_with_mem(type, unfailing());
}

cmark_node *tree_of(const char *text, size_t length)
{
    cmark_parser *parser = cmark_parser_new_with_mem(CMARK_OPT_VALIDATE_UTF8, unfailing());
    cmark_parser_feed(parser, text, length);
    cmark_node *tree = cmark_parser_finish(parser);
    cmark_parser_free(parser);
    return tree;
}
