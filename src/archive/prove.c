#include "archive/manifest.h"
#include "archive/seal.h"
#include "archive/seal_chain.h"

#include <string.h>
#include <sys/stat.h>

static void differ(struct proof *proof, struct arena *arena, enum proof_kind kind, const char *name,
                   unsigned number)
{
    proof->differences = arena_grow(arena, proof->differences, proof->count, &proof->capacity,
                                    sizeof *proof->differences);
    proof->differences[proof->count++] =
        (struct proof_difference){kind, arena_copy(arena, name), number};
}

static void check_files(const char *folder, const struct manifest *manifest, struct proof *proof,
                        struct arena *arena)
{
    for (size_t i = 0; i < manifest->count; i++) {
        char hash[HASH_TEXT_BYTES];
        const struct manifest_line *line = &manifest->lines[i];
        if (!manifest_hash_file(folder, line->name, hash))
            differ(proof, arena, PROOF_FILE_LOST, line->name, 0);
        else if (strcmp(hash, line->hash) != 0)
            differ(proof, arena, PROOF_FILE_CHANGED, line->name, 0);
        else
            proof->files++;
    }
}

static bool is_expected(const struct manifest *manifest, const char *name)
{
    static const char *const outside[] = {MANIFEST_NAME, SEAL_NAME, SIGNATURE_NAME};
    for (size_t i = 0; i < sizeof outside / sizeof *outside; i++)
        if (strcmp(name, outside[i]) == 0)
            return true;
    for (size_t i = 0; i < manifest->count; i++)
        if (strcmp(name, manifest->lines[i].name) == 0)
            return true;
    return false;
}

/* Files that the manifest does not know, in `folder`/`below` ("" or "pictures/"); a sub-folder of
   one level is all that a copy has, anything deeper was added. */
static void find_added(const char *folder, const char *below, const struct manifest *manifest,
                       struct proof *proof, struct arena *arena)
{
    struct folder_names found;
    if (folder_list(arena_print(arena, "%s/%s", folder, below), arena, &found) != FILE_OK)
        differ(proof, arena, PROOF_FILE_LOST, *below ? below : ".", 0);
    for (size_t i = 0; i < found.count; i++) {
        const char *name = arena_print(arena, "%s%s", below, found.names[i]);
        struct stat about;
        bool is_folder =
            lstat(arena_print(arena, "%s/%s", folder, name), &about) == 0 && S_ISDIR(about.st_mode);
        if (is_folder && !*below)
            find_added(folder, arena_print(arena, "%s/", name), manifest, proof, arena);
        else if (!is_expected(manifest, name))
            differ(proof, arena, PROOF_FILE_ADDED, name, 0);
    }
}

/* Every record prints the hash of findings.json, in groups of eight digits in Markdown. */
static bool holds_fingerprint(const char *folder, const char *name, const char *hash,
                              struct arena *arena)
{
    struct buffer contents = {0};
    bool found = false;
    if (file_read(arena_print(arena, "%s/%s", folder, name), MANIFEST_FILE_BYTES_MAX, &contents) ==
        FILE_OK) {
        struct buffer grouped = {0};
        for (size_t i = 0; i < HASH_TEXT_BYTES - 1; i += 8)
            buffer_print(&grouped, "%s%.8s", i ? " " : "", hash + i);
        const char *text = buffer_string(&contents);
        found = strstr(text, buffer_string(&grouped)) || strstr(text, hash);
        buffer_release(&grouped);
    }
    buffer_release(&contents);
    return found;
}

static void check_fingerprint(const char *folder, const struct manifest *manifest,
                              struct proof *proof, struct arena *arena)
{
    char hash[HASH_TEXT_BYTES];
    if (!manifest_hash_file(folder, "findings.json", hash))
        return; /* told as lost when the manifest has it */
    for (size_t i = 0; i < manifest->count; i++) {
        const char *name = manifest->lines[i].name, *ending = strrchr(name, '.');
        bool is_record = ending && strcmp(ending, ".md") == 0;
        if (is_record && !holds_fingerprint(folder, name, hash, arena))
            differ(proof, arena, PROOF_FINGERPRINT, name, 0);
    }
}

/* false: it is not sealed. A line that cannot be read is an empty one. */
static bool read_seal_line(const char *folder, struct arena *arena, const char **line)
{
    struct buffer contents = {0};
    enum file_status status =
        file_read(arena_print(arena, "%s/%s", folder, SEAL_NAME), 4096, &contents);
    char *text = arena_text(arena, contents.data, contents.length);
    text[strcspn(text, "\n")] = '\0';
    *line = status == FILE_MISSING ? NULL : text;
    buffer_release(&contents);
    return status != FILE_MISSING;
}

static void check_chain(const char *folder, const struct seal_line *own, struct proof *proof,
                        struct arena *arena)
{
    struct seal_chain chain;
    const char *path = arena_print(arena, "%s/../../seals.txt", folder);
    struct stat about;
    if (stat(path, &about) != 0)
        return;
    bool whole = seal_chain_read(path, arena, &chain);
    proof->chain_checked = true;
    proof->chain_lines = (unsigned)chain.count;
    if (!whole)
        differ(proof, arena, PROOF_CHAIN_LINE, "seals.txt", chain.broken_at);
    if (own->number > chain.count || strcmp(chain.lines[own->number - 1], proof->seal_line) != 0)
        differ(proof, arena, PROOF_CHAIN_MISSING, "seals.txt", own->number);
}

static void check_seal(const char *folder, const struct manifest *manifest, struct proof *proof,
                       struct arena *arena)
{
    if (!read_seal_line(folder, arena, &proof->seal_line))
        return;
    struct seal_line line;
    if (!seal_line_read(proof->seal_line, arena, &line)) {
        differ(proof, arena, PROOF_SEAL_UNREADABLE, SEAL_NAME, 0);
        return;
    }
    if (strcmp(line.manifest_hash, manifest->hash) != 0)
        differ(proof, arena, PROOF_SEAL_MANIFEST, SEAL_NAME, line.number);
    check_chain(folder, &line, proof, arena);
}

struct proof prove(const char *folder, struct arena *arena)
{
    struct proof proof = {0};
    struct manifest manifest;
    if (!manifest_read(folder, arena, &manifest)) {
        differ(&proof, arena, PROOF_MANIFEST_MISSING, MANIFEST_NAME, 0);
        return proof;
    }
    if (manifest.unreadable)
        differ(&proof, arena, PROOF_MANIFEST_UNREADABLE, manifest.unreadable, 0);
    check_files(folder, &manifest, &proof, arena);
    find_added(folder, "", &manifest, &proof, arena);
    check_fingerprint(folder, &manifest, &proof, arena);
    check_seal(folder, &manifest, &proof, arena);
    return proof;
}
