"""Radio paths: Fresnel zones and diffraction loss; the only door to scipy."""

from profiler.radio.bullington import BullingtonLoss, bullington_loss
from profiler.radio.cylinders import (
    Cylinder,
    CylinderLoss,
    cylinder_loss,
    stretched_string,
)
from profiler.radio.delta_bullington import (
    USUAL_RADIUS_M,
    DiffractionLoss,
    diffraction_loss,
    effective_heights_m,
    smooth_surface_m,
)
from profiler.radio.first_term import (
    LAND,
    SEA,
    GroundConstants,
    Polarization,
    beta_of,
    distance_term_db,
    first_term_loss_db,
    first_term_within_2_db,
    height_gain_db,
    normalized_height,
    normalized_length,
    surface_admittance,
)
from profiler.radio.fresnel import fresnel_radius_m, share_of_f1
from profiler.radio.knife_edge import (
    knife_edge_loss_db,
    knife_edge_loss_exact_db,
    nu_from_angle,
    nu_from_end_angles,
    nu_from_height,
    nu_from_height_and_angle,
    nu_from_share_of_f1,
)
from profiler.radio.method import METHOD_FOR_PROFILES, MethodChoice, choose_method
from profiler.radio.rounded import (
    RoundedLoss,
    radius_from_terrain_m,
    rounded_obstacle_loss,
    rounding_loss_db,
)
from profiler.radio.spherical import (
    SmoothClearance,
    horizon_reach_m,
    mixed_first_term_loss_db,
    smooth_clearance,
    spherical_loss_db,
)
from profiler.radio.two_edges import (
    TwoEdgeLoss,
    dominant_edge_loss,
    similar_edges_loss,
)
from profiler.radio.waves import (
    SPEED_OF_LIGHT,
    check_frequency,
    check_wavelength,
    free_space_loss_db,
    wavelength_m,
)

__all__ = [
    "LAND",
    "METHOD_FOR_PROFILES",
    "SEA",
    "SPEED_OF_LIGHT",
    "USUAL_RADIUS_M",
    "BullingtonLoss",
    "Cylinder",
    "CylinderLoss",
    "DiffractionLoss",
    "GroundConstants",
    "MethodChoice",
    "Polarization",
    "RoundedLoss",
    "SmoothClearance",
    "TwoEdgeLoss",
    "beta_of",
    "bullington_loss",
    "check_frequency",
    "check_wavelength",
    "choose_method",
    "cylinder_loss",
    "diffraction_loss",
    "distance_term_db",
    "dominant_edge_loss",
    "effective_heights_m",
    "first_term_loss_db",
    "first_term_within_2_db",
    "free_space_loss_db",
    "fresnel_radius_m",
    "height_gain_db",
    "horizon_reach_m",
    "knife_edge_loss_db",
    "knife_edge_loss_exact_db",
    "mixed_first_term_loss_db",
    "normalized_height",
    "normalized_length",
    "nu_from_angle",
    "nu_from_end_angles",
    "nu_from_height",
    "nu_from_height_and_angle",
    "nu_from_share_of_f1",
    "radius_from_terrain_m",
    "rounded_obstacle_loss",
    "rounding_loss_db",
    "share_of_f1",
    "similar_edges_loss",
    "smooth_clearance",
    "smooth_surface_m",
    "spherical_loss_db",
    "stretched_string",
    "surface_admittance",
    "wavelength_m",
]
