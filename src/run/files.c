#define _POSIX_C_SOURCE 200809L
#include "base/file.h"
#include "run/run_internal.h"

#include <errno.h>
#include <fcntl.h>
#include <setjmp.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

/* A device or a pipe cannot be replaced by a rename, so it is written to as it stands. */
static bool write_through(const char *path, const char *bytes, size_t length)
{
    const int file = open(path, O_WRONLY | O_CLOEXEC);
    if (file < 0) {
        return false;
    }
    bool is_written = true;
    for (size_t done = 0; done < length && is_written;) {
        const ssize_t wrote = write(file, bytes + done, length - done);
        is_written = wrote >= 0 || errno == EINTR;
        done += wrote > 0 ? (size_t)wrote : 0;
    }
    const int reason = errno;
    close(file);
    errno = reason;
    return is_written;
}

static bool write_one(struct arena *arena, const struct run_file *file)
{
    struct stat about;
    const char *bytes = file->content.bytes ? file->content.bytes : "";
    if (stat(file->path, &about) == 0 && !S_ISREG(about.st_mode)) {
        if (S_ISDIR(about.st_mode)) {
            errno = EISDIR;
            return false;
        }
        return write_through(file->path, bytes, file->content.length);
    }
    return file_write(arena, file->path, bytes, file->content.length);
}

static bool is_same_file(const char *path, const char *other)
{
    struct stat about, about_other;
    if (strcmp(path, other) == 0) {
        return true;
    }
    return stat(path, &about) == 0 && stat(other, &about_other) == 0 && about.st_dev == about_other.st_dev &&
           about.st_ino == about_other.st_ino && S_ISREG(about.st_mode);
}

static void complain(struct run *run, enum code code, const char *path, const char *words)
{
    text_format(&run->diagnostics, "%s: error: %s [%s]\n", path, words, code_row(code)->name);
    run->status = RUN_NO_FILE;
}

/* True when the path is a file the run has read: the deck or one it uses. */
static bool is_read(const struct run *run, const char *path)
{
    for (size_t i = 0; run->deck && i < run->deck->file_count; i++) {
        if (is_same_file(path, run->deck->files[i]->path)) {
            return true;
        }
    }
    return false;
}

/* No result may replace what it came from, or another result. */
static bool is_free_to_write(struct run *run, size_t at)
{
    const char *path = run->files.items[at].path;
    if (is_read(run, path)) {
        complain(run, CODE_E416, path, "a result would be written over a deck that was read");
        return false;
    }
    for (size_t i = 0; i < at; i++) {
        if (is_same_file(path, run->files.items[i].path)) {
            complain(run, CODE_E412, path, "two results are to be written to this file");
            return false;
        }
    }
    return true;
}

static void write_all(struct run *run)
{
    bool is_free = true;
    for (size_t i = 0; i < run->files.count; i++) {
        is_free = is_free_to_write(run, i) && is_free;
    }
    for (size_t i = 0; is_free && i < run->files.count; i++) {
        if (!write_one(run->arena, &run->files.items[i])) {
            complain(run, CODE_E410, run->files.items[i].path,
                     arena_format(run->arena, "could not be written: %s", strerror(errno)));
        }
    }
}

void run_write(struct run *run)
{
    jmp_buf exhausted;
    if (setjmp(exhausted) == 0) {
        arena_on_exhaustion(run->arena, &exhausted);
        write_all(run);
    } else {
        run->status = RUN_NO_FILE;
    }
    arena_on_exhaustion(run->arena, NULL);
}
