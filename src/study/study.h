/* A plan becomes an answer: verdict, headroom, powers and links.  An answer never changes once made. */
#pragma once

#include <gio/gio.h>

#include "gains.h"
#include "plan.h"

typedef enum { UT_DIRECTION_DOWN, UT_DIRECTION_UP } UtDirection;

typedef enum { UT_AIM_LEAST_POWER, UT_AIM_EQUAL_MARGIN, UT_AIM_FEWEST_DROPPED, UT_AIM_AS_SET } UtAim;

typedef enum
{
  UT_VERDICT_MET,
  UT_VERDICT_NOISE_LIMITED,
  UT_VERDICT_LEVEL_LIMITED,
  UT_VERDICT_INTERFERENCE_LIMITED,
  UT_VERDICT_POWER_LIMITED,
  UT_VERDICT_MINIMUM_LIMITED,
  UT_VERDICT_STEP_LIMITED,
} UtVerdict;

typedef enum { UT_FALLBACK_NONE, UT_FALLBACK_EQUAL_MARGIN, UT_FALLBACK_CLIPPED_STEPS } UtFallback;

typedef struct
{
  UtDirection direction;
  UtAim aim;
  double hold_db;    /* >= 0: kept in hand on every target when powers are chosen */
  gboolean reserves; /* compute the reserve of every link */
  gboolean chances;  /* compute the chance of every link, where the plan has shadowing */
  gboolean remedies; /* look for what would heal a plan that cannot be met */
} UtQuestion;

/* A link is marked met from here up. */
#define UT_MARGIN_MET_DB -1e-6

typedef struct
{
  const char *id; /* borrowed from the plan */
  double dbm;
} UtInterferer;

/* NAN stands for null in every dB and dBm figure. */
typedef struct
{
  guint terminal; /* index in the plan */
  int cell;       /* index of the serving cell, -1: none */
  double power_dbm;
  double target_db;        /* design margin included */
  double level_target_dbm; /* NAN: none asked for */
  double sinr_db, margin_db;
  double signal_dbm, noise_dbm, interference_dbm;
  GArray *interferers; /* of UtInterferer, strongest first */
  double reserve_db;
  double chance;       /* 0..1, to keep the SINR target at these powers under shadowing */
  gboolean dropped;
} UtLinkAnswer;

typedef struct
{
  gboolean is_cell; /* else a terminal */
  guint index;      /* in the plan */
  gboolean idle;
  double power_dbm, power_min_dbm, power_max_dbm, eirp_dbm;
  double element_dbm;          /* power per resource element; NAN: the plan does not count them */
  double compliance_m;         /* screening distance at power_max_dbm and the antenna's peak; NAN: no limit is stated for the frequency */
  const char *compliance_limit; /* which limit governs it; NULL beside NAN */
} UtTransmitterAnswer;

/* Of what sets the headroom, the part that one transmitter has at one link: 1 dB less on that path moves it by about `part` dB. */
typedef struct
{
  guint terminal;
  int because_of; /* cell (downlink) or terminal (uplink), by its index in the plan */
  double part;
} UtBlame;

/* A step from a radio at its limit to who drives it there. */
typedef struct
{
  guint transmitter; /* cell (downlink) or terminal (uplink) */
  guint terminal;    /* the link for which it must send so much */
  int because_of;    /* who makes it so, mostly; -1: noise */
  double part;       /* of all that the link's receiver hears besides its signal */
} UtCause;

/* What sets the headroom; where the verdict is interference-limited, what sets the spectral radius. */
typedef struct
{
  gboolean known;
  gboolean by_interference;
  double noise_part; /* of noise and idle cells; with all blame, named here or too small, it adds up to 1 */
  GArray *blame;     /* of UtBlame, the largest first */
  int at_limit;      /* the transmitter whose limit is full, by its index; -1: none */
  GArray *chain;     /* of UtCause, from that transmitter on */
} UtEdgeAnswer;

/* With the aim fewest-dropped: the priority of what is left out. */
typedef struct
{
  gboolean proved;
  double at_least, total; /* proved: the same */
} UtDroppingAnswer;

typedef struct
{
  UtQuestion question;
  UtGains *gains; /* with the plan they are of: gains->plan */
  UtVerdict verdict;
  UtFallback fallback;
  double spectral_radius;  /* NAN: no live link */
  double headroom_db;      /* NAN: no live link, or no common change of the targets helps */
  double headroom_error_db; /* half-width of the certificate */
  GArray *transmitters;    /* of UtTransmitterAnswer */
  GArray *links;           /* of UtLinkAnswer, in file order */
  GArray *limiting_group;  /* of guint: terminal indices; those without a cell first */
  GArray *lacks_db;        /* of double, beside limiting_group when noise- or level-limited: what the link lacks; NAN: no cell */
  UtEdgeAnswer edge;
  GArray *dropped;         /* of guint: terminal indices */
  UtDroppingAnswer dropping;
  GPtrArray *remedies;     /* of UtRemedy, see remedies.h; NULL: not asked for */
  GPtrArray *warnings;     /* of char * */
} UtStudy;

/* previous: an answer about an earlier revision, or NULL; what still holds of its gains is used. */
UtStudy *ut_study_new (const UtPlan *plan, const UtQuestion *question, const UtStudy *previous) G_GNUC_WARN_UNUSED_RESULT;
/* The same for a thread: NULL as soon as it notices that it was cancelled. */
UtStudy *ut_study_new_cancellable (const UtPlan *plan,
                                   const UtQuestion *question,
                                   const UtStudy *previous,
                                   GCancellable *cancellable) G_GNUC_WARN_UNUSED_RESULT;

UtStudy *ut_study_ref (UtStudy *study);
void ut_study_unref (UtStudy *study);
G_DEFINE_AUTOPTR_CLEANUP_FUNC (UtStudy, ut_study_unref)

/* The base law and its parameters in a few words, to be freed. */
char *ut_study_law_text (const UtStudy *study);

static inline const UtLinkAnswer *
ut_study_link (const UtStudy *study, guint index)
{
  return &g_array_index (study->links, UtLinkAnswer, index);
}

static inline const UtTransmitterAnswer *
ut_study_transmitter (const UtStudy *study, guint index)
{
  return &g_array_index (study->transmitters, UtTransmitterAnswer, index);
}

/* All of what was asked for with this aim is met: exit code 0. */
gboolean ut_study_all_met (const UtStudy *study);
