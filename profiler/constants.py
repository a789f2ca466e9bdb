"""Named numbers: each with its unit and source, each defined once in the house."""

from typing import Final

#: Version of the distribution; pyproject.toml reads it from here.
VERSION: Final = "0.1.0"

#: Semi-major axis of WGS84 [m]; NIMA TR8350.2, third edition, table 3.1.
WGS84_A_M: Final = 6_378_137.0
#: Flattening of WGS84 [1]; NIMA TR8350.2, third edition, table 3.1.
WGS84_F: Final = 1.0 / 298.257223563
#: Mean radius R1 = (2a + b)/3 of WGS84 [m]; IUGG definition, from memory, recomputed.
MEAN_RADIUS_M: Final = 6_371_008.7714

#: Coefficient of refraction for light [1]; Gauss's value, common practice.
KR_LIGHT: Final = 0.13
#: Effective earth radius factor for radio [1]; Rec. ITU-R P.530-19 section 2.2.2.1.
KE_RADIO: Final = 4.0 / 3.0
#: Refractive index of air at the ground [1]: 1 + 315e-6, Rec. ITU-R P.453 section 2.1.
N0_AIR: Final = 1.000315
#: Refractivity gradient that bends a ray as much as the earth, rounded [N/km];
#: Rec. ITU-R P.452-18 equation (5).
TRAPPING_N_PER_KM: Final = 157.0

#: One international foot [m]; exact by definition (1959 agreement).
FOOT_M: Final = 0.3048
#: One US survey foot [m]; exact by definition (Mendenhall order, 1893).
US_SURVEY_FOOT_M: Final = 1200.0 / 3937.0
#: One statute mile [m]; 5280 international feet.
MILE_M: Final = 5280.0 * FOOT_M
#: One nautical mile [m]; exact by definition (1929).
NAUTICAL_MILE_M: Final = 1852.0
#: Units in which elevation files state heights, by the names used in options and
#: records [m].
HEIGHT_UNIT_M: Final = {"m": 1.0, "ft": FOOT_M, "us-ft": US_SURVEY_FOOT_M}

#: One turn [deg]; the largest longitude too, for some files count from 0 to 360.
TURN_DEG: Final = 360.0
#: Half a turn [deg]; the antimeridian's longitude.
HALF_TURN_DEG: Final = 180.0
#: A quarter turn [deg]; the largest latitude.
QUARTER_TURN_DEG: Final = 90.0
#: Minutes of arc in a degree [1].
ARCMIN_PER_DEG: Final = 60.0
#: Metres in a kilometre [1].
M_PER_KM: Final = 1000.0

#: Half-width of the band called grazing, and the depth that blocks [m]; our choice:
#: below the millimetre that the record prints.
GRAZING_M: Final = 0.001
#: Height of an observer's eye when none is given [m]; common practice.
EYE_M: Final = 1.7
#: No ground lies lower [m]; with room, the Dead Sea's shore is near -440 (common
#: knowledge, from memory).
LOWEST_GROUND_M: Final = -500.0
#: No ground stands higher; a void that only higher ground could block is clear [m].
VOID_BELOW_M: Final = 9000.0
#: Least radius of a summit's own hill [m]; our choice, docs/how-it-computes.md.
OWN_HILL_M: Final = 100.0
#: Least radius of a summit's own hill in cells of the DEM [1]; our choice.
OWN_HILL_CELLS: Final = 3.0
#: A ray this far above unseen ground sees a valley, not a dimple [m]; our choice.
CREST_DEPTH_M: Final = 10.0
#: Surveyed ground further than this from the DEM gets both answers [m]; our choice.
SURVEY_GAP_M: Final = 5.0
#: A height step at a seam between sources above this is a warning [m]; our choice.
SEAM_STEP_M: Final = 2.0
#: The tallest height above ground that is not questioned [m]; above any mast built.
TALLEST_MAST_M: Final = 1000.0
#: The longest path that is answered [m]; above any sight line on the Earth's ground.
LONGEST_PATH_M: Final = 1_500_000.0
#: Files above this are hashed only on request [bytes]; our choice (0.2 s of reading).
HASH_BELOW_BYTES: Final = 200_000_000
