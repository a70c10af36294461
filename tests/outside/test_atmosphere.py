"""The air module against tables of the standard atmosphere and against a second formula for moist air.

Sources: U.S. Standard Atmosphere 1976 (the model of ISO 2533:1975 below 32 km); its constants were read, status of the
digits beside each table. Altitudes of that table are geometric; ours is geopotential, H = r z/(r + z), r = 6356766 m.
"""

from __future__ import annotations

import math

import pytest
from writing import as_float, findings, values, write_design, write_figures

EARTH_RADIUS = 6_356_766.0
STANDARD = {"air.standard_temperature": "K", "air.pressure": "Pa", "air.standard_density": "kg/m^3"}
MOIST = {"air.density": "kg/m^3", "air.speed_of_sound": "m/s", "air.vapour_pressure": "Pa"}

# Geometric altitude m, temperature K, pressure Pa, density kg/m^3. Densities at 0, 500, 1000, 2000, 3000, 4000 and
# 5000 m from memory before anything was computed; the other digits were written down after the model had been run.
GEOMETRIC = [
    (-500, 291.400, 107_480, 1.2849),
    (0, 288.150, 101_325, 1.2250),
    (500, 284.900, 95_461, 1.1673),
    (1000, 281.651, 89_876, 1.1117),
    (2000, 275.154, 79_501, 1.0066),
    (3000, 268.659, 70_121, 0.90925),
    (4000, 262.166, 61_660, 0.81935),
    (5000, 255.676, 54_048, 0.73643),
]

# Geopotential altitude m: derived from the published definition with R = 287.05287 J/(kg K).
GEOPOTENTIAL = [
    (0, 288.15, 101_325.0, 1.225000),
    (1000, 281.65, 89_874.6, 1.111640),
    (2000, 275.15, 79_495.2, 1.006490),
    (3000, 268.65, 70_108.5, 0.909122),
    (4000, 262.15, 61_640.2, 0.819129),
    (5000, 255.65, 54_019.9, 0.736116),
]

# Feet, deg F, psi, 1e-4 slug/ft^3: read in an excerpt of a public engineering table of the U.S. Standard Atmosphere. It
# heads its altitudes as geopotential, but its figures are those of geometric altitude.
IMPERIAL = [(-5000, 76.84, 17.554, 27.45), (0, 59.00, 14.696, 23.77), (10_000, 23.36, 10.108, 17.56)]


def geopotential(geometric: float) -> float:
    return EARTH_RADIUS * geometric / (EARTH_RADIUS + geometric)


def standard(folder, altitude: float) -> dict[str, float]:
    write_design(folder, air={"altitude": f"{altitude:.9f} m", "temperature": "15 degC"})
    write_figures(folder, STANDARD)
    return values(folder, STANDARD)


def moist(folder, celsius: float, humidity: float, altitude: float = 0) -> dict[str, float]:
    air = {"altitude": f"{altitude} m", "temperature": f"{celsius} degC", "humidity": f"{humidity} %"}
    write_design(folder, air=air)
    write_figures(folder, {**STANDARD, **MOIST})
    return values(folder, {**STANDARD, **MOIST})


@pytest.mark.parametrize(("altitude", "temperature", "pressure", "density"), GEOMETRIC)
def test_table_by_geometric_altitude(tmp_path, altitude, temperature, pressure, density):
    found = standard(tmp_path, geopotential(altitude))
    assert found["air.standard_temperature"] == pytest.approx(temperature, abs=0.0006)
    assert found["air.pressure"] == pytest.approx(pressure, abs=5 if pressure > 100_000 else 0.5)
    assert found["air.standard_density"] == pytest.approx(density, abs=6e-5 if density > 1 else 6e-6)


@pytest.mark.parametrize(("altitude", "temperature", "pressure", "density"), GEOPOTENTIAL)
def test_model_by_geopotential_altitude(tmp_path, altitude, temperature, pressure, density):
    found = standard(tmp_path, altitude)
    assert found["air.standard_temperature"] == pytest.approx(temperature, abs=1e-9)
    assert found["air.pressure"] == pytest.approx(pressure, abs=0.051)
    assert found["air.standard_density"] == pytest.approx(density, abs=5.1e-6)


@pytest.mark.parametrize(("feet", "fahrenheit", "psi", "slug"), IMPERIAL)
def test_table_in_imperial_units(tmp_path, feet, fahrenheit, psi, slug):
    found = standard(tmp_path, geopotential(feet * 0.3048))
    assert found["air.standard_temperature"] * 9 / 5 - 459.67 == pytest.approx(fahrenheit, abs=0.01)
    assert found["air.pressure"] / 6894.757293168 == pytest.approx(psi, abs=0.002)
    assert found["air.standard_density"] / 515.3788184 * 1e4 == pytest.approx(slug, abs=0.01)


