#define _POSIX_C_SOURCE 200809L
#include "base/file.h"

#include <errno.h>
#include <fcntl.h>
#include <nettle/sha2.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

enum { LARGEST_FILE = 64 * 1024 * 1024 };

/* Reads until `capacity` bytes or the end of the file; the number read, or -1 with errno set. */
static ssize_t read_up_to(int file, char *bytes, size_t capacity)
{
    size_t filled = 0;
    while (filled < capacity) {
        const ssize_t got = read(file, bytes + filled, capacity - filled);
        if (got < 0 && errno == EINTR) {
            continue;
        }
        if (got < 0) {
            return -1;
        }
        if (got == 0) {
            break;
        }
        filled += (size_t)got;
    }
    return (ssize_t)filled;
}

static bool read_open_file(struct arena *arena, int file, char **text, size_t *length)
{
    struct stat about;
    if (fstat(file, &about) != 0) {
        return false;
    }
    if (!S_ISREG(about.st_mode)) {
        errno = S_ISDIR(about.st_mode) ? EISDIR : EINVAL;
        return false;
    }
    if (about.st_size > LARGEST_FILE) {
        errno = EFBIG;
        return false;
    }
    char *bytes = arena_try(arena, (size_t)about.st_size + 1, 1);
    if (!bytes) {
        errno = ENOMEM;
        return false;
    }
    const ssize_t got = read_up_to(file, bytes, (size_t)about.st_size);
    if (got < 0) {
        return false;
    }
    bytes[got] = '\0';
    *text = bytes;
    *length = (size_t)got;
    return true;
}

bool file_read(struct arena *arena, const char *path, char **text, size_t *length)
{
    const int file = open(path, O_RDONLY | O_CLOEXEC | O_NONBLOCK);
    if (file < 0) {
        return false;
    }
    const bool is_read = read_open_file(arena, file, text, length);
    const int reason = errno;
    close(file);
    errno = reason;
    return is_read;
}

static bool write_all(int file, const char *bytes, size_t length)
{
    size_t done = 0;
    while (done < length) {
        const ssize_t wrote = write(file, bytes + done, length - done);
        if (wrote < 0 && errno != EINTR) {
            return false;
        }
        done += wrote > 0 ? (size_t)wrote : 0;
    }
    return fsync(file) == 0 || errno == EINVAL;
}

bool file_write(struct arena *arena, const char *path, const char *text, size_t length)
{
    char *beside = arena_format(arena, "%s.XXXXXX", path);
    const int file = mkstemp(beside);
    if (file < 0) {
        return false;
    }
    bool is_written = fchmod(file, 0644) == 0 && write_all(file, text, length);
    is_written = close(file) == 0 && is_written;
    is_written = is_written && rename(beside, path) == 0;
    if (!is_written) {
        const int reason = errno;
        unlink(beside);
        errno = reason;
    }
    return is_written;
}

char *file_sha256(struct arena *arena, const char *text, size_t length)
{
    struct sha256_ctx state;
    uint8_t digest[SHA256_DIGEST_SIZE];
    sha256_init(&state);
    sha256_update(&state, length, (const uint8_t *)text);
    sha256_digest(&state, sizeof digest, digest);
    char *hexadecimal = arena_alloc(arena, 2 * sizeof digest + 1, 1);
    for (size_t i = 0; i < sizeof digest; i++) {
        snprintf(hexadecimal + 2 * i, 3, "%02x", digest[i]);
    }
    return hexadecimal;
}
