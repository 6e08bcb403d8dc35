"""What no sentence of the catalogue may say, in what order hands must move, and how hard a text is to read.

Written apart from the catalogue: it shares no code and no word lists with the core. It reads English by pattern, so it is strict
rather than clever: a clause that names a hazard must itself carry the "never" or "do not" that forbids it; a negation one comma
away does not count. Patterns are a net, not a reader: whoever adds a sentence also reads it against the safety rules, and whoever
finds a bad one that slips through plants it in test_words.py.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Iterable, Iterator, Sequence


@dataclass(frozen=True, slots=True)
class Rule:
    """One thing not to say. negatable -- a warning against it may; owner -- it binds words for owners only, not the trade's."""

    name: str
    pattern: re.Pattern[str]
    negatable: bool = True
    owner: bool = False


def _rule(name: str, *patterns: str, negatable: bool = True, owner: bool = False) -> Rule:
    return Rule(name, re.compile("|".join(f"(?:{pattern})" for pattern in patterns), re.IGNORECASE), negatable, owner)


_GROUND = r"(?:ground(?:ing)?|earth(?:ing)?|green|bonding|protective)\b(?![- ]fault)"
_DEVICE = r"(?:breaker|fuse|device|handle|button|relay)"
_OPENS = (
    r"(?:open|unscrew|unbolt|undo|pry|prise|take off|remove|lift off|look inside|look into|reach into|reach inside|get into|work in)"
    r"(?:s|ing)?\b"
)
_ENCLOSURE = r"(?:post|pedestal|enclosure|dock box|power box|shore box|meter box|transformer)"
_LIVE = r"(?:live|energi[sz]ed|bare|hot) (?:\S+ )?(?:end|pins?|blades?|wires?|cord|parts?|bus)"
_OUTLET = r"(?:outlet|socket|receptacle|post|pedestal|hook-up|supply|circuit|dock)"

