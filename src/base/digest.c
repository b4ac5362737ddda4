/* SHA-256 behind a small face, so that only this file knows libnettle. */
#include "base/base.h"

#include <nettle/sha2.h>

#include "base/poison.h"

struct digest {
    struct sha256_ctx state;
};

struct digest *digest_new(struct arena *a)
{
    struct digest *d = arena_alloc(a, sizeof *d);
    sha256_init(&d->state);
    return d;
}

void digest_add(struct digest *d, const void *bytes, size_t length)
{
    sha256_update(&d->state, length, bytes);
}

void digest_end(struct digest *d, uint8_t out[DIGEST_BYTES])
{
    sha256_digest(&d->state, DIGEST_BYTES, out);
}

void digest_write(const uint8_t in[DIGEST_BYTES], char out[2 * DIGEST_BYTES + 1])
{
    static const char hex[] = "0123456789abcdef";
    for (size_t i = 0; i < DIGEST_BYTES; i++) {
        out[2 * i] = hex[in[i] >> 4];
        out[2 * i + 1] = hex[in[i] & 15];
    }
    out[(size_t)2 * DIGEST_BYTES] = '\0';
}
