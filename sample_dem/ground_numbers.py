"""The numbers of the invented upland: extent, roughness, masses, exact heights."""

from dataclasses import dataclass

#: Seed of every random number drawn here; chosen by eye.
SEED = 4827
#: Map edges of the upland [deg].
WEST_DEG, EAST_DEG, SOUTH_DEG, NORTH_DEG = -21.62, -21.05, 48.15, 48.42
#: Posts per degree: 1 arc-second.
POSTS_PER_DEG = 3600
#: Middle of the upland, origin of the local plane [deg].
MID_LAT_DEG, MID_LON_DEG = 48.285, -21.335
#: Length of a degree of latitude and of longitude at the origin [m], WGS84, rounded.
LAT_DEG_M, LON_DEG_M = 111_205.0, 74_220.0
#: Height written where there is sea [m].
SEA_M = -9999.0
#: Steps heights are rounded to [m]: upland, fine tile.
UPLAND_STEP_M, FINE_STEP_M = 0.1, 0.1
#: Fine tile: CRS, post spacing [m], posts a side.
FINE_CRS, FINE_POST_M, FINE_POSTS = "EPSG:32627", 5.0, 600
#: Steps the corner of the fine tile is rounded to [m].
FINE_CORNER_M = 100.0
#: GeoTIFF: edge of a block [posts], effort of deflate, floating-point predictor.
BLOCK_POSTS, DEFLATE_EFFORT, PREDICTOR = 256, 9, 3
#: Rows computed at once, to keep memory small.
ROWS_AT_ONCE = 64

#: Lattice of the water-cut block: spacing [m], half extents [m] (beyond the map edges).
LATTICE_M, LATTICE_HALF_X_M, LATTICE_HALF_Y_M = 180.0, 23_400.0, 17_100.0
#: Cutting: rounds, strength of a round, exponent of the area [1], creep of a round [1].
CUT_ROUNDS, CUT_STRENGTH, CUT_AREA_POWER, CREEP = 30, 0.0007, 0.45, 0.05
#: Fall put on filled hollows so that water finds its way [m].
FILL_FALL_M = 0.01
#: The eight neighbours (row, column).
NEIGHBOURS = ((-1, 0), (1, 0), (0, -1), (0, 1), (-1, -1), (-1, 1), (1, -1), (1, 1))

#: Coast: a point on it [m], unit normal pointing inland, wander [m] and its wave [m].
COAST_AT_M, COAST_NORMAL = (-15_600.0, 0.0), (0.962, -0.273)
COAST_WANDER_M, COAST_WAVE_M, COAST_OCTAVES = 3_800.0, 8_500.0, 6
#: Block before cutting: height inland [m], rise length from the coast [m], sea bed [m].
BLOCK_M, BLOCK_RISE_M, SEA_BED_M = 425.0, 2_400.0, -60.0
#: Roughness of the block before cutting: amplitude [m], longest wave [m], octaves.
BLOCK_ROUGH_M, BLOCK_WAVE_M, BLOCK_OCTAVES = 150.0, 7_000.0, 6
#: Fine roughness: longest wave [m], octaves, share of the slope, floor [m].
ROUGH_WAVE_M, ROUGH_OCTAVES, ROUGH_OF_SLOPE_M, ROUGH_FLOOR_M = 560.0, 4, 70.0, 1.5
#: Extra octaves of the fine tile: longest wave [m], octaves, amplitude [m].
EXTRA_WAVE_M, EXTRA_OCTAVES, EXTRA_M = 28.0, 2, 0.25
#: Bending of straight things: amplitude [m] and wave [m], wide and narrow.
BENDS_M = ((420.0, 2_600.0), (90.0, 600.0))
#: Fall in amplitude and rise in frequency from octave to octave [1].
GAIN, LACUNARITY = 0.5, 2.03
#: Entries of the noise tables; a power of two.
TABLE = 512

