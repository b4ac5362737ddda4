/* lines: the first look at a file, and its lines one by one. */
#include "intake/lines.h"

#include <assert.h>
#include <errno.h>
#include <string.h>
#include <sys/stat.h>

#include "base/poison.h"

enum { CHUNK = 1 << 16 };
static const size_t buffer_bytes = LINE_BYTES_MAX + CHUNK;

static enum status cannot_read(const char *path, int error, struct fault *f)
{
    const struct place where = {.file = path};
    if (error == ENOENT || error == ENOTDIR)
        return fault_at(f, &where, "correct the name", "there is no such file");
    if (error == EISDIR)
        return fault_at(f, &where, "name the files in it", "it is a folder, not a file");
    return fault_at(f, &where, "see to it that you may read it, and that its disk is sound",
                    "the file cannot be read (%s)", strerror(error));
}

enum status file_open(const char *path, FILE **out, int64_t *bytes, struct fault *f)
{
    const struct place where = {.file = path};
    struct stat info;
    *out = NULL;
    /* Asked before opening: to open a pipe would wait for its other end. */
    if (stat(path, &info) != 0)
        return cannot_read(path, errno, f);
    if (S_ISDIR(info.st_mode))
        return cannot_read(path, EISDIR, f);
    if (!S_ISREG(info.st_mode))
        return fault_at(f, &where, "save it as a file first", "it is not an ordinary file");
    if (info.st_size == 0)
        return fault_at(f, &where, "export it again", "the file is empty");
    if (info.st_size > FILE_BYTES_MAX)
        return fault_at(f, &where, "split it", "the file is larger than 1 GB");
    *out = fopen(path, "rb");
    if (*out == NULL)
        return cannot_read(path, errno, f);
    *bytes = info.st_size;
    return OK;
}

/* ---- the first look ---- */

static bool begins(const char *s, size_t length, const char *with, size_t count)
{
    return length >= count && memcmp(s, with, count) == 0;
}

static enum status look_at_beginning(struct lines *l, const char *s, size_t length, struct fault *f)
{
    const struct place where = {.file = l->path};
    if (begins(s, length, "\xff\xfe", 2) || begins(s, length, "\xfe\xff", 2))
        return fault_at(f, &where, "save it as UTF-8", "the file is UTF-16");
    if (begins(s, length, "PK\x03\x04", 4) || begins(s, length, "\xd0\xcf\x11\xe0", 4))
        return fault_at(f, &where, "save each sheet as CSV", "the file is a workbook, not CSV");
    l->look.mark = begins(s, length, "\xef\xbb\xbf", 3);
    return OK;
}

static enum status look_at_bytes(struct lines *l, const char *s, size_t length, struct fault *f)
{
    struct look *k = &l->look;
    unsigned char high = 0;
    unsigned char odd = 0;
    for (size_t i = 0; i < length; i++) {
        unsigned char c = (unsigned char)s[i];
        high |= c;
        odd |= (unsigned char)((c < ' ' && c != '\t' && c != '\n' && c != '\r') || c == 0x7f);
    }
    if (odd != 0 && memchr(s, '\0', length) != NULL)
        return fault_at(f, &(struct place){.file = l->path}, "export it again as CSV in UTF-8",
                        "the file has NUL bytes: it is no text");
    k->ascii = k->ascii && high < 0x80;
    k->controls = k->controls || odd != 0;
    k->quotes = k->quotes || memchr(s, '"', length) != NULL;
    k->feeds = k->feeds || memchr(s, '\n', length) != NULL;
    k->returns = k->returns || memchr(s, '\r', length) != NULL;
    return OK;
}

/* How many bytes there are before a character whose end lies in the next chunk. */
static size_t whole_characters(const char *s, size_t length)
{
    for (size_t back = 1; back <= 3 && back <= length; back++) {
        unsigned char c = (unsigned char)s[length - back];
        if (c < 0x80)
            return length;
        if (c >= 0xc0) {
            size_t needs = c >= 0xf0 ? 4 : c >= 0xe0 ? 3 : 2;
            return back < needs ? length - back : length;
        }
    }
    return length;
}

