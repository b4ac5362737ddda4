/* Digests: SHA-256 against the published vectors. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "base/base.h"

#include <string.h>

#include "base/poison.h"

static void digests_agree_with_the_published_vectors(void **state)
{
    (void)state;
    /* NIST, examples with intermediate values for FIPS 180-4, SHA-256; the empty message: NIST
     * CAVP, SHA256ShortMsg, Len = 0 */
    static const struct {
        const char *message, *digest;
    } cases[] = {
        {"abc", "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad"},
        {"abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq",
         "248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1"},
        {"", "e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855"},
    };
    struct arena *a = arena_new();
    struct digest *d = digest_new(a);
    for (size_t i = 0; i < NELEM(cases); i++) {
        /* whole, then byte by byte: the state starts afresh each time */
        for (size_t step = 0; step < 2; step++) {
            size_t length = strlen(cases[i].message);
            size_t piece = step == 0 ? length : 1;
            for (size_t at = 0; at < length; at += piece)
                digest_add(d, cases[i].message + at, piece);
            uint8_t bytes[DIGEST_BYTES];
            char hex[2 * DIGEST_BYTES + 1];
            digest_end(d, bytes);
            digest_write(bytes, hex);
            assert_string_equal(hex, cases[i].digest);
        }
    }
    arena_free(a);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(digests_agree_with_the_published_vectors),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
