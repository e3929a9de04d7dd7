"""Within, exceeds, cannot tell: what each hangs on, told by small mixtures and small rules."""

from __future__ import annotations

from datetime import date

import pytest

from formcheck.hazards.book import Book, Written
from formcheck.hazards.compiled import compile_book
from formcheck.hazards.judge import judge
from formcheck.hazards.open_questions import open_questions
from formcheck.hazards.rule import KINDS
from formcheck.hazards.vocabulary import Vocabulary
from tests.hazards.mixtures import facts, knowledge, material

DAY = date(2026, 6, 1)
WORDS = Vocabulary.model_validate({
    "groups": {"carbonate": {"meaning": "carbonates", "kinds": ["extender", "base"]}},
    "hazard_classes": {"Carc. 1B": {"codes": ["H350"], "generic_limit_percent": 0.1},
                       "Skin Sens. 1": {"codes": ["H317"], "generic_limit_percent": 1.0}},
    "markets": {"EU": {"meaning": "the Union", "members": ["DE"]}, "US": {"meaning": "the States"}},
    "what": {"coating": "paint", "ink": "ink"}, "uses": {"consumer": "public"}, "acts": {"spraying": "sprayed"}})
COMMON = {"id": "test-rule", "title": "A rule", "jurisdiction": "any", "review_by": "2027-01-01", "why": "why",
          "what_to_do": "do", "who_decides": "who", "examples": [
              {"ingredients": [{"percent": 1}], "expect": "exceeds"},
              {"ingredients": [{"percent": 1}], "expect": "within"}]}
LAW = {"law": {"instrument": "An Act", "kind": "law", "edition": "2020"}}
PRACTICE = {"practice": {"instrument": "practice", "kind": "common_practice", "verified": False}}


def rule(kind, **more):
    data = COMMON | {"kind": kind} | more
    if kind in ("must_not_meet", "caution"):
        data["examples"] = [{"ingredients": [{"percent": 1}], "expect": "applies"},
                            {"ingredients": [{"percent": 1}], "expect": "no_flag"}]
        data = {"grade": {"applies": "care", "cannot_tell": "unknown"}, "sources": PRACTICE,
                "in_force": {"source": "practice"}} | data
    return KINDS[kind].model_validate(data)


def limit(of, value, *, unit="% w/w", comparison="more_than", **more):
    quantity = {"of": of, "name": "it", "unit": unit} | {k: more.pop(k) for k in ("basis", "each",
                                                         "specific_limits") if k in more}
    return rule("limit_on_sum", quantity=quantity, comparison=comparison, sources=LAW,
                limit=[{"from": "2020-01-01", "value": value, "source": "law"}],
                grade={"exceeds": "stop", "cannot_tell": "hold"}, **more)


def answers(one, mixture, *, as_of=DAY):
    book = Book({one.id: Written(one, "test.yaml", "test", False)}, WORDS)
    compiled = compile_book(book, mixture.materials, knowledge(*mixture.materials), as_of=as_of)
    return judge(compiled, mixture)


def answer(one, mixture, **more):
    (single,) = answers(one, mixture, **more)
    return single


WATER = material("water", kind="water", formula="H2O")
LEAD_ASSAY = {"only": ["Pb", "O"], "mg_kg": {"Pb": {"value": 9000, "source": "test"}}, "source": "test"}
DRIER = material("drier", cas="111-11-1", elements=LEAD_ASSAY)
NO_LEAD = {"only": ["C", "H", "O"], "source": "test"}
RESIN = material("resin", kind="binder", cas="222-22-2", elements=NO_LEAD)