#: Factor that brings one octave of noise to about -1..1.
NOISE_GAIN = 1.5
#: Turn from octave to octave (cosine, sine) and shift [waves], so that lattices differ.
OCTAVE_COS, OCTAVE_SIN, OCTAVE_X, OCTAVE_Y = 0.8, 0.6, 7.3, -3.1
#: Shifts that make the bend east and the bend north two noises [waves].
BEND_X, BEND_Y = (0.37, 0.71), (31.4, -17.9)
#: How much wider masses are bent than anchors [1].
MASS_BEND = 4.0
#: Coefficients of the smooth step 6t^5 - 15t^4 + 10t^3 (Perlin 2002).
EASE = (6.0, 15.0, 10.0)
#: Numbers of the uniform cubic B-spline: 1/6, 4/6, and its power.
SIX, SPLINE_MID, CUBE = 6, 4, 3
#: Height of water mouths at the coast, and of the block where rivers leave it [m].
MOUTH_M, EDGE_M = 4.0, 90.0
#: Low ground along the main example: half width [m], height at each end [m],
#: share of the ground above that is taken off, softness [m].
LOW_HALF_M, LOW_FROM_M, LOW_TO_M, LOW_SHARE, LOW_SOFT_M = (
    1_500.0,
    424.0,
    448.0,
    0.9,
    9.0,
)
#: Loch: ends of its middle line [m], half width [m], level and depth [m].
LOCH_FROM_M, LOCH_TO_M = (12_600.0, -9_800.0), (15_200.0, -8_200.0)
LOCH_HALF_M, LOCH_LEVEL_M, LOCH_DEPTH_M = 480.0, 252.0, 9.0
#: Raggedness of its shore [1] and its longest wave [m].
LOCH_RAGGED, LOCH_WAVE_M = 0.5, 1_100.0
#: Where the shore ends and where the old ground is whole again [half widths].
LOCH_RIM, LOCH_END = 1.2, 3.4
#: Distance over which the ground at an anchor is made level [m].
LEVEL_M = 40.0
#: Circle in which a place is moved to the top or the low point [m].
SEARCH_M = 450.0
#: Steps of the search for the true top [m].
TOP_STEPS_M = (20.0, 4.0, 0.5, 0.1)
#: Steps looked at on each side in that search.
TOP_REACH = 6

#: Masses laid on the block before cutting: centre [m], height [m], half widths [m],
#: turn of the long axis from east [deg], edge (1 a bell, higher a tableland).
MASSES = (
    (-4_300.0, 4_500.0, 560.0, 3_400.0, 2_100.0, -35.0, 1),
    (-8_500.0, -2_200.0, 350.0, 2_600.0, 900.0, -32.0, 1),
    (7_800.0, -7_700.0, 600.0, 4_200.0, 2_300.0, 25.0, 1),
    (5_500.0, 11_200.0, 330.0, 4_600.0, 2_600.0, 10.0, 4),
    (16_500.0, -1_500.0, 260.0, 2_000.0, 4_500.0, 20.0, 1),
    (-3_500.0, -11_800.0, 260.0, 4_000.0, 1_700.0, 15.0, 1),
    (-12_750.0, -8_650.0, 130.0, 2_300.0, 1_300.0, 40.0, 1),
    (7_700.0, 2_600.0, 190.0, 2_600.0, 800.0, 122.0, 1),
    (4_600.0, 900.0, -70.0, 3_400.0, 1_700.0, 30.0, 1),
    (17_500.0, 11_500.0, 300.0, 2_400.0, 2_200.0, 40.0, 1),
)


@dataclass(frozen=True, slots=True, kw_only=True)
class Anchor:
    """A place where the surface is given an exact height."""

    name: str
    """What the place is called."""
    lat_deg: float
    """Latitude."""
    lon_deg: float
    """Longitude."""
    ground_m: float
    """Height above the sea."""
    long_m: float
    """Reach along the long axis."""
    short_m: float
    """Reach across it."""
    turn_deg: float = 0.0
    """Turn of the long axis from east, against the clock."""
    sharp: bool = False
    """A pointed tip instead of a rounded one."""


def anchor(name: str, place: tuple[float, float, float], *shape: float) -> Anchor:
    """Anchor from (latitude, longitude, height) and (long, short, turn, sharp)."""
    lat, lon, ground = place
    long, short, turn, sharp = shape
    return Anchor(
        name=name,
        lat_deg=lat,
        lon_deg=lon,
        ground_m=ground,
        long_m=long,
        short_m=short,
        turn_deg=turn,
        sharp=bool(sharp),
    )


#: Places of exact height: the ends of the main example, the two brows between them
#: (a few metres above the line of sight) and the tops. The sharp top stands on the
#: corner of four posts, where a DEM cuts most off it.
ANCHORS = (
    anchor("Skarvel", (48.20920, -21.50344, 431.0), 520.0, 420.0, 30.0, 0),
    anchor("Quillet Mast", (48.32758, -21.17892, 452.0), 800.0, 500.0, 80.0, 0),
    anchor("Tarrow Pass", (48.27367, -21.32674, 461.3), 1_900.0, 520.0, 112.0, 0),
    anchor("Sillet Brow", (48.30805, -21.23246, 471.0), 1_700.0, 480.0, 125.0, 0),
    anchor("Cobbin Round", (48.32500, -21.39400, 832.0), 950.0, 760.0, -35.0, 0),
    anchor("Thrane Pike", (48.225278, -21.231111, 1_004.0), 270.0, 160.0, 25.0, 1),
)
#: Where ground is kept smooth: anchor number and reach [m].
SMOOTH = ((0, 350.0), (4, 500.0))