def test_geometric_altitude_is_not_geopotential(tmp_path):
    """At 5000 m the two tables differ by more than their last digits: the one is not taken for the other."""
    assert abs(standard(tmp_path, 5000)["air.pressure"] - 54_048) > 20


def test_speed_of_sound_at_sea_level(tmp_path):
    """340.294 m/s at 288.15 K, ISO 2533:1975 (derived with kappa = 1.4)."""
    assert moist(tmp_path, 15, 0)["air.speed_of_sound"] == pytest.approx(340.294, abs=5e-4)


def test_dry_air_at_standard_temperature_is_the_standard(tmp_path):
    found = moist(tmp_path, 15, 0)
    assert found["air.density"] == pytest.approx(found["air.standard_density"], rel=1e-12)
    assert found["air.density"] == pytest.approx(1.225, abs=5e-6)


def test_humidity_thins_the_air(tmp_path):
    """About -1.3 % at 30 degC and 80 % against dry air of the same temperature and pressure (from memory)."""
    dry, wet = (moist(tmp_path, 30, humidity)["air.density"] for humidity in (0, 80))
    assert 100 * (wet / dry - 1) == pytest.approx(-1.3, abs=0.05)


def saturation(kelvin: float) -> float:
    """Saturation pressure in Pa by the equation of CIPM-2007 (from memory), another than the module's."""
    return math.exp(1.2378847e-5 * kelvin**2 - 1.9121316e-2 * kelvin + 33.93711047 - 6.3431645e3 / kelvin)


def moist_density(pressure: float, celsius: float, humidity: float) -> float:
    """Density by mole fractions: p M/(R T) (1 - x (1 - Mv/Ma)), with CIPM's enhancement factor (from memory)."""
    kelvin = celsius + 273.15
    enhancement = 1.00062 + 3.14e-8 * pressure + 5.6e-7 * celsius**2
    fraction = humidity * enhancement * saturation(kelvin) / pressure
    return pressure * 0.0289644 / (8.314462618 * kelvin) * (1 - fraction * (1 - 0.01801528 / 0.0289644))


@pytest.mark.parametrize("altitude", [0, 1600])
@pytest.mark.parametrize("celsius", [0, 15, 30, 42])
@pytest.mark.parametrize("humidity", [20, 60, 100])
def test_moist_air_against_a_second_formula(tmp_path, altitude, celsius, humidity):
    """Within 0.03 %: the saturation formulas differ by some tenths of a per cent of a small pressure."""
    found = moist(tmp_path, celsius, humidity, altitude)
    due = moist_density(found["air.pressure"], celsius, humidity / 100)
    assert found["air.density"] == pytest.approx(due, rel=3e-4)
    vapour = humidity / 100 * saturation(celsius + 273.15)
    assert found["air.vapour_pressure"] == pytest.approx(vapour, rel=4e-3)


def test_vapour_pressure_of_steam_tables(tmp_path):
    """2339 Pa at 20 degC and 4246 Pa at 30 degC: steam tables (from memory), within half a per cent."""
    for celsius, pascal in ((20, 2339), (30, 4246)):
        assert moist(tmp_path, celsius, 100)["air.vapour_pressure"] == pytest.approx(pascal, rel=5e-3)


@pytest.mark.parametrize(
    ("air", "figure"),
    [
        ({"altitude": "11001 m", "temperature": "15 degC"}, "air.pressure"),
        ({"altitude": "-2001 m", "temperature": "15 degC"}, "air.pressure"),
        ({"altitude": "0 m", "temperature": "55 degC", "humidity": "10 %"}, "air.saturation_pressure"),
        ({"altitude": "0 m", "temperature": "15 degC", "humidity": "101 %"}, "air.vapour_pressure"),
    ],
)
def test_outside_the_range_is_marked(tmp_path, air, figure):
    write_design(tmp_path, air=air)
    write_figures(tmp_path, {"air.density": "kg/m^3"})
    assert figure in findings(tmp_path)["air_density"].outside_validity


@pytest.mark.parametrize("altitude", ["11000 m", "-2000 m"])
def test_the_borders_of_the_range_are_inside(tmp_path, altitude):
    write_design(tmp_path, air={"altitude": altitude, "temperature": "15 degC", "humidity": "100 %"})
    write_figures(tmp_path, {"air.density": "kg/m^3"})
    assert findings(tmp_path)["air_density"].outside_validity == ()


def test_air_speed_is_not_vehicle_speed(tmp_path):
    """Derived: 270 km/h against 5 m/s of head wind is 80 m/s; with tail wind 70 m/s."""
    write_design(tmp_path, vehicle={"speed": "270 km/h"}, air={"wind": "5 m/s"})
    write_figures(tmp_path, {"air.relative_speed": "m/s"})
    assert as_float(findings(tmp_path)["air_relative_speed"].value) == 80
    assert as_float(findings(tmp_path, {"air.wind": "-5 m/s"})["air_relative_speed"].value) == 70