class TestLimits:
    LEAD = limit([{"element": "Pb"}], 90, unit="mg/kg", basis="dry_film")

    def test_a_film_holds_more_than_the_wet_paint(self):
        wet = limit([{"element": "Pb"}], 90, unit="mg/kg")
        mixture = facts([WATER, DRIER, RESIN], [0.9, 0.009, 0.091], nonvolatile=[0, 1, 1])
        dry, whole = answer(self.LEAD, mixture), answer(wet, mixture)
        assert dry.value == pytest.approx(0.009 * 9000 / 0.1)  # 810 mg/kg
        assert whole.value == pytest.approx(81)
        assert (dry.answer, whole.answer) == ("exceeds", "within")
        assert (dry.grade, whole.grade) == ("stop", None)

    def test_a_paint_that_leaves_nothing_has_no_film_to_exceed_in(self):
        assert answer(self.LEAD, facts([WATER], [1.0], nonvolatile=[0])).answer == "within"

    def test_what_stays_in_the_film_is_asked_for_when_it_decides(self):
        paste = material("paste", kind="dispersion", cas="333-33-3", elements=NO_LEAD)
        mixture = facts([DRIER, paste], [0.001, 0.999], nonvolatile=[1, None])
        told = answer(self.LEAD, mixture)
        assert told.answer == "cannot_tell" and told.grade == "hold"
        assert told.would_settle == ("the part that stays in the dry film of paste",)
        assert told.value is None and told.value_low == pytest.approx(9) and told.value_high == pytest.approx(9000)

    def test_unknown_content_names_the_ingredient_and_known_content_decides_without_it(self):
        mystery = material("mystery", cas="444-44-4")
        told = answer(self.LEAD, facts([mystery, RESIN], [0.01, 0.99], nonvolatile=[1, 1]))
        assert told.answer == "cannot_tell"
        assert told.would_settle == ("the Pb content of mystery",)
        assert told.place == "recipe.yaml:5:3"
        certain = answer(self.LEAD, facts([mystery, DRIER], [0.5, 0.5], nonvolatile=[1, 1]))
        assert certain.answer == "exceeds" and certain.would_settle == ()

    def test_an_unknown_amount_is_what_the_others_leave(self):
        mixture = facts([DRIER, RESIN], [None, 0.995], nonvolatile=[1, 1])
        told = answer(limit([{"element": "Pb"}], 90, unit="mg/kg"), mixture)
        assert told.value == pytest.approx(45)  # 0.5 % of 9000 mg/kg
        assert told.answer == "within"

    def test_the_limit_itself_counts_as_the_comparison_says(self):
        mixture = facts([DRIER, RESIN], [0.01, 0.99], nonvolatile=[1, 1])
        assert answer(limit([{"element": "Pb"}], 90, unit="mg/kg"), mixture).answer == "within"
        at = limit([{"element": "Pb"}], 90, unit="mg/kg", comparison="at_or_above")
        assert answer(at, mixture).answer == "exceeds"

    def test_contributions_add_up_to_the_value(self):
        mixture = facts([DRIER, DRIER, RESIN], [0.01, 0.02, 0.97], nonvolatile=[1, 1, 1])
        told = answer(self.LEAD, mixture)
        assert sum(share.low for share in told.contributions) == pytest.approx(told.value)
        assert [share.name for share in told.contributions] == ["drier", "drier"]

    def test_voc_without_a_figure_cannot_be_told(self):
        one = limit([{"voc": "ready_to_use"}], 130, unit="g/L", basis="as_used")
        assert answer(one, facts([WATER], [1.0], voc=131)).answer == "exceeds"
        told = answer(one, facts([WATER], [1.0]))
        assert told.answer == "cannot_tell" and told.value_high is None
        assert told.would_settle == ("the VOC content of the mixture",)

    def test_grams_per_litre_need_the_density(self):
        one = limit([{"share": {"cas": ["111-11-1"]}}], 20, unit="g/L", basis="as_used")
        mixture = facts([DRIER, WATER], [0.0175, 0.9825], density=1.2)
        told = answer(one, mixture)
        assert told.value == pytest.approx(21.0) and told.answer == "exceeds"
        lost = answer(one, facts([DRIER, WATER], [0.0175, 0.9825], density=None))
        assert lost.answer == "cannot_tell" and lost.would_settle == ("the density of the mixture",)
        assert answer(one, facts([RESIN, WATER], [0.5, 0.5], density=None)).answer == "within"

    def test_a_further_condition_lifts_the_rule_only_when_it_surely_fails(self):
        one = limit([{"element": "Pb"}], 90, unit="mg/kg", only_if=[
            {"of": [{"share": {"kind": ["water"]}}], "name": "water", "unit": "% w/w",
             "comparison": "more_than", "value": 50}])
        dry = facts([DRIER, RESIN], [0.5, 0.5])
        assert answer(one, dry).answer == "not_applicable"
        assert answer(one, facts([DRIER, WATER], [0.3, 0.7])).answer == "exceeds"
        unsure = facts([DRIER, material("latex", kind="dispersion")], [0.3, 0.7])
        assert answer(one, unsure).answer == "cannot_tell"

    def test_before_the_first_day_nothing_is_in_force(self):
        mixture = facts([DRIER], [1.0], nonvolatile=[1])
        assert answer(self.LEAD, mixture, as_of=date(2019, 12, 31)).answer == "not_in_force"
        assert answer(self.LEAD, mixture, as_of=date(2020, 1, 1)).answer == "exceeds"

    def test_a_part_that_only_a_test_tells_is_never_surely_exceeded(self):
        one = limit([{"element": "Pb", "only_the": "lead that migrates"}], 90, unit="mg/kg", examples=[
            {"ingredients": [{"percent": 1}], "expect": word} for word in ("cannot_tell", "within")])
        high = answer(one, facts([DRIER], [1.0]))
        assert high.answer == "cannot_tell" and high.would_settle == ("a test for lead that migrates",)
        assert answer(one, facts([DRIER, RESIN], [0.005, 0.995])).answer == "within"


