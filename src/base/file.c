/* Whole files in, whole files out. Called by the scene reader and writer and by every command that
 * makes a file; knows nothing of what is in them. */
#include "base/file.h"

#include "base/message.h"
#include "base/text.h"

#include <errno.h>
#include <fcntl.h>
#include <limits.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

static char *read_open_file(int file, size_t limit, size_t *size)
{
    ev_buffer buffer = {0};
    ev_buffer_add(&buffer, "", 0);
    char chunk[1 << 16];
    for (;;) {
        ssize_t got = read(file, chunk, sizeof chunk);
        if (got < 0 && errno == EINTR)
            continue;
        if (got <= 0 || buffer.size + (size_t)got > limit) {
            *size = got <= 0 ? buffer.size : limit + 1;
            if (got < 0) {
                free(buffer.data);
                return NULL;
            }
            return buffer.data;
        }
        ev_buffer_add(&buffer, chunk, (size_t)got);
    }
}

static bool report_size(const char *path, size_t limit, ev_diagnostics *diagnostics)
{
    ev_place place = {.file = path};
    ev_report(diagnostics, EV_SEVERITY_ERROR, file_too_large, &place, (double)limit / 1048576.0);
    return false;
}

/* What is there, before anything of it is read. */
static bool check_kind(const char *path, const struct stat *status, size_t limit,
                       ev_diagnostics *diagnostics)
{
    ev_place place = {.file = path};
    if (S_ISDIR(status->st_mode)) {
        ev_report(diagnostics, EV_SEVERITY_ERROR, file_is_folder, &place, path);
        return false;
    }
    if (!S_ISREG(status->st_mode)) {
        ev_report(diagnostics, EV_SEVERITY_ERROR, file_not_regular, &place, path);
        return false;
    }
    if (status->st_size > 0 && (size_t)status->st_size > limit)
        return report_size(path, limit, diagnostics);
    return true;
}

char *ev_file_read(const char *path, size_t limit, size_t *size, ev_diagnostics *diagnostics)
{
    ev_place place = {.file = path};
    struct stat status;
    int file = open(path, O_RDONLY | O_NONBLOCK | O_CLOEXEC);
    if (file < 0 && (errno == ENOENT || errno == ENOTDIR)) {
        ev_report(diagnostics, EV_SEVERITY_ERROR, file_missing, &place, path);
        return NULL;
    }
    if (file < 0 || fstat(file, &status) != 0) {
        ev_report(diagnostics, EV_SEVERITY_ERROR, file_unreadable, &place, strerror(errno));
        if (file >= 0)
            close(file);
        return NULL;
    }
    char *text = NULL;
    if (check_kind(path, &status, limit, diagnostics)) {
        text = read_open_file(file, limit, size);
        if (text == NULL)
            ev_report(diagnostics, EV_SEVERITY_ERROR, file_unreadable, &place, strerror(errno));
    }
    close(file);
    if (text && *size > limit) {
        report_size(path, limit, diagnostics);
        free(text);
        text = NULL;
    }
    return text;
}

static bool write_all(int file, const char *text, size_t size)
{
    while (size > 0) {
        ssize_t put = write(file, text, size);
        if (put < 0 && errno == EINTR)
            continue;
        if (put <= 0)
            return false;
        text += put;
        size -= (size_t)put;
    }
    return true;
}

/* A rename is on the disk only when its folder is. Some file systems refuse to sync a folder;
 * the file itself is then still whole, so this is no failure. */
static void sync_folder_of(const char *path)
{
    char folder[PATH_MAX];
    if (!ev_file_beside(path, ".", folder, sizeof folder))
        return;
    int handle = open(folder, O_RDONLY | O_DIRECTORY | O_CLOEXEC);
    if (handle < 0)
        return;
    fsync(handle);
    close(handle);
}

static mode_t mode_for(const char *path)
{
    struct stat status;
    if (stat(path, &status) == 0)
        return status.st_mode & 07777;
    mode_t mask = umask(0);
    umask(mask);
    return 0666 & ~mask;
}

/* Writes the new file under a name of its own beside the old one. */
static bool write_beside(const char *target, const char *text, size_t size, char *temporary)
{
    int file = mkstemp(temporary);
    if (file < 0)
        return false;
    bool written =
        write_all(file, text, size) && fchmod(file, mode_for(target)) == 0 && fsync(file) == 0;
    int reason = errno;
    if (close(file) != 0 && written) {
        written = false;
        reason = errno;
    }
    if (!written)
        unlink(temporary);
    errno = reason;
    return written;
}

static bool replace_target(const char *target, const char *text, size_t size)
{
    char temporary[PATH_MAX];
    struct stat status;
    if (stat(target, &status) == 0 && S_ISDIR(status.st_mode)) {
        errno = EISDIR;
        return false;
    }
    /* A file that may not be written stays as it is, though its folder would allow a rename. */
    if (access(target, F_OK) == 0 && access(target, W_OK) != 0)
        return false;
    int length = snprintf(temporary, sizeof temporary, "%s.XXXXXX", target);
    if (length < 0 || (size_t)length >= sizeof temporary) {
        errno = ENAMETOOLONG;
        return false;
    }
    if (!write_beside(target, text, size, temporary))
        return false;
    if (rename(temporary, target) != 0) {
        int reason = errno;
        unlink(temporary);
        errno = reason;
        return false;
    }
    sync_folder_of(target);
    return true;
}

bool ev_file_replace(const char *path, const char *text, size_t size, ev_diagnostics *diagnostics)
{
    char *resolved = realpath(path, NULL);
    bool replaced = replace_target(resolved ? resolved : path, text, size);
    int reason = errno;
    free(resolved);
    if (!replaced) {
        ev_place place = {.file = path};
        ev_report(diagnostics, EV_SEVERITY_ERROR, file_not_written, &place, strerror(reason));
    }
    return replaced;
}

bool ev_file_beside(const char *beside, const char *name, char *path, size_t size)
{
    const char *slash = strrchr(beside, '/');
    int folder = name[0] == '/' || slash == NULL ? 0 : (int)(slash - beside) + 1;
    int length = snprintf(path, size, "%.*s%s", folder, beside, name);
    return length >= 0 && (size_t)length < size;
}
