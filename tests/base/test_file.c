/* Whole files: what cannot be read says why; replacing is one step or nothing. */
#include "base/file.h"

#include <fcntl.h>
#include <setjmp.h>
#include <signal.h>
#include <stdarg.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>
#include <sys/resource.h>
#include <sys/stat.h>
#include <unistd.h>

#include <cmocka.h>

static char folder[64];

static const char *in_folder(const char *name)
{
    static char path[128];
    snprintf(path, sizeof path, "%s/%s", folder, name);
    return path;
}

static void write_file(const char *path, const char *text)
{
    FILE *file = fopen(path, "w");
    assert_non_null(file);
    fputs(text, file);
    fclose(file);
}

static void expect_text(const char *path, const char *text)
{
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    size_t size;
    char *read = ev_file_read(path, 1000, &size, &d);
    assert_non_null(read);
    assert_string_equal(read, text);
    assert_int_equal(size, strlen(text));
    free(read);
}

static void expect_failure(const char *path, size_t limit, const char *id)
{
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    size_t size;
    assert_null(ev_file_read(path, limit, &size, &d));
    assert_int_equal(d.count, 1);
    assert_string_equal(d.items[0].id, id);
    assert_string_equal(d.items[0].file, path);
    ev_diagnostics_clear(&d);
}

static int count_entries(void)
{
    char command[128], answer[16] = "";
    snprintf(command, sizeof command, "ls -A %s | wc -l", folder);
    FILE *pipe = popen(command, "r");
    assert_non_null(pipe);
    assert_non_null(fgets(answer, sizeof answer, pipe));
    pclose(pipe);
    return atoi(answer);
}

static void says_why_it_cannot_read(void **state)
{
    (void)state;
    write_file(in_folder("eleven"), "0123456789\n");
    expect_text(in_folder("eleven"), "0123456789\n");
    expect_failure(in_folder("eleven"), 10, "file_too_large");
    expect_failure(in_folder("none"), 10, "file_missing");
    expect_failure(in_folder("eleven/none"), 10, "file_missing");
    expect_failure(folder, 10, "file_is_folder");
    expect_failure("/dev/null", 10, "file_not_regular");
    assert_int_equal(mkfifo(in_folder("pipe"), 0600), 0);
    expect_failure(in_folder("pipe"), 10, "file_not_regular");
    if (geteuid() != 0) { /* root may read anything */
        assert_int_equal(chmod(in_folder("eleven"), 0), 0);
        expect_failure(in_folder("eleven"), 10, "file_unreadable");
    }
}

static void replaces_in_one_step(void **state)
{
    (void)state;
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    write_file(in_folder("scene"), "old\n");
    assert_int_equal(chmod(in_folder("scene"), 0640), 0);
    assert_true(ev_file_replace(in_folder("scene"), "new\n", 4, &d));
    expect_text(in_folder("scene"), "new\n");
    struct stat status;
    assert_int_equal(stat(in_folder("scene"), &status), 0);
    assert_int_equal(status.st_mode & 07777, 0640);
    assert_true(ev_file_replace(in_folder("made"), "first\n", 6, &d));
    expect_text(in_folder("made"), "first\n");
    assert_int_equal(d.count, 0);
}

/* A link in the user's folder to a file elsewhere stays a link. */
static void follows_links(void **state)
{
    (void)state;
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    char link[128];
    snprintf(link, sizeof link, "%s/link", folder);
    write_file(in_folder("target"), "old\n");
    assert_int_equal(symlink("target", link), 0);
    assert_true(ev_file_replace(link, "new\n", 4, &d));
    expect_text(in_folder("target"), "new\n");
    struct stat status;
    assert_int_equal(lstat(link, &status), 0);
    assert_true(S_ISLNK(status.st_mode));
}

static void expect_refusal(const char *path)
{
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    assert_false(ev_file_replace(path, "new\n", 4, &d));
    assert_int_equal(d.count, 1);
    assert_string_equal(d.items[0].id, "file_not_written");
    ev_diagnostics_clear(&d);
}

static void leaves_the_old_file_when_it_fails(void **state)
{
    (void)state;
    expect_refusal(in_folder("nowhere/scene"));
    expect_refusal(folder);
    assert_int_equal(mkdir(in_folder("sub"), 0700), 0);
    expect_refusal(in_folder("sub"));
    if (geteuid() == 0)
        return;
    write_file(in_folder("locked"), "old\n");
    assert_int_equal(chmod(in_folder("locked"), 0444), 0);
    int entries = count_entries();
    expect_refusal(in_folder("locked"));
    assert_int_equal(chmod(folder, 0500), 0);
    write_file(in_folder("scene"), "kept\n");
    expect_refusal(in_folder("scene"));
    assert_int_equal(chmod(folder, 0700), 0);
    expect_text(in_folder("locked"), "old\n");
    expect_text(in_folder("scene"), "kept\n");
    assert_int_equal(count_entries(), entries);
}

/* No room left: the limit on file sizes stands in for a full disk. */
static void survives_a_full_disk(void **state)
{
    (void)state;
    write_file(in_folder("full"), "old\n");
    int entries = count_entries();
    struct rlimit before, tight;
    assert_int_equal(getrlimit(RLIMIT_FSIZE, &before), 0);
    tight = before;
    tight.rlim_cur = 2;
    signal(SIGXFSZ, SIG_IGN);
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    assert_int_equal(setrlimit(RLIMIT_FSIZE, &tight), 0);
    bool replaced = ev_file_replace(in_folder("full"), "newer\n", 6, &d);
    assert_int_equal(setrlimit(RLIMIT_FSIZE, &before), 0);
    assert_false(replaced);
    assert_string_equal(d.items[0].id, "file_not_written");
    expect_text(in_folder("full"), "old\n");
    assert_int_equal(count_entries(), entries);
    ev_diagnostics_clear(&d);
}

static void joins_paths(void **state)
{
    (void)state;
    char path[32];
    assert_true(ev_file_beside("a/b.yaml", "horn.csv", path, sizeof path));
    assert_string_equal(path, "a/horn.csv");
    assert_true(ev_file_beside("b.yaml", "horn.csv", path, sizeof path));
    assert_string_equal(path, "horn.csv");
    assert_true(ev_file_beside("a/b.yaml", "/c/horn.csv", path, sizeof path));
    assert_string_equal(path, "/c/horn.csv");
    assert_false(ev_file_beside("a/b.yaml", "a name that does not fit here.csv", path, 20));
}

static int make_folder(void **state)
{
    (void)state;
    snprintf(folder, sizeof folder, "file_test_XXXXXX");
    return mkdtemp(folder) ? 0 : -1;
}

static int remove_folder(void **state)
{
    (void)state;
    char command[128];
    snprintf(command, sizeof command, "rm -rf %s", folder);
    return system(command);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test_setup_teardown(says_why_it_cannot_read, make_folder, remove_folder),
        cmocka_unit_test_setup_teardown(replaces_in_one_step, make_folder, remove_folder),
        cmocka_unit_test_setup_teardown(follows_links, make_folder, remove_folder),
        cmocka_unit_test_setup_teardown(leaves_the_old_file_when_it_fails, make_folder,
                                        remove_folder),
        cmocka_unit_test_setup_teardown(survives_a_full_disk, make_folder, remove_folder),
        cmocka_unit_test(joins_paths),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