CLAUSE_RULES: tuple[Rule, ...] = (
    _rule(
        "called safe",
        r"\bsafe(?:ly)?\b",
        r"\b(?:harmless|healthy|foolproof|(?:risk|danger|hazard|trouble|fault|leak)[- ]?free)\b",
        r"\b(?:all clear|all is well|all good|good to go|out of danger|in the clear)\b",
        r"\b(?:is|are|looks?|seems?|reads?|be) (?:perfectly |quite |all )?(?:fine|ok|okay|all right|alright)\b",
        r"\b(?:fine|ok|okay|free) to (?:use|swim|plug|touch|stay|sleep)\b",
        r"\b(?:can|may|could) (?:\S+ ){0,4}?(?:swim|go swimming|relax|sleep well)\b",
        r"\b(?:danger|risk|hazard) (?:is|has) (?:over|past|passed|gone)\b",
        r"\b(?:clear|free) of (?:danger|current|leaks?|faults?)\b",
        r"\bwith confidence\b|\bis sound\b|\bin (?:good|perfect) (?:order|shape|condition)\b",
        r"\b(?:boat|dock|wiring|cord|outlet|water)s? (?:has |have )?(?:pass|passed|passes|checks out|check out)\b",
    ),
    _rule(
        "called safe",
        r"\b(?:safer|safest)\b",
        r"\bno (?:danger|risk|hazard|harm)\b",
        r"\b(?:not|isn't|hardly|never) (?:at all )?(?:unsafe|dangerous|harmful|hazardous|deadly)\b",
        r"\bnothing (?:is )?(?:wrong|to worry|to fear|dangerous|leaks|leaking)\b",
        r"\b(?:nobody|no one) (?:can|will|could) (?:get|be) (?:hurt|shocked|killed)\b",
        r"\b(?:do not|don't|no need to|never) worry\b",
        r"\bthere(?:'s| is| are) no (?:fault|leak|leaks|leakage)\b(?! now)",
        r"\bno leak(?:age)?\b(?! now\b)",
        negatable=False,
    ),
    _rule(
        "lifts a ground",
        r"\b(?:lift|cut|snip|clip|remove|break|bend|disconnect|detach|unhook|unscrew|undo|float|isolate|omit|skip|loosen|pull|take|saw|file|tape|unplug)"
        rf"(?:s|ting|ing)?\b(?: \S+){{0,4}}? {_GROUND}",
        rf"\b{_GROUND}.{{0,25}}\b(?:lifted|removed|cut|disconnected|taped|snipped|bent|broken off|left (?:off|out|open))\b",
        rf"\bleave (?:the |its )?{_GROUND}.{{0,12}}\b(?:off|out|open|loose|disconnected)\b",
        rf"\bwithout (?:the |its |a |any )?{_GROUND}",
        r"\b(?:lift|cut|snip|clip|remove|break|bend|saw|file|without)\b(?: \S+){0,3} (?:third|round) (?:pin|prong|blade)\b",
        r"\b(?:two|2|three-to-two)[- ](?:prong|pin|wire) adapter\b",
    ),
    _rule(
        "bypasses a device",
        r"\b(?:by-?pass\w*|jumper\w*|bridg(?:e|es|ed|ing)|defeat\w*|disabl\w*|overrid\w*|overrode|cheat\w*|hot-?wir\w*)\b",
        r"\bshort(?:s|ing)? (?:out|across|past)\b|^\W*short\b|\bwedg(?:e|es|ing)\b",
        rf"\b(?:hold|tape|wedge|tie|jam|block|glue|force)\b(?: \S+){{0,2}} {_DEVICE}\b",
        r"\btake (?:the |that )?(?:\S+ )?device out of (?:the )?circuit\b",
        rf"^\W*(?:wire|connect|feed|run)\b(?: \S+){{0,4}} (?:around|past) (?:the )?(?:\S+ )?{_DEVICE}\b",
        rf"^\W*past the {_DEVICE}\b",
    ),
    _rule(
        "up-rates a device",
        r"\bup-?rat\w*",
        rf"\b(?:bigger|larger|higher|stronger|heavier|slower)(?:[- ]rated)? (?:\S+ )?(?:{_DEVICE}|one|rating|setting)\b",
        r"\b(?:raise|increase|turn up|dial up|widen)\b(?: \S+){0,2} (?:trip|rating|setting|limit|threshold)\b",
        r"\bless sensitive\b",
        r"\bsensitivity\b",
        r"\b(?:swap|replace|change)\b.{0,40}\b(?:for|with|by) (?:a |an |one of )?\d+ ?A\b",
        r"\b(?:put in|fit|install) (?:a |an )?\d+ ?m?A\b",
        r"\b(?:100|300|500) ?mA\b.{0,30}\b(?:instead|in its place)\b",
        r"\b(?:replace|swap)\b.{0,40}\b(?:with|by|for) (?:a |an |one of )?(?:100|300|500) ?mA\b",
    ),
    _rule(
        "defeats a plug",
        r"\b(?:cut|file|trim|grind|bend|modify|force|reshape|shave|twist)\b(?: \S+){0,2} (?:plug|blades?|pins?|connector)\b",
        r"\bmake (?:the|a|that) plug fit\b",
    ),
    _rule(
        "one tail of a Y",
        r"\b(?:one|single|either|half|first|other|second)(?: \S+)? (?:tail|leg|plug|end|side|half|cord)s?(?: alone)?"
        r" (?:of|on|from) (?:the |a |your |this |that )?(?:\w+ )?(?-i:Y)\b",
        r"\b(?:one|either) of (?:the |your |both |its )?(?:two |shore )*(?:cords|plugs|tails|legs)\b",
        r"\b(?:leave|let) (?:the )?(?:other|second|loose) (?:\S+ )?(?:tail|plug|cord|end|leg)\b",
        r"\b(?:try|unplug|plug in|connect|power|energi[sz]e) (?:with )?(?:just |only )?one (?:cord|tail|leg)\b",
        r"\b(?:one|either) of (?:the |a )?(?-i:Y)'s\b|\bone breaker (?:of|on|for) the (?-i:Y)\b",
        r"\b(?:only|just) (?:the )?(?:left|right|first|second|one) (?:cord|plug|tail|leg)\b",
        r"\b(?:first|second|left|right) of the (?:two )?(?:cords|plugs|tails|legs)\b",
        r"\b(?:tails?|legs?|plugs?|cords?) one (?:at a time|by one|after the other)\b",
    ),
    _rule(
        "opens a shore enclosure",
        rf"\b{_OPENS}(?: (?!from\b|out\b)\S+){{0,7}} {_ENCLOSURE}\b(?!'s| breaker| device)",
        rf"\btake\b(?: \S+){{0,4}} off\b(?: \S+){{0,3}} {_ENCLOSURE}\b|\binside (?:of )?(?:the |a )?(?:dock )?{_ENCLOSURE}\b",
        r"\b(?:unscrew|unbolt|open|take apart)\b(?: \S+){0,2} (?:outlet|socket|receptacle)\b(?!'s)",
        rf"\bwith (?:the |its )?{_ENCLOSURE}(?:'s)?(?: \S+)? (?:open|opened|off)\b",
    ),
    _rule(
        "opens a panel",
        r"\b(?:open|remove|unscrew|take off|lift off|undo)\b(?: \S+){0,4} (?:panel|switchboard|cover|covers|lid|fuse box|housing)\b",
        owner=True,
    ),
    _rule(
        "probes something live",
        r"\bprob(?:e|es|ing)\b",
        rf"\b(?:measure|meter|touch|read|test|check)\b(?: \S+){{0,4}} {_LIVE}\b",
        r"\b(?:measure|read|meter|test|check)\b(?: \S+){0,5} (?:in|into|at|inside|on|across) (?:the |an? )?(?:\S+ )?"
        r"(?:outlet|receptacle|socket|panel|inlet)\b",
        r"\b(?:measure|read|meter|test|check)\b(?: \S+){0,4} (?:across|between) (?:the )?(?:\S+ )?(?:blades|pins|slots|terminals|legs)\b",
        r"\b(?:put|stick|push|insert|poke|hold)\b(?: \S+){0,3} (?:leads?|tester|fingers?|screwdriver|wire|meter)\b.{0,20}"
        r"\b(?:outlet|receptacle|socket|slot|slots|pins?|panel|cord)\b",
        owner=True,
    ),
    _rule(
        "resets again",
        r"\breset(?:s|ting)? (?:it|the|that|your|twice|again|until|once more)\b",
        r"\b(?:push|press|flip|switch|turn|put) (?:it|power|the (?:breaker|handle|power|switch))(?: \S+)?"
        r" (?:back (?:in|on)|(?:up|on) again)\b",
        r"\b(?:turn|switch|put)\b(?: \S+){0,3} on\b.{0,20}\b(?:again|twice|until|repeatedly|a second time|several times)\b",
        r"\bkeep (?:on )?(?:trying|resetting|pressing|turning)\b",
        r"\btry (?:it |that )?(?:again|once more|a second time)\b",
    ),
    _rule(
        "sends someone into the water",
        r"\bjump in\b|\bdive\b|\bstand(?:ing)? in (?:the )?water\b",
        r"\b(?:jump|dive|go|goes|get|climb|wade) in(?:to)? (?:the )?(?:water|sea|lake|harbou?r)\b",
        r"\b(?:have|send|ask|get) (?:a|the|your) (?:swimmer|diver)\b",
        r"\bswim (?:to|over|out|under|around|near|along)\b",
    ),
    _rule(
        "lends the hazard",
        r"\b(?:plug|try|connect|let|ask|have|get)\b(?: \S+){0,3} (?:another|other|neighbou?r's|someone else's) (?:boat|skipper|owner)\b",
        r"\b(?:plug|try|connect|let|ask|have|get)\b(?: \S+){0,2} (?:boat|skipper|people|neighbou?rs?) next (?:door|to you)\b",
        r"\b(?:let|ask|have|get)\b(?: \S+){0,2} neighbou?r(?: to)? (?:plug|try|connect)\b",
    ),
    _rule(
        "handles what is hot or wet",
        r"\b(?:pull|unplug|touch|grab|lift)\b(?: \S+){0,2} (?:hot|burnt|burning|melted|live) (?:plug|cord|end|outlet)\b",
        r"\bwith wet (?:hands|feet)\b|\bwith the power (?:still )?on\b",
        r"\b(?:grab|touch|pull|hold|lift) the (?:person|swimmer|victim)\b",
        r"\b(?:pull|unplug|connect|plug)\b.{0,20}\bwhile (?:it|the loads?) (?:is |are )?(?:runs|running|on|live)\b",
        r"\b(?:in|during|through) (?:a|the) thunderstorm\b",
        r"\b(?:pull|unplug)\b.{0,25}\bunder load\b",
    ),
    _rule(
        "powers what is damaged",
        r"\b(?:turn|switch|put)(?:s|ed)? (?:\S+ ){0,4}?on\b.{0,20}\bafter (?:the|a|that) (?:bang|flash|smell|short)\b",
        r"\bdr(?:y|ies|ied|ying)\b(?: \S+){0,4} (?:under|on|with|from) (?:the |shore |dock )*(?:power|current)\b",
        r"\b(?:leave|keep|run) both (?:\S+ )?(?:on|running)\b",
    ),
    _rule("ignores a warning", r"\b(?:ignore|disregard|overlook|silence)\b"),
    _rule(
        "fumes",
        r"\b(?:run|use|start|light|leave)\b(?: \S+){0,4} (?:generator|heater|stove|grill)\b.{0,30}"
        r"\b(?:sleep\w*|asleep|overnight|cabin|below)\b|\bto heat the cabin\b",
        r"\bsleep\b.{0,30}\b(?:generator|heater|stove|grill) (?:running|on|lit)\b",
    ),
)

