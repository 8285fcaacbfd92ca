/* Shares with intervals. */
#include "assess/share.h"

#include "kit.h"
#include "published_rows.h"

static void wilson_as_published(void **state)
{
    (void)state;
    for (size_t i = 0; i < PUBLISHED_COUNT(newcombe_rows); i++) {
        const struct newcombe_row *row = &newcombe_rows[i];
        double low, high;
        share_wilson(row->x / row->n, row->n, &low, &high);
        assert_close(low, row->low, 0.00005);
        assert_close(high, row->high, 0.00005);
        /* Failures and passes are each other's mirror. */
        share_wilson(1 - row->x / row->n, row->n, &low, &high);
        assert_close(low, 1 - row->high, 0.00005);
        assert_close(high, 1 - row->low, 0.00005);
    }
}

static struct share_sums sums_of(const double (*sets)[2], size_t count)
{
    struct share_sums sums = {0};
    for (size_t i = 0; i < count; i++)
        share_add_set(&sums, sets[i][0], sets[i][1]);
    return sums;
}

/*
 * By hand from methods' formula: ten sets of ten, failed 0 0 0 0 0 10 10 10 10 10. p = 0.5;
 * sum (x_i - p n_i)^2 = 10*25; v = 10/9*250/10000 = 0.027778; deff = 0.027778*100/0.25 = 11.1111;
 * n_eff = 100/11.1111*(1.95996/2.262157)^2 = 6.7561 (t95 of 9 from any table).
 */
static void parts_of_one_set_are_alike(void **state)
{
    (void)state;
    double sets[10][2];
    for (int i = 0; i < 10; i++) {
        sets[i][0] = i < 5 ? 0 : 10;
        sets[i][1] = 10;
    }
    struct share_sums sums = sums_of(sets, 10);
    struct share share = share_of(&sums);
    assert_close(share.share, 0.5, 1e-12);
    assert_close(share.design_effect, 11.1111, 1e-4);
    assert_close(share.effective_n, 6.7561, 1e-3);
    double low, high;
    share_wilson(0.5, 6.7561, &low, &high);
    assert_close(share.low, low, 1e-4);
    assert_close(share.high, high, 1e-4);
}

/* The same 50 of 100 spread evenly: no design effect, only the t quantile widens. */
static void even_sets_gain_nothing(void **state)
{
    (void)state;
    double sets[10][2];
    for (int i = 0; i < 10; i++) {
        sets[i][0] = 5;
        sets[i][1] = 10;
    }
    struct share_sums sums = sums_of(sets, 10);
    struct share share = share_of(&sums);
    assert_close(share.design_effect, 1, 1e-12);
    assert_close(share.effective_n, 100 * 0.750668, 0.01);
}

static void none_failed_counts_sets(void **state)
{
    (void)state;
    double sets[20][2];
    for (int i = 0; i < 20; i++) {
        sets[i][0] = 0;
        sets[i][1] = 7;
    }
    struct share_sums sums = sums_of(sets, 20);
    struct share share = share_of(&sums);
    assert_close(share.effective_n, 20, 0);
    assert_close(share.low, 0, 0);
    assert_close(share.high, .1611, 0.00005); /* Newcombe's 0/20 */
}

static void too_few_sets_have_counts_only(void **state)
{
    (void)state;
    const double sets[4][2] = {{1, 2}, {0, 2}, {1, 1}, {0, 5}};
    struct share_sums sums = sums_of(sets, 4);
    sums.unread = 2;
    struct share share = share_of(&sums);
    assert_close(share.share, 0.2, 1e-12);
    assert_true(isnan(share.low) && isnan(share.high) && isnan(share.effective_n));
    assert_close(share.best, 2.0 / 12, 1e-12);
    assert_close(share.worst, 4.0 / 12, 1e-12);
}

static void nothing_read_has_no_share(void **state)
{
    (void)state;
    struct share_sums sums = {.unread = 3};
    struct share share = share_of(&sums);
    assert_true(isnan(share.share) && isnan(share.low));
    assert_close(share.best, 0, 0);
    assert_close(share.worst, 1, 0);
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(wilson_as_published),
                                       cmocka_unit_test(parts_of_one_set_are_alike),
                                       cmocka_unit_test(even_sets_gain_nothing),
                                       cmocka_unit_test(none_failed_counts_sets),
                                       cmocka_unit_test(too_few_sets_have_counts_only),
                                       cmocka_unit_test(nothing_read_has_no_share)};
    return cmocka_run_group_tests(tests, NULL, NULL);
}
