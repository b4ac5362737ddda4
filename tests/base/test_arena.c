/* Arenas: pieces are zeroed, aligned, apart from one another, and go all at once. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "base/base.h"

#include <stdlib.h>
#include <string.h>
#include <sys/wait.h>
#include <unistd.h>

#include "base/poison.h"

static bool all_zero(const unsigned char *p, size_t size)
{
    for (size_t i = 0; i < size; i++) {
        if (p[i] != 0)
            return false;
    }
    return true;
}

static void pieces_are_zeroed_aligned_and_apart(void **state)
{
    (void)state;
    enum { PIECES = 4000 };
    static unsigned char *piece[PIECES];
    static size_t size[PIECES];
    struct arena *a = arena_new();
    size_t asked = 0;
    for (size_t i = 0; i < PIECES; i++) {
        /* mostly small, now and then past a chunk */
        size[i] = i % 500 == 499 ? 3000000 + i : (i * 37) % 700;
        piece[i] = arena_alloc(a, size[i]);
        asked += size[i];
        assert_int_equal((uintptr_t)piece[i] % 16, 0);
        assert_true(all_zero(piece[i], size[i]));
        memset(piece[i], (int)(i % 255 + 1), size[i]);
    }
    for (size_t i = 0; i < PIECES; i++) {
        for (size_t j = 0; j < size[i]; j++) {
            if (piece[i][j] != i % 255 + 1)
                fail_msg("piece %zu was written over at byte %zu", i, j);
        }
    }
    assert_true(arena_used(a) >= asked);
    assert_true(arena_used(a) <= asked + 16UL * PIECES);
    arena_free(a);
}

static void a_large_piece_may_come_first(void **state)
{
    (void)state;
    struct arena *a = arena_new();
    unsigned char *large = arena_alloc(a, 5000000);
    unsigned char *small = arena_alloc(a, 16);
    memset(large, 1, 5000000);
    assert_true(all_zero(small, 16));
    arena_free(a);
}

static void nothing_bytes_are_still_a_piece(void **state)
{
    (void)state;
    struct arena *a = arena_new();
    const char *p = arena_alloc(a, 0);
    const char *q = arena_alloc(a, 0);
    assert_non_null(p);
    assert_ptr_not_equal(p, q);
    arena_free(a);
    arena_free(NULL);
}

static void copies_stand_on_their_own(void **state)
{
    (void)state;
    struct arena *a = arena_new();
    char word[] = "effluent";
    char *copy = arena_text(a, word);
    word[0] = 'E';
    assert_string_equal(copy, "effluent");
    assert_string_equal(arena_bytes(a, "effluent", 3), "eff");
    assert_string_equal(arena_bytes(a, "", 0), "");
    assert_memory_equal(arena_bytes(a, "a\0b", 3), "a\0b", 4);
    assert_string_equal(arena_print(a, "%s-%03d", "day", 7), "day-007");
    assert_string_equal(arena_print(a, "%s", ""), "");
    assert_int_equal(strlen(arena_print(a, "%50000d", 7)), 50000);
    arena_free(a);
}

static void a_pushed_array_keeps_its_elements(void **state)
{
    (void)state;
    struct item {
        int number;
        const char *name;
    } *items = NULL;
    size_t count = 0;
    size_t capacity = 0;
    struct arena *a = arena_new();
    for (int i = 0; i < 5000; i++) {
        struct item *item = arena_push(a, &items, &count, &capacity, sizeof *items);
        assert_int_equal(item->number, 0);
        assert_null(item->name);
        item->number = i;
        item->name = "x";
    }
    assert_int_equal(count, 5000);
    assert_true(capacity >= count);
    for (int i = 0; i < 5000; i++)
        assert_int_equal(items[i].number, i);

    count--; /* given back, and asked for again */
    struct item *again = arena_push(a, &items, &count, &capacity, sizeof *items);
    assert_int_equal(again->number, 0);
    arena_free(a);
}

/* Runs `body` in a child and returns its exit status; what it says on standard error goes to
 * `said`. */
static int in_child(void (*body)(void), char *said, size_t room)
{
    int pipes[2];
    assert_int_equal(pipe(pipes), 0);
    pid_t child = fork();
    assert_true(child >= 0);
    if (child == 0) {
        dup2(pipes[1], STDERR_FILENO);
        body();
        _exit(77);
    }
    close(pipes[1]);
    size_t length = 0;
    ssize_t n = 0;
    while (length + 1 < room && (n = read(pipes[0], said + length, room - 1 - length)) > 0)
        length += (size_t)n;
    said[length] = '\0';
    close(pipes[0]);
    int status = 0;
    assert_int_equal(waitpid(child, &status, 0), child);
    return WIFEXITED(status) ? WEXITSTATUS(status) : -1;
}

static void ask_too_much(void)
{
    struct arena *a = arena_new();
    printf("half a page"); /* must not be flushed */
    char *p = arena_alloc(a, SIZE_MAX - 5);
    p[0] = 1;
}

static void push_too_much(void)
{
    struct arena *a = arena_new();
    char *array = NULL;
    size_t count = SIZE_MAX / 4;
    size_t capacity = count;
    char *p = arena_push(a, &array, &count, &capacity, 16);
    p[0] = 1;
}

static void out_of_memory_is_one_line_and_status_1(void **state)
{
    (void)state;
    void (*const bodies[])(void) = {ask_too_much, push_too_much};
    for (size_t i = 0; i < NELEM(bodies); i++) {
        char said[500];
        fflush(NULL);
        assert_int_equal(in_child(bodies[i], said, sizeof said), 1);
        assert_string_equal(
            said, "weirbook: out of memory; close other programs or use a smaller period\n");
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(pieces_are_zeroed_aligned_and_apart),
        cmocka_unit_test(a_large_piece_may_come_first),
        cmocka_unit_test(nothing_bytes_are_still_a_piece),
        cmocka_unit_test(copies_stand_on_their_own),
        cmocka_unit_test(a_pushed_array_keeps_its_elements),
        cmocka_unit_test(out_of_memory_is_one_line_and_status_1),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
