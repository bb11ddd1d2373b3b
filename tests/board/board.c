/* The board's voice, and its measures. */
#include "programs.h"
#include "say.h"

/* Semihosting: SYS_WRITE0 */
void say(const char *text)
{
    register uintptr_t operation __asm__("r0") = 0x04;
    register const char *argument __asm__("r1") = text;
    __asm__ volatile("bkpt 0xab" : "+r"(operation) : "r"(argument) : "memory");
}

/* The Cortex-M system timer, 24 bits, counting down by the processor's clock; the emulator lets a fixed time pass with
   every instruction, more than a tick. */
enum { LARGEST = 0xffffff };

static volatile uint32_t *const timer = (volatile uint32_t *)0xe000e010; /* control, reload, value */

static uint32_t ticks_of(void (*work)(void))
{
    timer[1] = LARGEST;
    timer[2] = 0;
    timer[0] = 5;
    while (timer[2] == 0) /* until it is loaded */
        ;
    const uint32_t before = timer[2];
    work();
    const uint32_t after = timer[2];
    if (timer[0] >> 16 & 1)
        say("TIMER RAN OUT\n");
    return before - after;
}

static void nothing(void)
{
    __asm__ volatile("");
}

static void thousand(void)
{
    __asm__ volatile(".rept 1000\n\tnop\n\t.endr");
}

uint64_t instructions_of(void (*work)(void))
{
    const uint64_t empty = ticks_of(nothing), unit = ticks_of(thousand) - empty;
    return ((ticks_of(work) - empty) * 1000 + unit / 2) / unit;
}

/* Between the variables and the stack: painted, and looked at afterwards. */
extern uint32_t board_ram_used, board_stack_top;

static uintptr_t stack_pointer(void)
{
    uintptr_t here;
    __asm__ volatile("mov %0, sp" : "=r"(here));
    return here;
}

__attribute__((noinline)) uint64_t stack_of(void (*work)(void))
{
    const uint32_t paint = 0xa5a5a5a5u;
    const uintptr_t top = stack_pointer() - 64;
    uintptr_t place;
    for (place = (uintptr_t)(&board_ram_used + 1); place < top; place += 4)
        *(volatile uint32_t *)place = paint;
    const uintptr_t before = stack_pointer();
    work();
    for (place = (uintptr_t)(&board_ram_used + 1); place < top; place += 4)
        if (*(volatile uint32_t *)place != paint)
            break;
    return before - place;
}
