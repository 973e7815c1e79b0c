#define _POSIX_C_SOURCE 200809L
#include "run/library.h"

#include <stdbool.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

enum { PATH_BYTES = 4096 };

static bool is_folder(const char *path)
{
    struct stat about;
    return stat(path, &about) == 0 && S_ISDIR(about.st_mode);
}

/* The running program's folder into `folder`; false when the system does not tell. */
static bool program_folder(char folder[PATH_BYTES])
{
    const ssize_t length = readlink("/proc/self/exe", folder, PATH_BYTES - 1);
    if (length <= 0) {
        return false;
    }
    folder[length] = '\0';
    char *slash = strrchr(folder, '/');
    if (slash) {
        *slash = '\0';
    }
    return slash != NULL;
}

const char *library_find(const char *asked, const char *named, struct arena *arena)
{
    static const char *const places[] = {"../share/tarewright/library", "../decks/library", "../../decks/library"};
    if (asked || named) {
        return asked ? asked : named;
    }
    char folder[PATH_BYTES];
    for (size_t i = 0; program_folder(folder) && i < sizeof places / sizeof *places; i++) {
        const char *place = arena_format(arena, "%s/%s", folder, places[i]);
        if (is_folder(place)) {
            return place;
        }
    }
    return NULL;
}