class TestClasses:
    EACH = limit([{"share": {"hazard_class": ["Carc. 1B"]}}], 0.1, comparison="at_or_above", each=True)

    def carcinogen(self, name, number, own=None):
        entry = {"hazard_class": "Carc. 1B", "code": "H350", "source": "test", "specific_limit_percent": own}
        return material(name, cas=number, hazards={"status": "classified", "entries": [entry], "source": "test"})

    def test_each_substance_counts_by_itself_and_two_lines_of_it_together(self):
        one, other = self.carcinogen("one", "111-11-1"), self.carcinogen("other", "222-22-2")
        same = self.carcinogen("same", "111-11-1")
        apart = answer(self.EACH, facts([one, other, WATER], [0.0006, 0.0006, 0.9988]))
        assert apart.answer == "within"
        assert answer(self.EACH, facts([one, same, WATER], [0.0006, 0.0006, 0.9988])).answer == "exceeds"

    def test_a_limit_of_its_own_goes_first(self):
        source = {"lowest": 0.001, "source": "law"}
        one = limit([{"share": {"hazard_class": ["Carc. 1B"]}}], 0.1, comparison="at_or_above", each=True,
                    specific_limits=source)
        strict, lax = self.carcinogen("strict", "111-11-1", 0.01), self.carcinogen("lax", "222-22-2", 3.0)
        assert answer(one, facts([strict, WATER], [0.0002, 0.9998])).limit == pytest.approx(0.01)
        assert answer(one, facts([strict, WATER], [0.0002, 0.9998])).answer == "exceeds"
        assert answer(one, facts([lax, WATER], [0.02, 0.98])).answer == "within"
        silent = self.carcinogen("silent", "333-33-3")
        told = answer(one, facts([silent, WATER], [0.0002, 0.9998]))
        assert told.answer == "cannot_tell"
        assert told.would_settle == ("the limit that the classification sets for the substance itself",)

    def test_a_product_classified_without_the_class_holds_less_than_the_generic_limit(self):
        clean = material("paste", kind="dispersion", hazards=[])
        assert answer(self.EACH, facts([clean, WATER], [0.9, 0.1])).answer == "within"
        strict = limit([{"share": {"hazard_class": ["Carc. 1B"]}}], 0.01, each=True)
        assert answer(strict, facts([clean, WATER], [0.9, 0.1])).answer == "cannot_tell"

    def test_an_unclassified_record_cannot_be_told_and_not_classified_is_none(self):
        assert answer(self.EACH, facts([material("x", cas="111-11-1")], [1.0])).answer == "cannot_tell"
        assert answer(self.EACH, facts([material("x", cas="111-11-1", hazards=[])], [1.0])).answer == "within"

    def test_constituents_are_looked_at(self):
        carcinogen = self.carcinogen("one", "111-11-1")
        paste = material("paste", kind="dispersion", composition={"one": 0.01, "water": 0.99})
        mixture = facts([paste, WATER, carcinogen], [0.5, 0.5, 0.0])
        told = answer(self.EACH, mixture)
        assert told.answer == "exceeds" and told.value == pytest.approx(0.5)