# These cross commas, so they read the whole text; the negation of the clause in which they begin counts.
TEXT_RULES: tuple[Rule, ...] = (
    _rule("called safe", r"\bno leak(?:age)? now\b(?!, with these loads running)", negatable=False),
    _rule("powers what is damaged", r"\b(?:run|leave|keep)\b(?: \S+){0,6} until (?:it|they) (?:is|are|has|have) dr(?:y|ied)\b"),
    _rule(
        "one tail of a Y",
        r"(?<=\b(?-i:Y)\b).{0,40}\bone (?:tail|leg|plug|side|end)\b",
        r"\bone (?:cord|plug|tail|leg)\b.{0,40}\b(?:other|second)(?: one)? (?:\S+ )?(?:hang\w*|loose|out|off|free|unplugged|dangl\w*)\b",
    ),
)

_UNPROTECTED = re.compile(
    rf"\b(?:unprotected|ungrounded|non-tripping) {_OUTLET}"
    rf"|\b{_OUTLET}s?\b[^.!?]{{0,40}}?\b(?:without|has no|have no|with no|lacks?|not fitted with)\b"
    r"[^.!?]{0,20}(?:ground-fault|protect|device|test)"
    rf"|\b{_OUTLET}s?\b.{{0,20}}\b(?:never trips?|(?:does not|doesn't|do not|don't|can't) trip)\b",
    re.IGNORECASE,
)
_PROPOSES = re.compile(r"\b(?:use|try|move|go|plug|connect|swap|switch|run|take|shift|choose|find)\b", re.IGNORECASE)

