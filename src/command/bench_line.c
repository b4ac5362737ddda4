/* Lines from a person at a terminal, edited by libedit, or from a pipe as they come. Signals that
 * end the work are blocked except while it waits for a key, so nothing is ever cut off half done,
 * and the terminal is put back before anything is said. */
#include "command/bench.h"

#include <errno.h>
#include <histedit.h>
#include <signal.h>
#include <string.h>
#include <sys/select.h>
#include <unistd.h>

#include "base/poison.h"

enum { LINE_MOST = 4096, SHOWN_MOST = 8 * LINE_MOST, REMEMBERED = 100 };

static const int ending[] = {SIGINT, SIGHUP, SIGTERM, SIGQUIT};
static const int drawing[] = {SIGCONT, SIGWINCH};
enum { ENDINGS = NELEM(ending), DRAWINGS = NELEM(drawing), SIGNALS = ENDINGS + DRAWINGS };

/* What the handler saw. A handler is given nothing to write to, so this one place must be known. */
enum { CAUGHT_ENDING, CAUGHT_CONT, CAUGHT_WINCH, CAUGHT };
static volatile sig_atomic_t *caught(void)
{
    static volatile sig_atomic_t flags[CAUGHT];
    return flags;
}

static void on_signal(int number)
{
    if (number == SIGCONT)
        caught()[CAUGHT_CONT] = 1;
    else if (number == SIGWINCH)
        caught()[CAUGHT_WINCH] = 1;
    else
        caught()[CAUGHT_ENDING] = 1;
}

struct bench_line {
    struct arena *arena;
    FILE *out;
    EditLine *edit; /* NULL: no terminal */
    History *history;
    const char *prompt;
    const char *const *words;
    size_t count;
    bool over; /* the input is at its end */
    struct sigaction before[SIGNALS];
    sigset_t mask;
};

/* ---- waiting ---- */

static void redraw(struct bench_line *l)
{
    if (caught()[CAUGHT_WINCH] && l->edit)
        el_resize(l->edit);
    if (caught()[CAUGHT_CONT] && l->edit) {
        el_set(l->edit, EL_PREP_TERM, 1);
        el_set(l->edit, EL_REFRESH);
    }
    caught()[CAUGHT_WINCH] = caught()[CAUGHT_CONT] = 0;
}

/* One byte: 1; the end, or a signal that ends the work: 0. */
static int next_byte(struct bench_line *l, unsigned char *byte)
{
    while (!caught()[CAUGHT_ENDING]) {
        fd_set in;
        FD_ZERO(&in);
        FD_SET(STDIN_FILENO, &in);
        int ready = pselect(STDIN_FILENO + 1, &in, NULL, NULL, NULL, &l->mask);
        if (ready < 0 && errno != EINTR)
            break;
        redraw(l);
        if (ready <= 0)
            continue;
        ssize_t got = read(STDIN_FILENO, byte, 1);
        if (got == 1)
            return 1;
        if (got == 0 || (errno != EINTR && errno != EAGAIN))
            break;
    }
    l->over = true;
    return 0;
}

/* ---- with editing ---- */

/* UTF-8 into one character; what is no UTF-8 comes as U+FFFD and is refused with the line. */
static int next_character(EditLine *edit, wchar_t *out)
{
    struct bench_line *l = NULL;
    unsigned char byte = 0;
    el_get(edit, EL_CLIENTDATA, &l);
    if (next_byte(l, &byte) == 0)
        return 0;
    if (byte < 0x80) {
        *out = byte;
        return 1;
    }
    int more = byte >= 0xf0 ? 3 : byte >= 0xe0 ? 2 : byte >= 0xc0 ? 1 : 0;
    wchar_t c = more == 3 ? byte & 0x07 : more == 2 ? byte & 0x0f : byte & 0x1f;
    for (int i = 0; i < more; i++) {
        if (next_byte(l, &byte) == 0)
            return 0;
        c = (wchar_t)((c << 6) | (byte & 0x3f));
    }
    *out = more == 0 ? 0xfffd : c;
    return 1;
}

static char *prompt_of(EditLine *edit)
{
    struct bench_line *l = NULL;
    el_get(edit, EL_CLIENTDATA, &l);
    return (char *)(uintptr_t)l->prompt; /* libedit only reads it */
}

/* TAB: as far as all words agree that begin as the line does. */
static unsigned char complete(EditLine *edit, int key)
{
    struct bench_line *l = NULL;
    const LineInfo *line = el_line(edit);
    const char *agreed = NULL;
    size_t typed = (size_t)(line->cursor - line->buffer), length = 0;
    (void)key;
    el_get(edit, EL_CLIENTDATA, &l);
    for (size_t i = 0; i < l->count; i++) {
        if (strncmp(l->words[i], line->buffer, typed) != 0)
            continue;
        size_t same = 0;
        while (agreed && same < length && l->words[i][same] == agreed[same])
            same++;
        length = agreed ? same : strlen(l->words[i]);
        agreed = l->words[i];
    }
    if (!agreed || length <= typed)
        return CC_ERROR;
    return el_insertstr(edit, arena_bytes(l->arena, agreed + typed, length - typed)) == 0
               ? CC_REFRESH
               : CC_ERROR;
}

