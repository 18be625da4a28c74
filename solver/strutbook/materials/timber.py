"""Timber: strength classes of EN 338 and EN 14080, and grades of the NDS Supplement; from memory of the tables."""

from __future__ import annotations

from strutbook.materials.material import Material, Substance

_MPA = 1e6
_PSI = 6894.757293168361
_POUND_PER_CUBIC_FOOT = 16.018463
#: Timber along the grain; small beside that of moisture.
_EXPANSION = 5e-6

#: EN 338:2016, softwood: f_m_k, f_t_0_k, f_c_0_k (MPa), E_0_mean, E_0_05 (GPa), rho_k, rho_mean (kg/m3).
_EN_338 = {
    "C14": (14, 7.2, 16, 7.0, 4.7, 290, 350),
    "C16": (16, 8.5, 17, 8.0, 5.4, 310, 370),
    "C18": (18, 10, 18, 9.0, 6.0, 320, 380),
    "C20": (20, 11.5, 19, 9.5, 6.4, 330, 400),
    "C22": (22, 13, 20, 10.0, 6.7, 340, 410),
    "C24": (24, 14.5, 21, 11.0, 7.4, 350, 420),
    "C27": (27, 16.5, 22, 11.5, 7.7, 360, 430),
    "C30": (30, 19, 24, 12.0, 8.0, 380, 460),
    "C35": (35, 22.5, 25, 13.0, 8.7, 390, 470),
    "C40": (40, 26, 27, 14.0, 9.4, 400, 480),
    "C45": (45, 30, 29, 15.0, 10.1, 410, 490),
    "C50": (50, 33.5, 30, 16.0, 10.7, 430, 520),
}
#: EN 14080:2013, homogeneous and combined glued-laminated timber, the same columns.
_EN_14080 = {
    "GL20h": (20, 16, 20, 8.4, 7.0, 340, 370),
    "GL22h": (22, 17.6, 22, 10.5, 8.8, 370, 410),
    "GL24h": (24, 19.2, 24, 11.5, 9.6, 385, 420),
    "GL26h": (26, 20.8, 26, 12.1, 10.1, 405, 445),
    "GL28h": (28, 22.3, 28, 12.6, 10.5, 425, 460),
    "GL30h": (30, 24, 30, 13.6, 11.3, 430, 480),
    "GL32h": (32, 25.6, 32, 14.2, 11.8, 440, 490),
    "GL24c": (24, 17, 21.5, 11.0, 9.1, 365, 400),
    "GL28c": (28, 19.5, 24, 12.5, 10.4, 390, 420),
    "GL32c": (32, 19.5, 24.5, 13.5, 11.2, 400, 440),
}
#: NDS Supplement 2018 table 4A, dimension lumber: F_b, F_t, F_c, E, E_min (psi) and specific gravity.
_NDS = {
    "Douglas Fir-Larch Select Structural": (1500, 1000, 1700, 1.9e6, 0.69e6, 0.50),
    "Douglas Fir-Larch No. 1": (1000, 675, 1500, 1.7e6, 0.62e6, 0.50),
    "Douglas Fir-Larch No. 2": (900, 575, 1350, 1.6e6, 0.58e6, 0.50),
    "Douglas Fir-Larch No. 3": (525, 325, 775, 1.4e6, 0.51e6, 0.50),
    "Hem-Fir Select Structural": (1400, 925, 1500, 1.6e6, 0.58e6, 0.43),
    "Hem-Fir No. 1": (975, 625, 1350, 1.5e6, 0.55e6, 0.43),
    "Hem-Fir No. 2": (850, 525, 1300, 1.3e6, 0.47e6, 0.43),
    "Spruce-Pine-Fir Select Structural": (1250, 700, 1400, 1.5e6, 0.55e6, 0.42),
    "Spruce-Pine-Fir No. 1/No. 2": (875, 450, 1150, 1.4e6, 0.51e6, 0.42),
    "Spruce-Pine-Fir No. 3": (500, 250, 650, 1.2e6, 0.44e6, 0.42),
}


def timbers() -> dict[str, Material]:
    """Every class and grade by its name."""
    found: dict[str, Material] = {}
    for source, classes in (("EN 338:2016", _EN_338), ("EN 14080:2013", _EN_14080)):
        for name, (bending, tension, compression, mean, fifth, weight_k, weight_mean) in classes.items():
            values = {
                "f_m_k": bending * _MPA,
                "f_t_0_k": tension * _MPA,
                "f_c_0_k": compression * _MPA,
                "E_0_mean": mean * 1e9,
                "E_0_05": fifth * 1e9,
                "rho_k": float(weight_k),
            }
            found[name] = Material(
                name, Substance.TIMBER, source, mean * 1e9, float(weight_mean), _EXPANSION, values=values
            )
    for name, (bending, tension, compression, modulus, smallest, gravity) in _NDS.items():
        values = {
            "F_b": bending * _PSI,
            "F_t": tension * _PSI,
            "F_c": compression * _PSI,
            "E": modulus * _PSI,
            "E_min": smallest * _PSI,
        }
        # Weight at 12 % moisture: NDS Supplement 3.1.3, density = 62.4 G / (1 + 0.009 G m.c.) (1 + m.c. / 100).
        weight = 62.4 * gravity / (1 + 0.009 * gravity * 12) * 1.12 * _POUND_PER_CUBIC_FOOT
        found[name] = Material(
            name, Substance.TIMBER, "NDS Supplement 2018", modulus * _PSI, weight, _EXPANSION, values=values
        )
    return found
