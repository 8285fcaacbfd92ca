/*
 * SHA-256 (FIPS 180-4), by nettle.
 */
#ifndef BASE_HASH_H
#define BASE_HASH_H

#include <stddef.h>

enum { HASH_BYTES = 32, HASH_TEXT_BYTES = 65 };

struct hash {
    unsigned char bytes[HASH_BYTES];
};

/* The digest of length bytes; data may be NULL when there are none. */
struct hash hash_of(const void *data, size_t length);

/* Lower-case hexadecimal with a NUL behind it. */
void hash_text(const struct hash *hash, char text[HASH_TEXT_BYTES]);

#endif
