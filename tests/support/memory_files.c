#include "support/memory_files.h"

#include <errno.h>
#include <string.h>

bool memory_files_read(void *context, struct arena *arena, const char *path, char **text, size_t *length)
{
    struct memory_files *all = context;
    for (size_t i = 0; i < all->count; i++) {
        const struct memory_file *file = &all->files[i];
        if (strcmp(file->path, path) == 0 && file->text) {
            *length = strlen(file->text);
            *text = arena_copy_text(arena, file->text, *length);
            all->reads++;
            return true;
        }
        if (strcmp(file->path, path) == 0) {
            errno = file->reason;
            return false;
        }
    }
    errno = ENOENT;
    return false;
}