static enum status look(struct lines *l, struct fault *f)
{
    struct look *k = &l->look;
    size_t carried = 0; /* bytes of a character cut in two */
    *k = (struct look){.ascii = true, .utf8 = true};
    for (;;) {
        char *fresh = l->buffer + carried;
        size_t got = fread(fresh, 1, CHUNK, l->stream);
        if (got == 0)
            break;
        if (k->bytes == 0 && look_at_beginning(l, fresh, got, f) != OK)
            return FAULT;
        if (look_at_bytes(l, fresh, got, f) != OK)
            return FAULT;
        k->bytes += (int64_t)got;
        if (k->ascii)
            continue;
        size_t length = carried + got;
        size_t whole = whole_characters(l->buffer, length);
        k->utf8 = k->utf8 && text_is_utf8(l->buffer, whole);
        carried = length - whole;
        memmove(l->buffer, l->buffer + whole, carried);
    }
    if (ferror(l->stream))
        return cannot_read(l->path, errno, f);
    k->utf8 = k->utf8 && carried == 0;
    l->encoding = k->utf8 || k->mark ? ENCODING_UTF8 : ENCODING_WINDOWS_1252;
    return lines_rewind(l, f);
}

/* ---- opening ---- */

static void begin(struct lines *l, struct arena *a, const char *path)
{
    *l = (struct lines){.path = path};
    text_init(&l->decoded, 3 * LINE_BYTES_MAX + 1);
    l->buffer = arena_alloc(a, buffer_bytes + 1);
}

enum status lines_open(struct lines *l, struct arena *a, const char *path, struct fault *f)
{
    int64_t bytes = 0;
    begin(l, a, path);
    if (file_open(path, &l->stream, &bytes, f) != OK)
        return FAULT;
    return look(l, f);
}

enum status lines_open_bytes(struct lines *l, struct arena *a, const char *name, const void *bytes,
                             size_t length, struct fault *f)
{
    begin(l, a, name);
    /* fmemopen asks for a pointer it may write to; "r" keeps it from doing so. */
    l->stream = fmemopen(arena_bytes(a, bytes, length), length, "r");
    if (l->stream == NULL)
        return cannot_read(name, errno, f);
    return look(l, f);
}

enum status lines_open_again(struct lines *l, struct arena *a, const struct lines *known,
                             struct fault *f)
{
    int64_t bytes = 0;
    begin(l, a, known->path);
    if (file_open(known->path, &l->stream, &bytes, f) != OK)
        return FAULT;
    if (bytes != known->look.bytes)
        return fault_at(f, &(struct place){.file = l->path}, "load it again",
                        "the file changed while it was read");
    l->look = known->look;
    l->encoding = known->encoding;
    return lines_rewind(l, f);
}

void lines_close(struct lines *l)
{
    if (l->stream != NULL)
        fclose(l->stream);
    l->stream = NULL;
    text_free(&l->decoded);
}

enum status lines_rewind(struct lines *l, struct fault *f)
{
    l->start = l->end = 0;
    l->taken = 0;
    l->number = 0;
    l->at_end = false;
    if (fseek(l->stream, 0, SEEK_SET) != 0)
        return cannot_read(l->path, errno, f);
    return OK;
}

/* ---- lines ---- */

/* Moves what is left to the front and reads on behind it. */
static enum status fill(struct lines *l, struct fault *f)
{
    memmove(l->buffer, l->buffer + l->start, l->end - l->start);
    l->end -= l->start;
    l->start = 0;
    size_t got = fread(l->buffer + l->end, 1, buffer_bytes - l->end, l->stream);
    if (got == 0 && ferror(l->stream))
        return cannot_read(l->path, errno, f);
    if (l->digest != NULL)
        digest_add(l->digest, l->buffer + l->end, got);
    l->at_end = got == 0;
    if (l->taken == 0 && l->look.mark && got >= 3)
        l->start = 3;
    l->end += got;
    l->taken += (int64_t)got;
    return OK;
}

