/* file.c - whole files: replaced in one step or not at all, and read into memory.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "store/file.h"

#include <errno.h>
#include <fcntl.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

/* Largest piece handed to one call: some systems refuse more than 2 GiB. */
enum { PIECE = 1 << 30, NEW_NAMES = 100 };

static bool write_all(int fd, const unsigned char *bytes, size_t n)
{
    while (n > 0) {
        const ssize_t done = write(fd, bytes, n < PIECE ? n : PIECE);
        if (done < 0 && errno == EINTR && keep_going()) continue;
        if (done < 0) return false;
        bytes += done;
        n -= (size_t)done;
    }
    return true;
}

static EfStatus not_written(EfContext *cx, const char *path, int error)
{
    return fail(cx, EF_E_IO, "%s: cannot be written: %s", path, strerror(error));
}

/* A terminal, a pipe, a device: nothing there to keep. */
static EfStatus write_straight(EfContext *cx, const char *path, const void *bytes, size_t n)
{
    const int fd = open(path, O_WRONLY | O_NOCTTY | O_CLOEXEC);
    if (fd < 0) return not_written(cx, path, errno);
    int error = write_all(fd, bytes, n) ? 0 : errno;
    if (close(fd) != 0 && error == 0) error = errno;
    return error ? not_written(cx, path, error) : EF_OK;
}

/* A new file beside `path`, open for writing; -1: errno says why. */
static int open_beside(const char *path, char *name, size_t room)
{
    for (int i = 0; i < NEW_NAMES; i++) {
        snprintf(name, room, "%s.%ld-%d.new", path, (long)getpid(), i);
        const int fd = open(name, O_WRONLY | O_CREAT | O_EXCL | O_CLOEXEC, 0666);
        if (fd >= 0 || errno != EEXIST) return fd;
    }
    return -1;
}

/* Writes the new file and renames it; 0 or an errno. On failure nothing is left behind. */
static int replace(const char *path, char *fresh, size_t room, const mode_t *mode, const void *bytes, size_t n)
{
    const int fd = open_beside(path, fresh, room);
    if (fd < 0) return errno;
    int error = 0;
    if (mode && fchmod(fd, *mode & 0777) != 0) error = errno;
    if (error == 0 && (!write_all(fd, bytes, n) || fsync(fd) != 0)) error = errno;
    if (close(fd) != 0 && error == 0) error = errno;
    if (error == 0 && !keep_going()) error = ECANCELED;
    if (error == 0 && rename(fresh, path) != 0) error = errno;
    if (error != 0) unlink(fresh);
    return error;
}

EfStatus file_replace(EfContext *cx, const char *path, const void *bytes, size_t n)
{
    struct stat old;
    const bool exists = stat(path, &old) == 0;
    if (exists && S_ISDIR(old.st_mode)) return not_written(cx, path, EISDIR);
    if (exists && !S_ISREG(old.st_mode)) return write_straight(cx, path, bytes, n);
    /* Through a link to the file it names, so that the link stays a link. */
    char *real = exists ? realpath(path, NULL) : NULL;
    const char *target = real ? real : path;
    const size_t room = strlen(target) + 40;
    char *fresh = core_malloc(cx, room, 1);
    EfStatus st = cx->status;
    if (fresh) {
        const int error = replace(target, fresh, room, exists ? &old.st_mode : NULL, bytes, n);
        st = error ? not_written(cx, path, error) : EF_OK;
    }
    free(fresh);
    free(real);
    return st;
}

/* Bytes of an open file; its size is known beforehand, growth meanwhile is not followed. */
static EfStatus read_all(EfContext *cx, const char *path, int fd, unsigned char **bytes, size_t *n)
{
    struct stat is;
    if (fstat(fd, &is) != 0) return fail(cx, EF_E_IO, "%s: cannot be read: %s", path, strerror(errno));
    if (!S_ISREG(is.st_mode)) return fail(cx, EF_E_IO, "%s: cannot be read: it is not a file", path);
    ALLOC(cx, tmp, *bytes, is.st_size);
    *n = 0;
    while (*n < (size_t)is.st_size) {
        const size_t left = (size_t)is.st_size - *n;
        const ssize_t got = read(fd, *bytes + *n, left < PIECE ? left : PIECE);
        if (got < 0 && errno == EINTR && keep_going()) continue;
        if (got < 0) return fail(cx, EF_E_IO, "%s: cannot be read: %s", path, strerror(errno));
        if (got == 0) break;
        *n += (size_t)got;
    }
    return EF_OK;
}

EfStatus file_read(EfContext *cx, const char *path, unsigned char **bytes, size_t *n)
{
    const int fd = open(path, O_RDONLY | O_NOCTTY | O_NONBLOCK | O_CLOEXEC);
    if (fd < 0) return fail(cx, EF_E_IO, "%s: cannot be read: %s", path, strerror(errno));
    const EfStatus st = read_all(cx, path, fd, bytes, n);
    close(fd);
    return st;
}
