"""The figures of legal limits as their texts print them, set down here a second time, and by other routes.

Each row names the text. A figure changed in a rule file by a slip differs from this table.
"""

from __future__ import annotations

from datetime import date

import pytest

from formcheck.hazards.book import load_book
from formcheck.hazards.dated import in_force

BOOK = load_book()
RULES = {rule.id: rule for rule in BOOK.rules}

# rule, day, figure, unit, basis, how it is passed, and the text.
PRINTED = [
    # 16 CFR 1303.1(a): "in excess of 0.009 percent" since 14 August 2009
    ("us-lead-in-dry-film", "2009-08-14", 0.009, "% w/w", "dry_film", "more_than"),
    # 15 U.S.C. 1278a(a)(2)(C): 100 parts per million
    ("us-lead-in-childrens-product", "2026-03-26", 100, "mg/kg", "dry_film", "more_than"),
    # 16 CFR 1307.3: more than 0.1 percent of each of eight phthalates
    ("us-phthalates-in-toys", "2020-01-01", 0.1, "% w/w", "dry_film", "more_than"),
    # 16 CFR 1500.14(a) and (b): 4 percent methanol, 10 percent glycols, 5 percent benzene, 10 percent others
    ("us-label-methanol", "2015-01-01", 4, "% w/w", "mixture", "at_or_above"),
    ("us-label-glycols", "2015-01-01", 10, "% w/w", "mixture", "at_or_above"),
    ("us-label-benzene", "2015-01-01", 5, "% w/w", "mixture", "at_or_above"),
    ("us-label-toluene-xylene", "2015-01-01", 10, "% w/w", "mixture", "at_or_above"),
    ("us-label-turpentine", "2015-01-01", 10, "% w/w", "mixture", "at_or_above"),
    # 40 CFR Part 59 Subpart D, Table 1
    ("us-voc-flat-coating", "2015-01-01", 250, "g/L", "as_used", "more_than"),
    ("us-voc-non-flat-coating", "2015-01-01", 380, "g/L", "as_used", "more_than"),
    ("us-voc-stain-semi-transparent", "2015-01-01", 550, "g/L", "as_used", "more_than"),
    ("us-voc-stain-opaque", "2015-01-01", 350, "g/L", "as_used", "more_than"),
    ("us-voc-varnish", "2015-01-01", 450, "g/L", "as_used", "more_than"),
    # Surface Coating Materials Regulations, SOR/2016-193, s. 2(1), 5, 6
    ("ca-lead-in-surface-coating", "2025-07-25", 90, "mg/kg", "dry_film", "more_than"),
    ("ca-mercury-in-surface-coating", "2025-07-25", 10, "mg/kg", "dry_film", "more_than"),
    # VOC Concentration Limits for Architectural Coatings Regulations, SOR/2009-264, schedule
    ("ca-voc-flat-coating", "2025-07-25", 100, "g/L", "as_used", "more_than"),
    ("ca-voc-non-flat-coating", "2025-07-25", 150, "g/L", "as_used", "more_than"),
    ("ca-voc-high-gloss-coating", "2025-07-25", 250, "g/L", "as_used", "more_than"),
    ("ca-voc-wood-stain", "2025-07-25", 250, "g/L", "as_used", "more_than"),
    # Regulation (EC) No 1907/2006, Annex XVII, by entry
    ("eu-benzene", "2020-01-01", 0.1, "% w/w", "mixture", "at_or_above"),  # 5
    ("eu-lead-carbonates-in-paint", "2020-01-01", 0, "% w/w", "mixture", "more_than"),  # 16
    ("eu-lead-sulfates-in-paint", "2020-01-01", 0, "% w/w", "mixture", "more_than"),  # 17
    ("eu-cadmium-in-paint", "2016-03-07", 0.01, "% w/w", "mixture", "at_or_above"),  # 23
    ("eu-cadmium-in-zinc-rich-paint", "2016-03-07", 0.1, "% w/w", "mixture", "at_or_above"),  # 23
    ("eu-carcinogens-for-the-public", "2015-06-01", 0.1, "% w/w", "mixture", "at_or_above"),  # 28
    ("eu-mutagens-for-the-public", "2015-06-01", 0.1, "% w/w", "mixture", "at_or_above"),  # 29
    ("eu-reproductive-toxicants-for-the-public", "2015-06-01", 0.3, "% w/w", "mixture", "at_or_above"),  # 30
    ("eu-toluene-in-spray-paint", "2020-01-01", 0.1, "% w/w", "mixture", "at_or_above"),  # 48
    ("eu-phthalates-in-articles", "2020-07-07", 0.1, "% w/w", "dry_film", "at_or_above"),  # 51
    ("eu-phthalates-in-mouthable-toys", "2020-07-07", 0.1, "% w/w", "dry_film", "more_than"),  # 52
    ("eu-degme-in-consumer-paint", "2020-01-01", 0.1, "% w/w", "mixture", "at_or_above"),  # 54
    ("eu-degbe-in-spray-paint", "2020-01-01", 3, "% w/w", "mixture", "at_or_above"),  # 55
    ("eu-mdi-for-the-public", "2020-01-01", 0.1, "% w/w", "mixture", "at_or_above"),  # 56
    ("eu-phenylmercury-compounds", "2017-10-10", 0.01, "% w/w", "mixture", "at_or_above"),  # 62
    ("eu-nmp-at-work", "2020-05-09", 0.3, "% w/w", "mixture", "at_or_above"),  # 71
    ("eu-diisocyanates-training", "2022-02-24", 0.1, "% w/w", "mixture", "at_or_above"),  # 74
    # entry 75 and Appendix 13, Regulation (EU) 2020/2081
    ("eu-tattoo-lead", "2022-01-04", 0.00007, "% w/w", "mixture", "at_or_above"),
    ("eu-tattoo-cadmium", "2022-01-04", 0.00005, "% w/w", "mixture", "at_or_above"),
    ("eu-tattoo-nickel", "2022-01-04", 0.0005, "% w/w", "mixture", "at_or_above"),
    ("eu-tattoo-copper", "2022-01-04", 0.025, "% w/w", "mixture", "at_or_above"),
    ("eu-tattoo-zinc", "2022-01-04", 0.2, "% w/w", "mixture", "at_or_above"),
    ("eu-tattoo-skin-sensitisers", "2022-01-04", 0.001, "% w/w", "mixture", "at_or_above"),
    # Regulation (EC) No 1272/2008, Annex II 2.1; Annex VI for the preservatives
    ("eu-label-lead-in-paint", "2020-01-01", 0.15, "% w/w", "mixture", "more_than"),
    ("eu-cmit-mit-sensitises", "2021-01-01", 0.0015, "% w/w", "mixture", "at_or_above"),
    ("eu-bit-sensitises", "2025-08-31", 0.05, "% w/w", "mixture", "at_or_above"),
    ("eu-bit-sensitises", "2025-09-01", 0.036, "% w/w", "mixture", "at_or_above"),
    # Directive 94/62/EC Article 11, then Regulation (EU) 2025/40 Article 5(4)
    ("eu-heavy-metals-on-packaging", "2026-08-11", 100, "mg/kg", "dry_film", "more_than"),
    ("eu-heavy-metals-on-packaging", "2026-08-12", 100, "mg/kg", "dry_film", "more_than"),
    # Directive 2004/42/CE Annex II A, phase I and II
    ("eu-voc-interior-wall-matt", "2009-12-31", 75, "g/L", "as_used", "more_than"),
    ("eu-voc-interior-wall-matt", "2010-01-01", 30, "g/L", "as_used", "more_than"),
    ("eu-voc-interior-wall-glossy", "2010-01-01", 100, "g/L", "as_used", "more_than"),
    ("eu-voc-exterior-wall-waterborne", "2010-01-01", 40, "g/L", "as_used", "more_than"),
    ("eu-voc-wood-waterborne", "2010-01-01", 130, "g/L", "as_used", "more_than"),
    ("eu-voc-wood-varnish", "2010-01-01", 400, "g/L", "as_used", "more_than"),
    # EN 71-3:2019+A1:2021, category III
    ("eu-toy-coating-lead", "2022-01-01", 23, "mg/kg", "dry_film", "more_than"),
    ("eu-toy-coating-cadmium", "2022-01-01", 17, "mg/kg", "dry_film", "more_than"),
    ("eu-toy-coating-barium", "2022-01-01", 18750, "mg/kg", "dry_film", "more_than"),
    ("eu-toy-coating-aluminium", "2022-01-01", 28130, "mg/kg", "dry_film", "more_than"),
    # UN GHS as read in Regulation (EC) No 1272/2008, Annex I, Tables 3.2.3, 3.3.3, 3.6.2, 3.7.2
    ("un-corrosives-in-a-mixture", "2020-01-01", 5, "% w/w", "mixture", "at_or_above"),
    ("un-eye-damage-in-a-mixture", "2020-01-01", 3, "% w/w", "mixture", "at_or_above"),
    ("un-carcinogen-in-a-mixture", "2020-01-01", 0.1, "% w/w", "mixture", "at_or_above"),
    ("un-reproductive-toxicant-in-a-mixture", "2020-01-01", 0.3, "% w/w", "mixture", "at_or_above"),
]
# Days on which a text first applied, from the texts: the day before, there was no such limit.
FIRST_DAYS = [("us-lead-in-dry-film", "2009-08-14"), ("eu-cadmium-in-paint", "2016-03-07"),
              ("eu-tattoo-lead", "2022-01-04"), ("eu-phthalates-in-articles", "2020-07-07"),
              ("eu-voc-interior-wall-matt", "2007-01-01"), ("eu-phenylmercury-compounds", "2017-10-10")]


@pytest.mark.parametrize("rule_id, day, figure, unit, basis, comparison", PRINTED)
def test_a_limit_is_as_printed(rule_id, day, figure, unit, basis, comparison):
    rule = RULES[rule_id]
    limit = in_force(rule.limit, date.fromisoformat(day))
    assert limit is not None and limit.value == figure
    assert (rule.quantity.unit, rule.quantity.basis, rule.comparison) == (unit, basis, comparison)


@pytest.mark.parametrize("rule_id, day", FIRST_DAYS)
def test_there_is_no_limit_the_day_before(rule_id, day):
    first = date.fromisoformat(day)
    rule = RULES[rule_id]
    assert in_force(rule.limit, first) is not None
    assert in_force(rule.limit, date.fromordinal(first.toordinal() - 1)) is None


def test_us_fractions_of_lead_agree_with_canada_where_both_speak():
    """0.009 % by weight is 90 mg/kg: two texts, one figure."""
    us, canada = RULES["us-lead-in-dry-film"], RULES["ca-lead-in-surface-coating"]
    assert us.limit[-1].value * 1e4 == pytest.approx(canada.limit[-1].value)