bool lines_bad(const struct lines *l, const char *s, size_t length)
{
    if (l->look.controls) {
        for (size_t i = 0; i < length; i++) {
            unsigned char c = (unsigned char)s[i];
            if ((c < ' ' && c != '\t' && c != '\r' && c != '\n') || c == 0x7f)
                return true;
        }
    }
    return !l->look.utf8 && !text_is_utf8(s, length);
}

/* Code points of the bytes 80 to 9F; 0: none. Unicode Consortium, MICSFT/WINDOWS/CP1252.TXT. By
 * hand rather than by iconv, whose tables are files that a small system may not have. */
static const uint16_t windows_1252[32] = {
    0x20ac, 0,      0x201a, 0x0192, 0x201e, 0x2026, 0x2020, 0x2021, 0x02c6, 0x2030, 0x0160,
    0x2039, 0x0152, 0,      0x017d, 0,      0,      0x2018, 0x2019, 0x201c, 0x201d, 0x2022,
    0x2013, 0x2014, 0x02dc, 0x2122, 0x0161, 0x203a, 0x0153, 0,      0x017e, 0x0178};

/* Adds a code point below 0x10000 as UTF-8. */
static void add_code(struct text *t, unsigned code)
{
    if (code < 0x800) {
        text_add_char(t, (char)(0xc0 | (code >> 6)));
    } else {
        text_add_char(t, (char)(0xe0 | (code >> 12)));
        text_add_char(t, (char)(0x80 | ((code >> 6) & 0x3f)));
    }
    text_add_char(t, (char)(0x80 | (code & 0x3f)));
}

/* False when a byte stands for nothing in Windows-1252. */
static bool decode(struct text *out, const char *s, size_t length)
{
    text_clear(out);
    for (size_t i = 0; i < length; i++) {
        unsigned char c = (unsigned char)s[i];
        unsigned code = c >= 0x80 && c <= 0x9f ? windows_1252[c - 0x80] : c;
        if (code == 0)
            return false;
        if (code < 0x80)
            text_add_char(out, (char)c);
        else
            add_code(out, code);
    }
    return true;
}

static bool has_high(const char *s, size_t length)
{
    unsigned char high = 0;
    for (size_t i = 0; i < length; i++)
        high |= (unsigned char)s[i];
    return high >= 0x80;
}

static void give(struct lines *l, char *from, size_t length, struct line *out)
{
    from[length] = '\n';
    *out = (struct line){.at = from, .length = length, .number = ++l->number};
    if (l->look.ascii && !l->look.controls)
        return;
    if (l->encoding == ENCODING_WINDOWS_1252 && has_high(from, length)) {
        out->bad =
            !decode(&l->decoded, from, length) || lines_bad(l, l->decoded.at, l->decoded.length);
        if (out->bad)
            return;
        text_add_char(&l->decoded, '\n');
        out->at = l->decoded.at;
        out->length = l->decoded.length - 1;
        return;
    }
    out->bad = lines_bad(l, from, length);
}

enum status lines_next(struct lines *l, struct line *out, struct fault *f)
{
    /* Where lines end in CR alone there is no LF to part them. */
    char terminator = l->look.returns && !l->look.feeds ? '\r' : '\n';
    *out = (struct line){.at = NULL};
    for (;;) {
        char *from = l->buffer + l->start;
        size_t have = l->end - l->start;
        char *stop = memchr(from, terminator, have);
        size_t length = stop != NULL ? (size_t)(stop - from) : have;
        if (length > LINE_BYTES_MAX)
            return fault_at(f, &(struct place){.file = l->path, .line = l->number + 1},
                            "see whether it is CSV at all", "the line is longer than 1 MB");
        if (stop == NULL && !l->at_end) {
            if (fill(l, f) != OK)
                return FAULT;
            continue;
        }
        if (stop == NULL && have == 0)
            return OK;
        l->start += length + (stop != NULL);
        if (stop != NULL && terminator == '\n' && length > 0 && from[length - 1] == '\r')
            length--;
        give(l, from, length, out);
        return OK;
    }
}
