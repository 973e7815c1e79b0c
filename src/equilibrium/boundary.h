/* The boundaries between one fluid phase and two: dew and bubble points of a mixture.
 *
 * Every point solves ln f_i(feed) = ln f_i(incipient phase) with mole fractions of the incipient phase that sum to
 * one. Method-agnostic; memory is taken once.
 */
#ifndef TAREWRIGHT_EQUILIBRIUM_BOUNDARY_H
#define TAREWRIGHT_EQUILIBRIUM_BOUNDARY_H

#include "equilibrium/workspace.h"

/* Told apart by density alone. */
enum boundary_kind {
    BOUNDARY_DEW,   /* the incipient phase is the denser one */
    BOUNDARY_BUBBLE /* the incipient phase is the lighter one */
};

struct boundary_point {
    enum boundary_kind kind;
    double temperature, pressure;         /* K, Pa */
    double feed_volume, incipient_volume; /* m3/mol */
    double *incipient;                    /* [count], mole fractions */
    double residual;                      /* largest difference of ln f */
    bool is_stable; /* the tangent-plane test found nothing below the feed: else the boundary is a metastable one */
    double smallest_tpd;
    bool opens; /* at this temperature the incipient phase gains on the feed with rising pressure: two phases above */
};

struct boundary_point *boundary_point_create(size_t count, struct arena *arena);

/* Largest difference of ln f, and of the mole fractions' sum from one, of a point that is reported. */
#define BOUNDARY_TOLERANCE 1e-10

/* The dew pressure of z at the temperature set that is reached first with rising pressure, from a first value of its
 * own, with its proof of stability. ANSWER_NO_SUCH_ROOT when none was found from there: the lines of an envelope then
 * say whether there is one. */
enum answer boundary_dew_pressure(const struct fluid_at_t *at_t, const double z[], struct equilibrium_workspace *ws,
                                  struct boundary_point *out);

/* ---- the whole envelope ---------------------------------------------------------------------------------------- */

enum { ENVELOPE_MOST_POINTS = 2400, ENVELOPE_MOST_LINES = 5, ENVELOPE_MOST_CRITICAL = 4, BOUNDARY_MOST = 12 };

/* Where a line was left. */
enum envelope_end {
    ENVELOPE_END_LOW_PRESSURE,  /* below the lowest pressure traced: no more branches that way */
    ENVELOPE_END_HIGH_PRESSURE, /* an open boundary: above ENVELOPE_HIGHEST_PRESSURE */
    ENVELOPE_END_COLD,          /* below the lowest temperature traced */
    ENVELOPE_END_LOST           /* the line could not be followed further */
};

/* Pa. Every line is looked for at the first of them, and followed from there both ways. */
#define ENVELOPE_START_PRESSURE   1e3
#define ENVELOPE_LOWEST_PRESSURE  1e-3
#define ENVELOPE_HIGHEST_PRESSURE 1e9

/* A line of points, one beside the other. */
struct envelope_line {
    size_t first, count;
    size_t start; /* the point it was traced from: from `first` to here downwards, from here to the end upwards */
    enum envelope_end end;
};

struct envelope {
    size_t components, point_count, line_count;
    double *X; /* [ENVELOPE_MOST_POINTS * (components + 2)]: ln K of incipient by feed, ln T, ln p */
    double *feed_volume, *incipient_volume;         /* [ENVELOPE_MOST_POINTS], m3/mol */
    struct envelope_line line[ENVELOPE_MOST_LINES]; /* from each dew point at low pressure, stable or not; and from the
                                                     * bubble point unless one of them led there */
    size_t critical_count;
    struct critical_point critical[ENVELOPE_MOST_CRITICAL]; /* where all K pass through one, interpolated */
    bool has_cricondentherm, has_cricondenbar;
    struct boundary_point *cricondentherm, *cricondenbar; /* the highest temperature and pressure of any line */
};

struct envelope *envelope_create(size_t components, struct arena *arena);

/* Traces the envelope of z. `at_t` is the caller's workspace for temperatures. ANSWER_NO_SUCH_ROOT without a
 * low-pressure dew point; a feed of one component has no envelope, ANSWER_CANNOT. */
enum answer envelope_trace(struct fluid_at_t *at_t, const struct fluid *fluid, const double z[],
                           struct equilibrium_workspace *ws, struct envelope *out);

/* All points of the traced envelope at one temperature or pressure. */
struct boundary_list {
    size_t count;
    struct boundary_point *point[BOUNDARY_MOST]; /* by rising pressure, or temperature */
    bool is_complete; /* as far as is known: false when a point that must be there was not found */
    bool opens_below; /* known of a completed list: two-phase at ENVELOPE_LOWEST_PRESSURE already */
};

struct boundary_list *boundary_list_create(size_t components, struct arena *arena);

/* Each is solved to BOUNDARY_TOLERANCE (right at a critical point, whose two phases are one, interpolated to 2e-9) and
 * tested for stability, and told once; an empty list is an answer: the lines have none there. Next to a critical point,
 * where a line's own steps fail, those at a temperature are completed as below; ANSWER_FAILED when that fails too.
 * `at_t` is a workspace and holds the last point's temperature afterwards. */
enum answer boundary_at_t(struct fluid_at_t *at_t, const struct fluid *fluid, double temperature, const double z[],
                          const struct envelope *envelope, struct equilibrium_workspace *ws, struct boundary_list *out);
enum answer boundary_at_p(struct fluid_at_t *at_t, const struct fluid *fluid, double pressure, const double z[],
                          const struct envelope *envelope, struct equilibrium_workspace *ws, struct boundary_list *out);

/* Holds the points at a temperature (K) against the stability test of the feed between ENVELOPE_LOWEST_PRESSURE and
 * ENVELOPE_HIGHEST_PRESSURE, and adds those that no line led to: a second liquid above a metastable bubble point, for
 * one. A point with the feed unstable just below and just above it is found to be metastable. What is two-phase over
 * less than a factor of 1.6 in pressure without any known point beside it is missed. Where the test says that there is
 * a point and none could be solved for, `is_complete` is false afterwards. */
enum answer boundary_complete_at_t(struct fluid_at_t *at_t, const struct fluid *fluid, double temperature,
                                   const double z[], struct equilibrium_workspace *ws, struct boundary_list *list);

/* The same of the points at a pressure (Pa), along temperatures from about a third of the highest point's to a little
 * above it (70 to 700 K without any): what is two-phase over less than 4 % in temperature is missed. `at_t` holds some
 * temperature afterwards. */
enum answer boundary_complete_at_p(struct fluid_at_t *at_t, const struct fluid *fluid, double pressure,
                                   const double z[], struct equilibrium_workspace *ws, struct boundary_list *list);

#endif
