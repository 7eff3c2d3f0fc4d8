"""What all tests share: how hypothesis runs here."""

from hypothesis import HealthCheck, settings

# The first call in a fresh cache compiles the solver, so no example has a deadline; draws repeat from run to run.
settings.register_profile("gibbsmin", deadline=None, derandomize=True, suppress_health_check=[HealthCheck.too_slow])
settings.load_profile("gibbsmin")