_BREAK = re.compile(r"[.;:,!?()–—“”…]|\b(?:and|but|then|so|because|until|unless)\b", re.IGNORECASE)
_CONDITION = re.compile(r"^\W*(?:if|when|where|while|since|once|as)\b", re.IGNORECASE)
_NEGATION = re.compile(
    r"\b(?:never|not|no|nobody|nothing|none|neither|nor|without|cannot|avoid|stop|instead of|rather than|refuse)\b|n't\b", re.IGNORECASE
)
# Words that look like a negation and urge the thing on.
_URGING = re.compile(
    r"\b(?:not only|not just|why not|no longer (?:un|dangerous)"
    r"|no (?:doubt|question|problem|matter|reason not|objection)|without (?:a |any )?(?:doubt|worry|fear)"
    r"|(?:do not|don't|never) (?:hesitate|forget|fail|worry|wait|mind|be afraid)"
    r"|nothing (?:stops|keeps|but)|nobody (?:will )?(?:minds?|notices?|knows?))\b",
    re.IGNORECASE,
)


def forbidden(sentence: str, reader: str = "owner") -> list[str]:
    """Names of the rules that a text breaks, sorted, none twice. reader -- "owner", or "trade" for words that only the trade is shown."""
    text = sentence.replace("(earth) ", "").replace(" (earth)", "").replace(" (pedestal)", "").replace("’", "'")
    found = set()
    for start, clause in _clauses(text):
        found |= {rule.name for rule in CLAUSE_RULES if _binds(rule, reader) and _says(rule, clause, 0)}
        found |= {rule.name for rule in TEXT_RULES if _binds(rule, reader) and _says_from(rule, text, start, clause)}
    if _UNPROTECTED.search(text) and any(_says_plainly(_PROPOSES, clause) for _, clause in _clauses(text)):
        found.add("unprotected outlet")
    return sorted(found)


