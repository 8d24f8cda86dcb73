"""Loss: the share of soluble solids a step may lose, by common practice of the trade."""

from decimal import Decimal

from .rule_set import RuleSet
from .verdict import Outcome, Stage, Verdict, not_set, of_limit, rounded


def check(rule_set: RuleSet, step_kind: str, solids_in_mg: int, solids_out_mg: int) -> Verdict:
    """Judge the solids (mg) a step lost against the band of its kind: advice, never a hold.

    Solids out above solids in fail too: then a reading or a quantity is wrong. With nothing in
    there is no share to judge.
    """
    limit = rule_set.limit(f"loss-{step_kind}")
    if limit is None or solids_in_mg <= 0:
        return not_set(rule_set, "loss", Stage.IN_PROCESS, {"kind": step_kind})
    share = rounded(Decimal(solids_in_mg - solids_out_mg) * 100 / solids_in_mg, limit.value)
    if share < 0:
        outcome, message = Outcome.FAIL, "loss-gain"
    elif share <= limit.number:
        outcome, message = Outcome.PASS, "loss-pass"
    else:
        outcome, message = Outcome.FAIL, "loss-high"
    values = {"value": str(abs(share)), "kind": step_kind}
    return of_limit("loss", Stage.IN_PROCESS, outcome, message, limit, values)
