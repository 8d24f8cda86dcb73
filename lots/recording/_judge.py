"""What the rules find in a record's readings, and what follows: checks, holds, release."""

from collections.abc import Iterable, Sequence
from decimal import Decimal
from typing import Any

from lots.models import (
    Check,
    CorrectiveAction,
    DrawRole,
    GoodsKind,
    Hold,
    ItemKind,
    Lot,
    LotState,
    Reading,
    ReadingKind,
    Step,
    StepKind,
)
from lots.quantities.rounding import fixed
from lots.rules import (
    completeness,
    container_size,
    density,
    fill_temperature,
    grade,
    loss,
    rule_set,
    words,
)
from lots.rules.verdict import Outcome, Stage, Verdict
from lots.tracing.cone import back

from ._door import Writer
from .errors import NotReleased
from .measures import DensityReading, Observation

PASSED = frozenset({Outcome.PASS.value})
NEAR_OR_PASSED = PASSED | {Outcome.BORDERLINE_PASS.value}
PROVES = {
    StepKind.COLLECTION: "collected",
    StepKind.BOIL: "boiled",
    StepKind.FILTRATION: "filtered",
    StepKind.RECEIVING: "receiving-decision",
}


def note_density(writer: Writer, step: Step, lot: Lot | None, reading: DensityReading) -> Reading:
    """Keep a density reading as typed beside its true °Brix (four decimals)."""
    return writer.touch(
        Reading.objects.create(
            step=step,
            lot=lot,
            kind=ReadingKind.BRIX,
            at=reading.at or step.started_at,
            typed_value=str(reading.value),
            typed_unit=reading.unit,
            sample_typed=reading.sample.text,
            sample_unit=reading.sample.unit if reading.sample.text else "",
            corrected=fixed(reading.true_brix(), 4),
            corrected_unit="°Brix",
            method=reading.method,
            instrument=reading.instrument,
        )
    )


def note(writer: Writer, step: Step, lot: Lot | None, seen: Iterable[Observation]) -> list[Reading]:
    """Keep other readings as typed."""
    return [
        writer.touch(
            Reading.objects.create(
                step=step,
                lot=lot,
                kind=one.kind,
                at=one.at or step.started_at,
                typed_value=one.typed,
                typed_unit=one.unit,
                corrected=one.corrected,
                corrected_unit=one.corrected_unit,
                method=one.method,
                instrument=one.instrument,
            )
        )
        for one in seen
    ]


def judge(writer: Writer, lot: Lot, stage: Stage, readings: Iterable[Reading]) -> list[Check]:
    """Apply the facility's rule set to a lot's readings; a failing sold or packed lot is held."""
    rules = rule_set.load(writer.facility.rule_set)
    checks = []
    for reading in readings:
        verdict = _verdict(rules, stage, lot, reading)
        if verdict is not None:
            checks.append(_apply(writer, lot, reading.step, reading, verdict, rules))
    return checks


def judge_defects(
    writer: Writer, lot: Lot, step: Step, stage: Stage, defects: Sequence[tuple[str, str]]
) -> Check:
    """Judge the defects a grader listed; an empty list says that none was found."""
    rules = rule_set.load(writer.facility.rule_set)
    verdict = grade.check_defects(rules, stage, defects, lot.item.label_grade)
    return _apply(writer, lot, step, None, verdict, rules)


def judge_container_size(writer: Writer, lot: Lot, step: Step) -> Check | None:
    """Judge whether Processing Grade went into a container large enough for it."""
    item = lot.item
    if not item.size_value:
        return None
    rules = rule_set.load(writer.facility.rule_set)
    verdict = container_size.check(
        rules, Stage.PACKED, item.label_grade, Decimal(item.size_value), item.size_unit
    )
    return verdict and _apply(writer, lot, step, None, verdict, rules)


def judge_bulk_sale(writer: Writer, lot: Lot, step: Step) -> Check | None:
    """Judge the last density of bulk syrup that is being sold; raises NotReleased on a fail."""
    reading = lot.readings.filter(kind=ReadingKind.BRIX).order_by("at", "pk").last()
    if lot.item.kind != ItemKind.SYRUP or reading is None:
        return None
    rules = rule_set.load(writer.facility.rule_set)
    verdict = density.check(rules, Stage.BULK_SOLD, float(reading.corrected))
    if verdict.holds:
        raise NotReleased(f"{lot.code}: {words.sentence(verdict)}", field="lot")
    return _keep(writer, lot, step, reading, verdict, rules)


def judge_loss(writer: Writer, step: Step) -> Check | None:
    """Judge the solids a step lost against its band: advice, on the first lot it made."""
    drawn = list(
        step.draws.filter(ended_at=None, role__in=[DrawRole.INGREDIENT, DrawRole.CARRY_OVER])
    )
    made = list(step.made_lots.order_by("pk"))
    if not made or any(draw.solids is None for draw in drawn):
        return None
    if any(lot.solids_made is None for lot in made):
        return None
    rules = rule_set.load(writer.facility.rule_set)
    total_in = sum(draw.solids or 0 for draw in drawn)
    verdict = loss.check(rules, step.kind, total_in, sum(lot.solids_made or 0 for lot in made))
    return _apply(writer, made[0], step, None, verdict, rules)


