/* How a value in SI is shown: shown = (si - offset) / factor. */
#ifndef TAREWRIGHT_BASE_SHOWN_H
#define TAREWRIGHT_BASE_SHOWN_H

struct shown_unit {
    const char *symbol; /* "bara", "degC" */
    double factor;      /* SI per one of this unit */
    double offset;      /* SI value of this unit's zero */
};

#endif
