/*
 * What every record depends on besides its own job: the program, templates, words, style, fonts and
 * shop.yaml, in one hash.
 */
#ifndef ARCHIVE_SETTING_H
#define ARCHIVE_SETTING_H

#include "archive/archive.h"
#include "base/hash.h"

/* By the files as they lie there now; lower-case hexadecimal with a NUL behind it. */
void setting_hash(const struct archive *archive, char hash[HASH_TEXT_BYTES]);

#endif