class TestCompany:
    PAIR = rule("must_not_meet", consequence="gas", first={"name": "acid", "where": {"kind": ["acid"]}},
                second={"name": "carbonate", "where": {"group": ["carbonate"]}})
    ACID = material("vinegar", kind="acid", cas="111-11-1", groups=[])
    CHALK = material("chalk", kind="extender", cas="222-22-2", groups=["carbonate"])

    def test_two_that_meet(self):
        told = answer(self.PAIR, facts([self.ACID, self.CHALK], [0.5, 0.5]))
        assert told.answer == "applies" and told.said == "vinegar (acid) and chalk (carbonate) meet: gas"

    def test_one_of_which_too_little_is_known(self):
        bare = material("filler", kind="extender")
        told = answer(self.PAIR, facts([self.ACID, bare], [0.5, 0.5]))
        assert told.answer == "cannot_tell" and not told.faint
        assert "the families (groups) of filler" in told.would_settle
        assert answer(self.PAIR, facts([self.ACID, WATER], [0.5, 0.5])).answer == "no_flag"

    def test_a_kind_that_cannot_be_of_the_family_is_no_question(self):
        bare = material("dyestuff", kind="dye", cas="333-33-3")
        assert answer(self.PAIR, facts([self.ACID, bare], [0.5, 0.5])).answer == "no_flag"

    def test_one_material_does_not_meet_itself(self):
        both = material("both", kind="acid", cas="111-11-1", groups=["carbonate"])
        assert answer(self.PAIR, facts([both, WATER], [0.5, 0.5])).answer == "no_flag"
        assert answer(self.PAIR, facts([both, both], [0.5, 0.5])).answer == "no_flag"
        assert answer(self.PAIR, facts([both, self.ACID], [0.5, 0.5])).answer == "applies"

    def test_a_ph_condition_with_unknown_ph(self):
        one = self.PAIR.model_copy(update={"when": type(self.PAIR.when)(ph_below=6.0)})
        def mixture(ph):
            return facts([self.ACID, self.CHALK, WATER], [0.1, 0.1, 0.8], ph=ph)
        assert answer(one, mixture(5.0)).answer == "applies"
        assert answer(one, mixture(6.5)).answer == "no_flag"
        assert answer(one, mixture((5.5, 6.5))).answer == "cannot_tell"
        told = answer(one, mixture(None))
        assert told.answer == "cannot_tell" and told.would_settle == ("the pH of the mixture",)

    def test_charges(self):
        clash = rule("must_not_meet", consequence="clots",
                     first={"name": "anionic dye", "where": {"kind": ["dye"], "charge": ["anionic"]}},
                     second={"name": "cationic agent", "where": {"kind": ["surfactant"], "charge": ["cationic"]}})
        dye = material("dye", kind="dye", cas="111-11-1", charge="anionic")
        agent = material("agent", kind="surfactant", cas="222-22-2", charge="cationic")
        unknown = material("agent2", kind="surfactant", cas="333-33-3")
        assert answer(clash, facts([dye, agent], [0.5, 0.5])).answer == "applies"
        told = answer(clash, facts([dye, unknown], [0.5, 0.5]))
        assert told.answer == "cannot_tell" and told.would_settle == ("the ionic charge of agent2",)

    def test_nothing_points_to_it_but_nothing_rules_it_out(self):
        mixture = facts([material("a", kind="additive"), material("b", kind="additive")], [0.5, 0.5])
        told = answer(self.PAIR, mixture)
        assert told.answer == "cannot_tell" and told.faint


