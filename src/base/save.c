/* Files read whole, and files saved whole or not at all. */
#define _POSIX_C_SOURCE 200809L
#include "save.h"

#include <errno.h>
#include <fcntl.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

static sct_where file_place(const char *path)
{
    return (sct_where){.file = path};
}

sct_status sct_read_file(const char *path, size_t most, char **bytes, size_t *size, sct_issues *issues)
{
    *bytes = NULL;
    *size = 0;
    const int from_stdin = strcmp(path, "-") == 0;
    const sct_where where = file_place(from_stdin ? "<stdin>" : path);
    const int fd = from_stdin ? STDIN_FILENO : open(path, O_RDONLY | O_CLOEXEC);
    struct stat about;
    if (fd < 0 || fstat(fd, &about) != 0) {
        sct_issue_add(issues, SCT_ERROR, where, "cannot be opened: %s", strerror(errno));
        if (fd > STDIN_FILENO) close(fd);
        return SCT_CANNOT_READ;
    }
    sct_status status = SCT_OK;
    size_t room = 65536, n = 0;
    char *data = malloc(room);
    if (data == NULL) status = SCT_NO_MEMORY;
    while (status == SCT_OK) {
        if (n + 1 == room) {
            char *more = realloc(data, 2 * room);
            if (more == NULL) { status = SCT_NO_MEMORY; break; }
            data = more;
            room *= 2;
        }
        const ssize_t got = read(fd, data + n, room - 1 - n);
        if (got < 0 && errno == EINTR) continue;
        if (got < 0) {
            sct_issue_add(issues, SCT_ERROR, where, "cannot be read: %s", strerror(errno));
            status = SCT_CANNOT_READ;
        }
        if (got <= 0) break;
        n += (size_t)got;
        if (n > most) {
            sct_issue_add(issues, SCT_ERROR, where, "the file is larger than %zu bytes, the most that is read", most);
            status = SCT_TOO_LARGE;
        }
    }
    if (!from_stdin) close(fd);
    if (status != SCT_OK) {
        free(data);
        return status;
    }
    data[n] = '\0';
    *bytes = data;
    *size = n;
    return SCT_OK;
}

static int write_all(int fd, const char *text, size_t size)
{
    while (size > 0) {
        const ssize_t put = write(fd, text, size);
        if (put < 0 && errno == EINTR) continue;
        if (put <= 0) return -1;
        text += put;
        size -= (size_t)put;
    }
    return 0;
}

static sct_status save_fault(sct_issues *issues, const char *path, const char *what)
{
    sct_issue_add(issues, SCT_ERROR, file_place(path), "%s: %s", what, strerror(errno));
    return SCT_CANNOT_WRITE;
}

sct_status sct_save(const char *path, const char *text, size_t size, bool force, sct_issues *issues)
{
    struct stat about;
    if (!force && lstat(path, &about) == 0) {
        sct_issue_add(issues, SCT_ERROR, file_place(path), "exists already; --force replaces it");
        return SCT_CANNOT_WRITE;
    }
    const size_t room = strlen(path) + 32;
    char *beside = malloc(room);
    if (beside == NULL) return SCT_NO_MEMORY;
    snprintf(beside, room, "%s.%ld.part", path, (long)getpid());
    const int fd = open(beside, O_WRONLY | O_CREAT | O_EXCL | O_CLOEXEC, 0666);
    sct_status status = SCT_OK;
    if (fd < 0) {
        status = save_fault(issues, path, "cannot be created");
    } else {
        if (write_all(fd, text, size) != 0 || fsync(fd) != 0) status = save_fault(issues, path, "cannot be written");
        if (close(fd) != 0 && status == SCT_OK) status = save_fault(issues, path, "cannot be closed");
        if (status == SCT_OK && rename(beside, path) != 0) status = save_fault(issues, path, "cannot be put in place");
        if (status != SCT_OK) unlink(beside);
    }
    free(beside);
    return status;
}
