/* The crew: every piece of every task is done exactly once, by the time the call returns. */
#include "view/crew.h"

#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <string.h>

#include <cmocka.h>

enum { PIECES = 500 };

static void count_piece(void *data, int index)
{
    int *done = data;
    ++done[index];
}

static void test_each_piece_once(void **state)
{
    (void)state;
    for (int threads = 0; threads <= 6; ++threads) {
        ev_crew *crew = ev_crew_create(threads);
        assert_true((crew != NULL) == (threads > 1));
        for (int round = 0; round < 200; ++round) {
            int done[PIECES], count = round % 7 == 0 ? round % 3 : 1 + round * 2;
            memset(done, 0, sizeof done);
            ev_crew_run(crew, count, count_piece, done);
            for (int i = 0; i < PIECES; ++i) {
                assert_int_equal(done[i], i < count ? 1 : 0);
            }
        }
        ev_crew_destroy(crew);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(test_each_piece_once)};
    return cmocka_run_group_tests(tests, NULL, NULL);
}
