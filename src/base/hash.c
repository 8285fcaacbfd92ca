#include "base/hash.h"

#include <nettle/sha2.h>

struct hash hash_of(const void *data, size_t length)
{
    struct sha256_ctx context;
    struct hash hash;
    sha256_init(&context);
    sha256_update(&context, length, data);
    sha256_digest(&context, HASH_BYTES, hash.bytes);
    return hash;
}

void hash_text(const struct hash *hash, char text[HASH_TEXT_BYTES])
{
    for (unsigned i = 0; i < HASH_BYTES; i++) {
        text[2 * i] = "0123456789abcdef"[hash->bytes[i] >> 4];
        text[2 * i + 1] = "0123456789abcdef"[hash->bytes[i] & 15];
    }
    text[HASH_TEXT_BYTES - 1] = '\0';
}
