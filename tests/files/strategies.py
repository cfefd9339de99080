"""Random tuning sheets of all five plant forms, each one that a file can say."""

from dataclasses import replace

from hypothesis import strategies as st

from tuner.model.controller import Controller, DisturbanceFeedforward, Feedforward, LeadLag, Notch, ReferenceFilter
from tuner.model.loop import Loop, Manipulated, Signal
from tuner.model.measures import MEASURES
from tuner.model.physics import PHYSICS
from tuner.model.plant import (
    CoefficientPlant,
    ExpressionPlant,
    PhysicsPlant,
    Plant,
    PlantParameter,
    Spread,
    StateSpacePlant,
    ZeroPolePlant,
    spread_percent,
)
from tuner.model.sheet import Actuator, Sensor, Sheet, Trial

numbers = st.floats(-1e12, 1e12) | st.integers(-1000, 1000).map(float)
positives = st.floats(1e-9, 1e12) | st.integers(1, 1000).map(float)
naturals = st.just(0.0) | positives
texts = st.text(st.characters(exclude_categories=["Cs"]), max_size=20)


@st.composite
def spreads(draw: st.DrawFn, value: float) -> Spread | None:
    """Draw a spread around a value, or none."""
    kind = draw(st.sampled_from(["none", "percent", "range"]))
    if kind == "percent" and value:
        return spread_percent(value, draw(st.integers(0, 100).map(float) | st.floats(0.0, 100.0)))
    reach = (draw(naturals), draw(naturals))
    return Spread(value - reach[0], value + reach[1]) if kind == "range" else None


@st.composite
def expression_plants(draw: st.DrawFn) -> ExpressionPlant:
    """Draw a formula with some parameters, Greek ones too."""
    names = draw(st.lists(st.sampled_from(["gain", "delay", "lag", "τ", "K_1", "e"]), unique=True, max_size=4))
    values = [draw(numbers) for _ in names]
    parameters = [PlantParameter(n, v, draw(texts), draw(spreads(v))) for n, v in zip(names, values, strict=True)]
    return ExpressionPlant(" + ".join(["1/(s + 1)", *names]), tuple(parameters))


@st.composite
def physics_plants(draw: st.DrawFn) -> PhysicsPlant:
    """Draw a physical model with some of its parameters changed."""
    model = PHYSICS[draw(st.sampled_from(sorted(PHYSICS)))]
    parameters = []
    for parameter in model.parameters:
        value = draw(st.just(parameter.default) | st.floats(max(parameter.minimum, 1e-6), 1e6))
        spread = draw(st.none() | st.just(spread_percent(value, 10.0)))
        parameters.append(PlantParameter(parameter.name, value, parameter.unit, spread))
    return PhysicsPlant(model.name, tuple(parameters))


@st.composite
def coefficient_plants(draw: st.DrawFn) -> CoefficientPlant:
    """Draw a proper plant by its coefficients."""
    order = draw(st.integers(1, 4))
    denominator = [draw(positives), *(draw(numbers) for _ in range(order))]
    numerator = [draw(positives), *(draw(numbers) for _ in range(draw(st.integers(0, order))))]
    return CoefficientPlant(tuple(numerator), tuple(denominator), draw(naturals))


@st.composite
def roots(draw: st.DrawFn, most: int) -> tuple[complex, ...]:
    """Draw real roots and conjugate pairs."""
    real = draw(st.lists(numbers.map(complex), max_size=most))
    pairs = draw(st.lists(st.builds(complex, numbers, positives), max_size=(most - len(real)) // 2))
    return (*real, *(root for pair in pairs for root in (pair, pair.conjugate())))


@st.composite
def zero_pole_plants(draw: st.DrawFn) -> ZeroPolePlant:
    """Draw a proper plant by its zeros and poles."""
    poles = draw(roots(4))
    return ZeroPolePlant(draw(roots(len(poles))), poles, draw(positives), draw(naturals))


@st.composite
def state_space_plants(draw: st.DrawFn) -> StateSpacePlant:
    """Draw a plant in state space."""
    order = draw(st.integers(1, 3))
    vectors = st.tuples(*[numbers] * order)
    return StateSpacePlant(
        draw(st.tuples(*[vectors] * order)), draw(vectors), draw(vectors), draw(numbers), draw(naturals)
    )


plants: st.SearchStrategy[Plant] = st.one_of(
    expression_plants(), physics_plants(), coefficient_plants(), zero_pole_plants(), state_space_plants()
)

feedforwards = st.builds(Feedforward, st.just("static"), gain=numbers) | st.builds(
    Feedforward, st.just("inverse"), filter_time=positives
)

bare_controllers = st.builds(
    Controller,
    form=st.sampled_from(["parallel", "standard", "series"]),
    sample_time=st.just(0.0) | st.floats(1e-3, 1.0),
    gain_1=naturals,
    gain_2=naturals,
    gain_3=naturals,
    filter_time=naturals,
    b=naturals,
    c=naturals,
    windup_time=st.none() | positives,
    action=st.sampled_from(["reverse", "direct"]),
    feedback=st.booleans(),
    delay_samples=st.integers(0, 1000),
    feedforward=st.none() | feedforwards,
    disturbance_feedforward=st.none()
    | st.builds(
        DisturbanceFeedforward,
        st.just("2/(s + 1)"),
        kind=st.sampled_from(["static", "dynamic"]),
        filter_time=st.none() | positives,
        name=st.sampled_from(["", "Inflow"]),
        unit=st.sampled_from(["", "kg/s"]),
        resting=numbers,
    ),
    reference_filter=st.none() | st.builds(ReferenceFilter, positives, st.integers(1, 8)),
    measurement_filter=naturals,
    lead_lag=st.none() | st.builds(LeadLag, naturals, positives),
    notch=st.none() | st.builds(Notch, st.floats(1e-3, 3.0), st.floats(0.0, 1.0), positives),
)


@st.composite
def controllers(draw: st.DrawFn) -> Controller:
    """Draw a controller, with or without another as found."""
    return replace(draw(bare_controllers), as_found=draw(st.none() | bare_controllers))


@st.composite
def signals(draw: st.DrawFn) -> tuple[float | None, float | None, float]:
    """Draw the ends of a range and a resting value within."""
    resting = draw(st.floats(-1e6, 1e6))
    low = draw(st.none() | st.floats(0.0, 1e6).map(lambda reach: resting - reach))
    high = draw(st.none() | st.floats(1.0, 1e6).map(lambda reach: resting + reach))
    return low, high, resting


@st.composite
def loops(draw: st.DrawFn) -> Loop:
    """Draw the loop around the blocks; its unit is the second, which physical models ask for."""
    controlled = Signal(draw(texts), draw(texts), *draw(signals()))
    manipulated = Manipulated(draw(texts), draw(texts), *draw(signals()), draw(st.none() | positives))
    return Loop(draw(texts), "s", controlled, manipulated, draw(texts))


limits = st.lists(
    st.tuples(st.sampled_from([measure.name for measure in MEASURES]), naturals), unique_by=lambda limit: limit[0]
)

sheets = st.builds(
    Sheet,
    loop=loops(),
    plant=plants,
    controller=controllers(),
    trial=st.builds(Trial, st.floats(1.0, 1000.0), numbers, numbers, st.floats(0.1, 100.0)),
    actuator=st.builds(Actuator, naturals),
    sensor=st.builds(Sensor, naturals, naturals, naturals),
    limits=limits.map(tuple),
)