class TestWindows:
    WINDOW = rule("ph_window", where={"kind": ["pigment"]}, window=[{"low": 5.0, "high": 9.0, "source": "book"}],
                  below="it fades", above="it dissolves", grade={"exceeds": "hold", "cannot_tell": "unknown"},
                  sources={"book": {"instrument": "A handbook", "kind": "handbook"}})
    BLUE = material("blue", kind="pigment", cas="111-11-1", physical_form="powder")

    @pytest.mark.parametrize("ph, word", [(4.9, "exceeds"), (5.1, "within"), ((8.8, 9.2), "cannot_tell"),
                                          (9.1, "exceeds"), (None, "cannot_tell")])
    def test_inside_outside_or_unknown(self, ph, word):
        told = answer(self.WINDOW, facts([self.BLUE, WATER], [0.2, 0.8], ph=ph))
        assert told.answer == word

    def test_without_water_there_is_no_ph(self):
        oil = material("oil", kind="solvent", cas="222-22-2")
        assert answer(self.WINDOW, facts([self.BLUE, oil], [0.2, 0.8])).answer == "no_flag"
        told = answer(self.WINDOW, facts([self.BLUE, oil], [0.2, 0.8], ph=12.0))
        assert told.answer == "cannot_tell" and told.would_settle == ("whether there is water in the mixture",)

    def test_a_window_from_memory_says_nothing_of_what_is_inside(self):
        source = {"book": {"instrument": "memory", "kind": "memory", "verified": False}}
        one = self.WINDOW.model_validate(self.WINDOW.model_dump(by_alias=True, mode="json") | {"sources": source})
        assert answer(one, facts([self.BLUE, WATER], [0.2, 0.8], ph=7.0)).answer == "no_flag"
        assert answer(one, facts([self.BLUE, WATER], [0.2, 0.8], ph=4.0)).answer == "exceeds"

    def test_windows_of_the_records(self):
        one = rule("ph_window", where={"kind": ["pigment", "dispersion"]}, from_records=True, source="practice",
                   grade={"exceeds": "hold", "cannot_tell": "unknown"}, sources=PRACTICE)
        window = {"low": 7.0, "high": 10.0, "below": "it clots", "source": "test"}
        told_blue = material("blue", kind="pigment", cas="111-11-1", ph_window=window)
        bare = material("green", kind="pigment", cas="222-22-2")
        paste = material("paste", kind="dispersion", composition={"blue": 0.4, "water": 0.6}, ph_window=window)
        found = answers(one, facts([told_blue, bare, WATER], [0.2, 0.2, 0.6], ph=6.0))
        assert [(a.answer, a.ingredients) for a in found] == [("exceeds", (0,)), ("cannot_tell", (1,))]
        assert "it clots" in found[0].said and found[1].would_settle == ("the pH window of green",)
        mixed = facts([paste, WATER, told_blue], [0.5, 0.5, 0.0], ph=6.0)
        assert answers(one, mixed)[0].answer == "exceeds"


