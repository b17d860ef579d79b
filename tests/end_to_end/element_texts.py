"""Elements of a class as a project writes them, invented, for the forms of reaction."""

SLIDING = """\
      - kind: steel_sets
        profile: HEB 120
        yield_strength_mpa: 235
        steel_modulus_gpa: 200
        spacing_m: 1
        contact: embedded
        joints: sliding
        joint_count: 4
        slip_load_kn: 200
        joint_travel_mm: 100
"""
HARDENING = """\
      - kind: shotcrete
        thickness_mm: 120
        strength_mpa: 25
        modulus_gpa: 15
        poisson_ratio: 0.2
        hardening: meschke_1996
"""
