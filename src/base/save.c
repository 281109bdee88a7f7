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
            if (more == NULL) {
                status = SCT_NO_MEMORY;
                break;
            }
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
        if (put == 0) errno = EIO;
        if (put <= 0) return -1;
        text += put;
        size -= (size_t)put;
    }
    return 0;
}

/* Bytes on the disk; a file system that cannot be asked (EINVAL) is no fault. */
static int flush(int fd)
{
    int done;
    while ((done = fsync(fd)) != 0 && errno == EINTR) continue;
    return done == 0 || errno == EINVAL ? 0 : -1;
}

static sct_status save_fault(sct_issues *issues, const char *path, const char *what)
{
    sct_issue_add(issues, SCT_ERROR, file_place(path), "%s: %s", what, strerror(errno));
    return SCT_CANNOT_WRITE;
}

static sct_status exists_already(sct_issues *issues, const char *path)
{
    sct_issue_add(issues, SCT_ERROR, file_place(path), "exists already; --force replaces it");
    return SCT_CANNOT_WRITE;
}

/* One file on its way. Both names are in the folder of the target and short, whatever the target is called. */
typedef struct saving {
    char *fresh, *before; /* the new bytes; a second name of what is replaced */
    bool has_fresh, has_before, placed, replaces;
} saving;

enum { MOST_TRIES = 1000, NAME_ROOM = 64 };

/* Names the next try of a file beside `path`; left-overs of killed runs keep theirs. */
static void name_beside(char *name, const char *path, int try, const char *ending)
{
    const char *slash = strrchr(path, '/');
    const int folder = slash != NULL ? (int)(slash + 1 - path) : 0;
    snprintf(name, (size_t)folder + NAME_ROOM, "%.*sscantling.%ld.%d.%s", folder, path, (long)getpid(), try, ending);
}

static sct_status write_fresh(saving *s, const sct_file *file, sct_issues *issues)
{
    int fd = -1;
    for (int try = 0; try < MOST_TRIES; try++) {
        name_beside(s->fresh, file->path, try, "part");
        fd = open(s->fresh, O_WRONLY | O_CREAT | O_EXCL | O_CLOEXEC, 0666);
        if (fd >= 0 || errno != EEXIST) break;
    }
    if (fd < 0) return save_fault(issues, file->path, "cannot be created");
    s->has_fresh = true;
    sct_status status = SCT_OK;
    if (write_all(fd, file->text, file->size) != 0 || flush(fd) != 0)
        status = save_fault(issues, file->path, "cannot be written");
    if (close(fd) != 0 && errno != EINTR && status == SCT_OK)
        status = save_fault(issues, file->path, "cannot be closed");
    return status;
}

/* Gives what is to be replaced a second name, so that it can come back. Some file systems have no second names: then
 * it cannot. */
static void keep_before(saving *s, const char *path)
{
    for (int try = 0; try < MOST_TRIES; try++) {
        name_beside(s->before, path, try, "old");
        s->has_before = link(path, s->before) == 0;
        if (s->has_before || errno != EEXIST) return;
    }
}

static sct_status place(saving *s, const char *path, bool force, sct_issues *issues)
{
    struct stat about;
    s->replaces = lstat(path, &about) == 0;
    if (s->replaces && !force) return exists_already(issues, path);
    if (s->replaces) keep_before(s, path);
    /* a second name is refused where a file has appeared meanwhile; a new name would replace it */
    if (!force && link(s->fresh, path) == 0) {
        s->placed = true;
        return SCT_OK;
    }
    if (!force && errno == EEXIST) return exists_already(issues, path);
    if (rename(s->fresh, path) != 0) return save_fault(issues, path, "cannot be put in place");
    s->has_fresh = false;
    s->placed = true;
    return SCT_OK;
}

static void take_back(saving *s, const char *path, sct_issues *issues)
{
    if (!s->placed) return;
    if (!s->replaces) {
        unlink(path);
    } else if (s->has_before && rename(s->before, path) == 0) {
        s->has_before = false;
    } else if (s->has_before) {
        save_fault(issues, path, "the file as it was before cannot be put back");
        s->has_before = false; /* it stays under its second name */
    } else {
        sct_issue_add(issues, SCT_WARNING, file_place(path), "is replaced already, though other files are not");
    }
}

static sct_status save_set(saving s[], const sct_file files[], int n, bool force, sct_issues *issues)
{
    struct stat about;
    sct_status status = SCT_OK;
    for (int i = 0; i < n && status == SCT_OK && !force; i++)
        if (lstat(files[i].path, &about) == 0) status = exists_already(issues, files[i].path);
    for (int i = 0; i < n && status == SCT_OK; i++) status = write_fresh(&s[i], &files[i], issues);
    for (int i = 0; i < n && status == SCT_OK; i++) status = place(&s[i], files[i].path, force, issues);
    for (int i = n - 1; i >= 0 && status != SCT_OK; i--) take_back(&s[i], files[i].path, issues);
    for (int i = 0; i < n; i++) {
        if (s[i].has_fresh) unlink(s[i].fresh);
        if (s[i].has_before) unlink(s[i].before);
    }
    return status;
}

sct_status sct_save_set(const sct_file files[], int n, bool force, sct_issues *issues)
{
    saving *s = calloc((size_t)n + 1, sizeof *s);
    bool has_memory = s != NULL;
    for (int i = 0; i < n && has_memory; i++) {
        const size_t room = strlen(files[i].path) + NAME_ROOM;
        s[i].fresh = malloc(room);
        s[i].before = malloc(room);
        has_memory = s[i].fresh != NULL && s[i].before != NULL;
    }
    const sct_status status = has_memory ? save_set(s, files, n, force, issues) : SCT_NO_MEMORY;
    for (int i = 0; i < n && s != NULL; i++) {
        free(s[i].fresh);
        free(s[i].before);
    }
    free(s);
    return status;
}

sct_status sct_save(const char *path, const char *text, size_t size, bool force, sct_issues *issues)
{
    const sct_file file = {path, text, size};
    return sct_save_set(&file, 1, force, issues);
}