class TestCautions:
    DUST = rule("caution", where={"physical_form": ["powder"], "kind": ["pigment"]})
    SENSITISER = rule("caution", where={"hazard_code": ["H317"]})

    def test_as_it_is_handled(self):
        powder = material("blue", kind="pigment", cas="111-11-1", physical_form="powder")
        paste = material("paste", kind="dispersion", physical_form="paste", composition={"blue": 1.0})
        assert answer(self.DUST, facts([powder], [1.0])).answer == "applies"
        assert answer(self.DUST, facts([paste, powder], [1.0, 0.0])).answer == "no_flag"
        bare = material("red", kind="pigment", cas="222-22-2")
        told = answer(self.DUST, facts([bare], [1.0]))
        assert told.answer == "cannot_tell" and told.would_settle == ("the physical form of red",)

    def test_the_classification_of_the_product_speaks_before_its_parts(self):
        part = material("part", cas="111-11-1", hazards=[("Skin Sens. 1", "H317")])
        product = material("product", kind="dispersion", hazards=[], composition={"part": 0.001, "water": 0.999})
        assert answer(self.SENSITISER, facts([product, part], [1.0, 0.0])).answer == "no_flag"
        assert answer(self.SENSITISER, facts([part], [1.0])).answer == "applies"
        unsaid = material("product", kind="dispersion", composition={"part": 0.001, "water": 0.999})
        assert answer(self.SENSITISER, facts([unsaid, part], [1.0, 0.0])).answer == "applies"

    def test_a_trace_may_not_count(self):
        one = rule("caution", where={"hazard_code": ["H317"]}, at_least_percent=1.0)
        part = material("part", cas="111-11-1", hazards=[("Skin Sens. 1", "H317")])
        assert answer(one, facts([part, WATER], [0.02, 0.98])).answer == "applies"
        assert answer(one, facts([part, WATER], [0.002, 0.998])).answer == "no_flag"
        assert answer(one, facts([part, WATER], [None, 0.99])).answer == "cannot_tell"


class TestScope:
    def where(self, **when):
        return limit([{"element": "Pb"}], 90, unit="mg/kg", applies_when=when.pop("applies_when", {}), **when)

    def test_what_the_recipe_does_not_state_may_be_so(self):
        one = self.where(applies_when={"use": ["consumer"]}, jurisdiction="EU")
        bad, good = facts([DRIER], [1.0]), facts([RESIN], [1.0])
        assert answer(one, bad).answer == "exceeds"
        for silent in ({"use": ()}, {"sold_in": ()}):
            told = answer(one, facts([DRIER], [1.0], **silent))
            assert told.answer == "cannot_tell" and told.grade == "hold"
            assert answer(one, facts([RESIN], [1.0], **silent)).answer == "within"
        assert answer(one, good).answer == "within"
        assert answer(one, facts([DRIER], [1.0], sold_in=("US",))).answer == "not_applicable"
        unstated = answer(one, facts([DRIER], [1.0], sold_in=()))
        assert unstated.would_settle == ("where it will be sold",)

    def test_a_member_state_is_in_its_market(self):
        one = self.where(jurisdiction="EU")
        assert answer(one, facts([DRIER], [1.0], sold_in=("DE",))).answer == "exceeds"
        national = self.where(applies_when={"sold_in": ["DE"]}, jurisdiction="EU")
        assert answer(national, facts([DRIER], [1.0], sold_in=("EU",))).answer == "cannot_tell"

    def test_an_exception_lifts(self):
        one = self.where(unless={"acts": ["spraying"]})
        assert answer(one, facts([DRIER], [1.0], acts=("spraying",))).answer == "not_applicable"
        assert answer(one, facts([DRIER], [1.0], acts=("stirring",))).answer == "exceeds"
        assert answer(one, facts([DRIER], [1.0], acts=())).answer == "cannot_tell"


def test_open_questions_put_the_gravest_first():
    lead = limit([{"element": "Pb"}], 90, unit="mg/kg")
    pair = TestCompany.PAIR
    mixture = facts([TestCompany.ACID, material("filler", kind="extender", cas="555-55-5")], [0.5, 0.5])
    told = [answer(lead, mixture), answer(pair, mixture)]
    questions = open_questions(told, mixture.names)
    assert questions[0].grade == "hold" and questions[0].rules == ("test-rule",)
    assert {q.datum for q in questions} >= {"the Pb content of filler", "the families (groups) of filler"}