static void add_utf8(struct text *t, wchar_t wide)
{
    uint32_t c = (uint32_t)wide;
    if (c < 0x80) {
        text_add_char(t, (char)c);
    } else if (c < 0x800) {
        text_add_char(t, (char)(0xc0 | (c >> 6)));
        text_add_char(t, (char)(0x80 | (c & 0x3f)));
    } else if (c < 0x10000) {
        text_add_char(t, (char)(0xe0 | (c >> 12)));
        text_add_char(t, (char)(0x80 | ((c >> 6) & 0x3f)));
        text_add_char(t, (char)(0x80 | (c & 0x3f)));
    } else {
        text_add_char(t, (char)(0xf0 | (c >> 18)));
        text_add_char(t, (char)(0x80 | ((c >> 12) & 0x3f)));
        text_add_char(t, (char)(0x80 | ((c >> 6) & 0x3f)));
        text_add_char(t, (char)(0x80 | (c & 0x3f)));
    }
}

static bool edited_line(struct bench_line *l, struct text *line)
{
    int count = 0;
    const wchar_t *wide = el_wgets(l->edit, &count);
    if (l->over || !wide || count <= 0)
        return false;
    for (int i = 0; i < count && wide[i] != L'\n' && wide[i] != L'\r'; i++)
        add_utf8(line, wide[i]);
    if (line->length > 0) {
        HistEvent event;
        history(l->history, &event, H_ENTER, line->at);
    }
    return true;
}

static void start_editing(struct bench_line *l)
{
    HistEvent event;
    l->edit = el_init("weirbook", stdin, stdout, stderr);
    l->history = history_init();
    if (!l->edit || !l->history)
        return;
    history(l->history, &event, H_SETSIZE, REMEMBERED);
    el_set(l->edit, EL_CLIENTDATA, l);
    el_set(l->edit, EL_PROMPT, prompt_of);
    el_set(l->edit, EL_SIGNAL, 0);
    el_set(l->edit, EL_EDITOR, "emacs");
    el_set(l->edit, EL_HIST, history, l->history);
    el_set(l->edit, EL_GETCFN, next_character);
    /* The wide call: the other one makes copies that libedit never frees. */
    el_wset(l->edit, EL_ADDFN, L"complete-word", L"completes a word", complete);
    el_set(l->edit, EL_BIND, "^I", "complete-word", NULL);
    /* Letters such as these are text, not a key held with Meta. */
    for (unsigned c = 0xa0; c <= 0xff; c++) {
        char key[8];
        snprintf(key, sizeof key, "\\%03o", c);
        el_set(l->edit, EL_BIND, key, "ed-insert", NULL);
    }
}

/* ---- without ---- */

static bool plain_line(struct bench_line *l, struct text *line)
{
    unsigned char byte = 0;
    fprintf(l->out, "%s", l->prompt);
    fflush(l->out);
    while (next_byte(l, &byte) == 1 && byte != '\n')
        text_add_char(line, (char)byte);
    if (l->over && line->length == 0) {
        fputc('\n', l->out);
        return false;
    }
    if (line->length > 0 && line->at[line->length - 1] == '\r')
        line->at[--line->length] = '\0';
    struct text shown;
    text_init(&shown, SHOWN_MOST);
    text_add_escaped(&shown, line->at);
    fprintf(l->out, "%s\n", shown.at);
    text_free(&shown);
    return true;
}

/* ---- the face ---- */

static int signal_at(size_t i)
{
    return i < ENDINGS ? ending[i] : drawing[i - ENDINGS];
}

struct bench_line *bench_line_open(struct arena *a, FILE *out)
{
    struct bench_line *l = arena_alloc(a, sizeof *l);
    struct sigaction action = {.sa_handler = on_signal};
    sigset_t blocked;
    l->arena = a;
    l->out = out;
    for (size_t i = 0; i < CAUGHT; i++)
        caught()[i] = 0;
    sigemptyset(&blocked);
    sigemptyset(&action.sa_mask);
    for (size_t i = 0; i < SIGNALS; i++)
        sigaddset(&blocked, signal_at(i));
    sigprocmask(SIG_BLOCK, &blocked, &l->mask);
    /* A signal that was ignored when the program began (nohup) stays so. */
    for (size_t i = 0; i < SIGNALS; i++)
        if (sigaction(signal_at(i), NULL, &l->before[i]) == 0 && l->before[i].sa_handler != SIG_IGN)
            sigaction(signal_at(i), &action, NULL);
    fflush(out);
    if (isatty(STDIN_FILENO) && isatty(STDOUT_FILENO))
        start_editing(l);
    return l;
}

enum bench_heard bench_line_ask(struct bench_line *l, const char *prompt, const char *const *words,
                                size_t count, const char **out)
{
    struct text line;
    if (caught()[CAUGHT_ENDING])
        return HEARD_SIGNAL;
    if (l->over)
        return HEARD_END;
    fflush(l->out);
    text_init(&line, LINE_MOST);
    l->prompt = prompt;
    l->words = words;
    l->count = count;
    bool heard = l->edit ? edited_line(l, &line) : plain_line(l, &line);
    *out = arena_text(l->arena, line.at);
    text_free(&line);
    if (caught()[CAUGHT_ENDING])
        return HEARD_SIGNAL;
    return heard ? HEARD_LINE : HEARD_END;
}

void bench_line_close(struct bench_line *l)
{
    if (!l)
        return;
    if (l->edit)
        el_end(l->edit);
    if (l->history)
        history_end(l->history);
    l->edit = NULL;
    l->history = NULL;
    for (size_t i = 0; i < SIGNALS; i++)
        sigaction(signal_at(i), &l->before[i], NULL);
    sigprocmask(SIG_SETMASK, &l->mask, NULL);
}
