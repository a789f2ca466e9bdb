"""Geodesics, curvature and refraction."""