def _clauses(text: str) -> Iterator[tuple[int, str]]:
    start = 0
    for mark in _BREAK.finditer(text):
        yield start, text[start : mark.start()]
        start = mark.end()
    yield start, text[start:]


def _binds(rule: Rule, reader: str) -> bool:
    return reader == "owner" or not rule.owner


def _says(rule: Rule, clause: str, begin: int) -> bool:
    return any(not (rule.negatable and negated(clause[: found.start()])) for found in rule.pattern.finditer(clause, begin))


def _says_from(rule: Rule, text: str, start: int, clause: str) -> bool:
    """A hazard that ends beyond its clause: judged in the clause where its last part stands."""
    for found in rule.pattern.finditer(text):
        if start <= found.end() - 1 < start + len(clause) and not (rule.negatable and negated(clause[: found.end() - start])):
            return True
    return False


def _says_plainly(pattern: re.Pattern[str], clause: str) -> bool:
    return any(not negated(clause[: found.start()]) for found in pattern.finditer(clause))


def negated(before: str) -> bool:
    """Whether the words of a clause before a hazard forbid it. A condition ("if nothing helps ...") forbids nothing."""
    return not _CONDITION.search(before) and _NEGATION.search(_URGING.sub(" ", before)) is not None


_POST_OFF = re.compile(r"\bturn off (?:the|both) breakers? on the (?:new )?dock post\b", re.IGNORECASE)
_POST_ON = re.compile(r"\bturn on (?:the|both) breakers? on the (?:new )?dock post\b", re.IGNORECASE)
_MAIN_OFF = re.compile(r"\b(?:turn off the main switch|main off)\b", re.IGNORECASE)
_MAIN_ON = re.compile(r"\bturn on the main switch\b", re.IGNORECASE)
_MOVES = re.compile(
    r"(?:^|[.] |then |: )(?:then )?(?:pull|push|plug|unplug|connect|take|insert)\b[^.]*?\b(?:plugs?|cord|post|socket|Y|lead|end|it)\b",
    re.IGNORECASE,
)
_ACTS = ((_POST_OFF, "post off"), (_POST_ON, "post on"), (_MAIN_OFF, "main off"), (_MAIN_ON, "main on"), (_MOVES, "moves"))


def moves_live(steps: Sequence[str]) -> list[str]:
    """Steps in which something is plugged or unplugged while the dock breaker or the boat's main is not known to be off.

    The dock and the boat count as live at the start. A step may switch first and move after, in that order.
    """
    post, main, wrong = True, True, []
    for step in steps:
        marks = [(found.start(), act) for pattern, act in _ACTS for found in pattern.finditer(step)]
        for _, act in sorted(marks):
            if act == "moves" and (post or main):
                wrong.append(step)
            post = {"post off": False, "post on": True}.get(act, post)
            main = {"main off": False, "main on": True}.get(act, main)
    return wrong


def left_live(steps: Sequence[str]) -> bool:
    """Whether the dock breaker may be on after the last step; true as well when no step switched it off."""
    marks = [(index, found.start(), act) for index, step in enumerate(steps) for pattern, act in _ACTS for found in pattern.finditer(step)]
    last = [act for _, _, act in sorted(marks) if act.startswith("post")][-1:]
    return last != ["post off"]


def grade(texts: Iterable[str]) -> float:
    """Flesch-Kincaid grade level: 0.39 words/sentences + 11.8 syllables/words - 15.59 (Kincaid et al. 1975); syllables by vowel groups."""
    joined = " ".join(texts)
    sentences = max(1, len(re.findall(r"[.!?](?=\s|$)", joined)))
    words = re.findall(r"[A-Za-z][A-Za-z'’]*", joined)
    return 0.39 * len(words) / sentences + 11.8 * sum(map(_syllables, words)) / len(words) - 15.59


def _syllables(word: str) -> int:
    """Vowel groups, less a silent final e; about right on average, which is all the grade needs."""
    bare = re.sub(r"(?<![aeiouyl])e$|(?<![td])ed$|(?<![sxzc])es$", "", word.lower())
    return max(1, len(re.findall(r"[aeiouy]+", bare)))
