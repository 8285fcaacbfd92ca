/*
 * cmark's trees, made with memory that cannot fail: cmark's own allocator aborts the program.
 */
#ifndef REPORT_TREE_MEMORY_H
#define REPORT_TREE_MEMORY_H

#include <cmark.h>
#include <stddef.h>

/* A node, a parsed text; cmark_node_free gives them back. Ill-formed UTF-8 becomes U+FFFD. */
cmark_node *tree_node(cmark_node_type type);
cmark_node *tree_of(const char *text, size_t length);

#endif