def _apply(
    writer: Writer, lot: Lot, step: Step, reading: Reading | None, verdict: Verdict, rules: Any
) -> Check:
    check = _keep(writer, lot, step, reading, verdict, rules)
    if verdict.holds:
        hold(writer, lot, check.sentence)
    return check


def _verdict(rules: Any, stage: Stage, lot: Lot, reading: Reading) -> Verdict | None:
    if reading.kind == ReadingKind.BRIX:
        return density.check(rules, stage, float(reading.corrected))
    if reading.kind == ReadingKind.FILL_TEMPERATURE:
        kind = "container" if stage == Stage.PACKED else "drum"
        return fill_temperature.check(rules, kind, stage, float(reading.corrected))
    if reading.kind == ReadingKind.TRANSMITTANCE and lot.item.label_grade:
        return grade.check_colour(
            rules, stage, float(Decimal(reading.typed_value)), lot.item.label_grade
        )
    if reading.kind == ReadingKind.CLARITY:
        return grade.check_clarity(rules, stage, reading.typed_value, lot.item.label_grade)
    return None


def _keep(
    writer: Writer, lot: Lot, step: Step, reading: Reading | None, verdict: Verdict, rules: Any
) -> Check:
    return writer.touch(
        Check.objects.create(
            lot=lot,
            step=step,
            reading=reading,
            rule=verdict.rule,
            stage=verdict.stage.value,
            outcome=verdict.outcome.value,
            sentence=words.sentence(verdict),
            limit=verdict.limit,
            unit=verdict.unit,
            source=verdict.source,
            mark=verdict.mark,
            rule_set=rules.key,
            rule_set_hash=rules.sha256,
            at=writer.now,
        )
    )


def hold(writer: Writer, lot: Lot, reason: str, *, official: bool = False) -> Hold:
    """Set a lot apart and open the corrective action that must be completed before release."""
    placed = writer.touch(
        Hold.objects.create(
            lot=lot,
            reason=reason[:400],
            official=official,
            placed_at=writer.now,
            placed_by=writer.by,
        )
    )
    writer.touch(
        CorrectiveAction.objects.create(
            hold=placed, deviation=reason[:400], opened_at=writer.now, opened_by=writer.by
        )
    )
    return placed


def present(lot: Lot) -> set[str]:
    """Return the parts of the required chain that the records behind a lot show."""
    cone = back(lot.made_by_id)
    found = {
        PROVES[kind]
        for kind in Step.objects.filter(pk__in=cone.steps).values_list("kind", flat=True)
        if kind in PROVES
    }
    kinds = set(lot.readings.values_list("kind", flat=True))
    if ReadingKind.BRIX in kinds:
        found.add("density")
    if ReadingKind.FILL_TEMPERATURE in kinds:
        found.add("fill-temperature")
    if ReadingKind.TRANSMITTANCE in kinds:
        found.add("grade")
    if lot.made_by.document:
        found.add("paper-reference")
    return found


def unsettled(lot: Lot) -> list[Check]:
    """Return the checks that keep a lot from releasing itself.

    A later reading of a rule stands for the earlier ones. A borderline pass counts once a second
    reading agrees; in process a verdict is advice, and for colour nearness is a mark only.
    """
    by_rule: dict[str, dict[int, list[Check]]] = {}
    for check in lot.checks.exclude(stage=Stage.IN_PROCESS.value).order_by("step_id", "pk"):
        by_rule.setdefault(check.rule, {}).setdefault(check.step_id, []).append(check)
    open_checks = []
    for rule, by_step in by_rule.items():
        *earlier, last = by_step.values()
        agreed = bool(earlier) and all(one.outcome in NEAR_OR_PASSED for one in earlier[-1])
        fine = NEAR_OR_PASSED if rule == "colour" or agreed else PASSED
        open_checks += [one for one in last if one.outcome not in fine]
    return open_checks


def settle(writer: Writer, lot: Lot) -> Lot:
    """Release a waiting lot whose chain is complete and whose checks all passed."""
    lot = Lot.objects.select_related("made_by", "item").get(pk=lot.pk)
    if lot.state not in (LotState.WAITING, LotState.OPEN):
        return lot
    ready = (
        lot.made_by.ended_at is not None
        and lot.goods_kind != GoodsKind.OTHER
        and not writer.facility.release_needs_person
        and not completeness.missing(lot.goods_kind, present(lot))
        and not lot.holds.filter(ended_at=None).exists()
        and not unsettled(lot)
        and not Step.objects.filter(pk__in=back(lot.made_by_id).steps, ended_at=None).exists()
    )
    state = LotState.RELEASED if ready else LotState.WAITING
    if state != lot.state:
        Lot.objects.filter(pk=lot.pk).update(state=state)
        writer.touch(lot)
    lot.state = state
    return lot
