"""Every word a person reads, in English: flat keys, each a plain sentence or a tuple of sentences.

Keys name what they belong to (`cause.<id>.title`, `test.<id>.steps`, `question.<id>.<choice>`); fields in braces are filled by
`screen`. Steps are complete: each list starts dark and ends dark, so that a test may follow any other. Facts are common practice
unless a source stands beside them. Another language is another module with the same keys and the same fields.
"""

from __future__ import annotations

# Hands. The order in which things are switched and moved is written once, here, and every list of steps is made of it.
_LOADS_OFF = "Turn off every load aboard. Stop the generator and switch the inverter off."
_MAIN_OFF = "Turn off the main switch aboard."
_POST_OFF = "Turn off the breaker on the dock post (pedestal). With two plugs in use, turn off both breakers before you move either."
_DARK = (_LOADS_OFF, _MAIN_OFF, _POST_OFF)
_POST_OUT = "Pull every plug of yours out of the dock post. Touch none of its pins."
_UNPLUG = (_POST_OUT, "Then take the cord off the boat and cover the boat's inlet.")
_POST_ON = "Turn on the breaker on the dock post, once."
_POSTS_ON = f"{_POST_ON} With two plugs in use, turn on both, one after the other."
_MAIN_ON = "Turn on the main switch aboard."
_MAIN_STAYS_OFF = "Leave the main switch aboard off."
_CORD_IN = "Check that every cord is in at both ends. If one is out, connect the boat end first and the dock post last."
_WAIT_MINUTE = "Wait one minute. Note whether the breaker holds or trips."
_NOTE = "Note whether the breaker holds or trips."
_DONE = "To end: loads off, main off, then turn off the breaker on the dock post."
_BRANCHES_OFF = "Turn off every branch breaker aboard."
_SOURCES_LOCKED = (
    "Turn the inverter off at its DC switch and lock it there.",
    "Lock out the generator start, so that nothing can start it from afar.",
)
_PROVE_DEAD = (
    "Prove the meter on a known live source.",
    "Turn on the main switch aboard, so that the meter sees the boat's buses.",
    "Read AC volts on every pin pair of the inlet and from bus to bus. Each must be below 1 V, or stop here.",
    "Prove the meter on the known source once more.",
)

# Cautions that many tests share.
_CLEAR = "Power goes on only with nobody in the water, dry hands and dry feet."
_ONCE = "Turn it on once. If it trips, leave it off and enter what you saw."
_NEVER_AFTER = "Never do this after a bang, a flash or a smell, and never with thunder about."
_BOTH = "With two dock breakers in use, turn the other one off at once when one opens."
_POLARITY = "If a polarity light comes on, turn the dock breaker off at once."
_DOCK_DARK = "If the whole dock is dark, wait until the marina has it on again."
_LIVE = (_CLEAR, _ONCE, _NEVER_AFTER, _BOTH, _DOCK_DARK)
_ABOARD = (*_LIVE, _POLARITY)
_CLAMP_SMALL = "Use a clamp that shows milliamps. An ordinary one cannot see 30 mA."
_CLAMP_PICKUP = "A heavy load adds a few milliamps of false reading to the clamp."
_TRIPS_FIRST = "If it trips before you can read the clamp, choose “I can't do this one”."

_HOLDS = "It holds"
_TRIPS = "It trips"
_YES = "Yes"
_NO = "No"

# Advice for tonight that many causes share. All of it fits with "unplugged", because the lists of several causes are joined.
_UNPLUGGED = "Leave the boat unplugged from the dock tonight."
_NO_SWIM = "Nobody swims near the boat or the dock."
_TELL = "Tell the marina tonight. Do not wait for the morning."
_LETHAL_TONIGHT = (_UNPLUGGED, _NO_SWIM, _TELL)

_SIGNS = {
    "person_in_water": "Someone is in the water",
    "person_down": "Someone is hurt, down or does not answer",
    "tingling": "A tingle from metal, a tap, the shower, the ladder or the engine",
    "bright_or_dim": "Lights very bright, or half the boat dim",
    "hot_plug": "A hot, melted or burnt plug",
    "smell_or_bang": "A burnt smell, smoke, a bang or a flash",
    "water_in_outlet": "Water in a dock outlet, a plug or the post",
    "pedestal_damaged": "The dock post is knocked, leaning or under water",
    "cord_in_water": "A shore cord lies in the water",
    "lightning": "Thunder or lightning",
    "taking_water": "The boat is taking on water",
}

WORDS: dict[str, str | tuple[str, ...]] = {
    # --- the gate, stop, tonight, and the usual cautions: also written into the page, so that they need no engine ---
    "gate.title": "First: is anyone in danger?",
    "gate.lead": (
        "Look and ask around before you touch anything.",
        "If you see even one of these, tap it.",
    ),
    "gate.none": "None of these",
    "gate.unknown": "I don't know",
    **{f"gate.{sign}": label for sign, label in _SIGNS.items()},
    "stop.title": "Stop",
    "stop.lead": (
        "People first. Leave the boat's power for later.",
        "Nobody goes into the water, and nobody touches metal that tingles.",
        "If someone is hurt, call your local emergency number. On a marine radio, use VHF channel 16.",
        "Cut the power only if you can reach the switch dry. Or use the dock's emergency shutoff, or call the marina.",
        "Reset nothing.",
    ),
    "stop.person_in_water.title": "Someone is in the water",
    "stop.person_in_water.orders": (
        "Do not jump in. The water may be live.",
        "Cut the power of the whole dock at its emergency shutoff. Your own post may not be the source.",
        "Throw a float or a line that does not conduct.",
        "Shout to the swimmer: move away from docks and boats.",
        "Call your local emergency number. On a marine radio, use VHF channel 16.",
        "Keep the power off until everyone is out and the marina has been told.",
    ),
    "stop.person_down.title": "Someone is hurt or down",
    "stop.person_down.orders": (
        "Do not touch the person yet. Power off first.",
        "Cut the power of the whole dock at its emergency shutoff.",
        "Call your local emergency number.",
        "When the power is off, help the person. Do what the emergency operator tells you.",
        "After any shock a doctor must see the person, even one who feels well.",
    ),
    "stop.tingling.title": "Metal tingles",
    "stop.tingling.orders": (
        "Let go. Do not touch that metal, the taps, the ladder or the engine again.",
        "Keep everyone out of the water, and off the ladder.",
        "Turn off the breaker on the dock post with dry hands. If you cannot reach it dry, use the dock's emergency shutoff.",
        "Stop the generator and the inverter, if you can do so without touching bare metal.",
        "Tell the marina at once. Other boats may be the source.",
        "Do not plug in again here or anywhere. A technician must find the fault first.",
    ),
    "stop.bright_or_dim.title": "Lights too bright or too dim",
    "stop.bright_or_dim.orders": (
        "Turn off the main switch aboard at once.",
        "Turn off the breaker on the dock post.",
        "A neutral may be open. Voltage can rise enough to start a fire.",
        "Look and smell for heat near each thing that was on.",
        "Tell the marina at once. Leave the boat unplugged until an electrician has checked the post.",
    ),
    "stop.hot_plug.title": "Hot or burnt plug",
    "stop.hot_plug.orders": (
        "Do not pull the plug. Pulling it under load can flash.",
        "Turn off the loads and the main switch aboard.",
        "Turn off the breaker on the dock post, if you can reach it without touching the hot part. If not, use the emergency shutoff.",
        "Let it cool before anyone touches it.",
        "If there is smoke or fire, get everyone off and call your local emergency number.",
        "Do not use that plug, cord or outlet again. Tell the marina.",
    ),
    "stop.smell_or_bang.title": "Burnt smell, smoke, bang or flash",
    "stop.smell_or_bang.orders": (
        "If there is smoke or fire, get everyone off and call your local emergency number.",
        "Turn off the main switch aboard.",
        "Turn off the breaker on the dock post. If you cannot reach it, use the dock's emergency shutoff.",
        "Do not turn it back on, not even to look.",
        "Watch for smoke for an hour. Tell the marina.",
        "A technician must find what failed before the boat is plugged in.",
    ),
    "stop.water_in_outlet.title": "Water in an outlet, plug or post",
    "stop.water_in_outlet.orders": (
        "Do not touch the post, the plug or the cord.",
        "Keep people away from the post and out of the water.",
        "Call the marina. Ask them to cut the power that feeds this post.",
        "If you can wait for nobody, use the dock's emergency shutoff.",
        "The outlet stays off until an electrician has dried and checked it.",
    ),
    "stop.pedestal_damaged.title": "The dock post is damaged",
    "stop.pedestal_damaged.orders": (
        "Stay away from the post. Its metal may be live.",
        "Cut the power of the whole dock at its emergency shutoff.",
        "Keep everyone out of the water.",
        "Call the marina. Keep people away until someone comes.",
    ),
    "stop.cord_in_water.title": "A cord is in the water",
    "stop.cord_in_water.orders": (
        "Do not touch or lift the cord yet.",
        "Keep everyone out of the water.",
        "Turn off the main switch aboard, then the breaker on the dock post.",
        "Only then pull the plug from the post and lift the cord.",
        "Do not use that cord again. It needs a check or a new one in its place.",
    ),
    "stop.lightning.title": "Thunder or lightning",
    "stop.lightning.orders": (
        "Do not touch the cord, the post, or metal on deck.",
        "Go ashore into a building, or stay low inside the cabin.",
        "Nobody is in the water.",
        "Wait 30 minutes after the last thunder.",
        "If power went off in the storm, leave it off and have the boat looked at.",
    ),
    "stop.taking_water.title": "The boat is taking on water",
    "stop.taking_water.orders": (
        "Put life jackets on. Call for help: the marina, your local emergency number, or VHF channel 16.",
        "Keep the bilge pump running from its battery.",
        "Turn off the breaker on the dock post, if you can reach it dry.",
        "Do not touch switches or plugs while you stand in water.",
        "If the water nears outlets or the panel, get everyone off.",
        "The boat can sink; people come first.",
    ),
    "stop.unknown.title": "You are not sure",
    "stop.unknown.orders": (
        "Not sure counts as yes here.",
        "Leave everything as it is. Turn nothing on.",
        "Look at the water, the people, the plug and the post. Ask the people near you.",
        "If you still can't tell, call the marina and leave the boat unplugged.",
        "When you are sure, start again from the gate.",
    ),
    "stop.not_clear.title": "No power now",
    "stop.not_clear.orders": (
        "Leave the breaker off.",
        "Get everyone out of the water. Dry your hands. Stand on a dry spot.",
        "If you can't make it so, leave the boat unplugged tonight.",
        "When all of it is true, start again from the gate.",
    ),
    "tonight.title": "What to do tonight",
    "tonight.lead": (
        "This holds before we know the cause, and for as long as we don't.",
        "A breaker that trips is doing its job.",
    ),
    "tonight.orders": (
        "Unplug the boat: loads off, main off, dock breaker off, dock plug out, then the boat end.",
        _NO_SWIM,
        "Tell the marina that your boat trips the power.",
        "Look after the bilge-pump battery first. Turn off what you can do without.",
        "Do not run a generator, or a heater without a flue, while people sleep. The fumes (carbon monoxide) kill. Keep an alarm on.",
        "Does someone need a medical device? Move it to power ashore tonight.",
        "Keep the fridge and freezer shut. Throw out food that got warm.",
        "In frost, think of the water pipes and the engine. Ask the marina for help.",
        "Use the inverter only with the shore cord out and the inlet covered.",
        "Sleep ashore if you can't keep dry, warm or well aboard.",
    ),
    "cautions.title": "Before you trust this",
    "cautions.lines": (
        "What you read here is an estimate. It is worked out from your answers, and answers can be wrong.",
        "Local codes and a licensed electrician or marine technician decide. Their word goes before this one.",
        "A zero reading is “no leakage now, with these loads running”. It proves nothing about the water.",
        "A breaker that trips is doing its job. Never bypass it or fit a bigger one.",
        "Never cut or lift the ground (earth) wire.",
        "Never move to an outlet without ground-fault protection to get power.",
        "Never turn the same thing on twice. Something must be taken away first.",
        "Never open the dock post. That is work for the marina's electrician.",
        "With a Y or two cords, never leave one plug in and one hanging. Its bare pins can be live.",
        "A tool does not make you a technician. Do only what your training covers.",
        "Rules differ from place to place. Ask the marina before you test.",
    ),
    # --- questions ---
    "question.unknown": "I don't know",
    "question.gate.text": "Is any of these true right now?",
    "question.gate.why": "Some signs mean that people can get hurt while we look for the cause. Then the power goes off first.",
    "question.gate.none": "None of these",
    **{f"question.gate.{sign}": label for sign, label in _SIGNS.items()},
    "question.clear.text": "Before power goes on: is nobody in the water, are your hands dry, and are you standing on a dry spot?",
    "question.clear.why": "Things change at a dock. We ask each time before power goes back on.",
    "question.clear.clear": "Yes, all of it",
    "question.clear.not_clear": "No, or not all of it",
    "question.fixed.text": "Was it put right, or taken out of use?",
    "question.fixed.why": "Then we look again, in case there was a second cause.",
    "question.fixed.done": "Yes. Look for a second cause",
    "question.role.text": "Who is doing the tests?",
    "question.role.why": "You only get tests that you may do. Owning a meter does not change that.",
    "question.role.user": "Owner, captain or crew",
    "question.role.instructed": "Owner or crew, trained to use a meter",
    "question.role.technician": "Marine electrical technician (works aboard)",
    "question.role.electrician": "Licensed electrician (works ashore)",
    "question.tools.text": "What test tools are at hand?",
    "question.tools.why": "More tools can tell more causes apart. None are needed to start.",
    "question.tools.none": "No tools",
    "question.tools.multimeter": "A multimeter",
    "question.tools.clamp": "A leakage clamp that shows milliamps, and a multimeter",
    "question.tools.insulation": "An insulation tester, a leakage clamp and a multimeter",
    "question.supply.text": "What power does the dock give?",
    "question.supply.why": "On some docks two stray currents cancel. On others they add. The voltage decides which.",
    "question.supply.split_120_240": "120/240 V, 60 Hz (two legs, opposite)",
    "question.supply.wye_120_208": "120/208 V, 60 Hz (two legs of three)",
    "question.supply.single_230": "230 V, 50 Hz",
    "question.plug.text": "How is the boat plugged in?",
    "question.plug.why": "Some adapters split the current so that the breaker trips with no fault aboard.",
    "question.plug.one_cord": "One three-wire cord, no adapter",
    "question.plug.one_cord_four_wire": "One four-wire cord (two hot wires), no adapter",
    "question.plug.two_cords": "Two cords into two inlets on the boat",
    "question.plug.combining_y": "A Y: two dock plugs join into one cord",
    "question.plug.splitting_y": "A Y: one dock plug feeds two cords",
    "question.plug.straight_adapter": "One adapter with one plug, from one size to another",
    "question.plug.homemade": "Home-made, forced, or I can't tell",
    "question.pedestal_device.text": "What ground-fault device is on the dock post?",
    "question.pedestal_device.why": "Each kind trips at its own level. With none, a boat can leak and nothing will trip.",
    "question.pedestal_device.device_30": "A breaker with a TEST button, marked 30 mA",
    "question.pedestal_device.class_a": "An outlet or breaker with TEST, marked 5 or 6 mA, or Class A",
    "question.pedestal_device.none": "None: no TEST button",
    "question.aboard_device.text": "Is there a ground-fault device aboard, near the shore inlet?",
    "question.aboard_device.why": "Which of two devices opens, and which stays on, says where the current strays.",
    "question.aboard_device.device_30": "Yes, with a TEST button, about 30 mA",
    "question.aboard_device.none": "No",
    "question.opened.text": "What opened?",
    "question.opened.why": "Each device watches only what lies after it.",
    "question.opened.pedestal": "The breaker on the dock post (pedestal)",
    "question.opened.aboard": "The device aboard",
    "question.opened.both": "Both of them",
    "question.opened.feeder": "The whole dock, or several posts, went dark",
    "question.when.text": "When did it trip?",
    "question.when.why": "At once, with one load, after minutes or in the rain: each points to another cause.",
    "question.when.plug_in": "As soon as the boat was plugged in",
    "question.when.main_on": "When the main switch aboard went on",
    "question.when.any_load": "As soon as any load was on",
    "question.when.one_load": "When one certain load came on",
    "question.when.switching_off": "When a load went off",
    "question.when.minutes": "After some minutes with loads on",
    "question.when.wet": "In rain, spray, or at high tide",
    "question.when.random": "At odd times, with no pattern",
    "question.afloat.text": "Is the boat afloat or on land?",
    "question.afloat.why": "Afloat, water is a path for stray current. On land that path is gone, and metal can stay live unseen.",
    "question.afloat.afloat": "Afloat",
    "question.afloat.ashore": "On land (stands or trailer)",
    "question.neighbour.text": "Is another boat on the same dock post?",
    "question.neighbour.why": "A neighbour's load can push current through a fault on your boat while all your loads are off.",
    "question.neighbour.yes": _YES,
    "question.neighbour.no": _NO,
    "question.inverter.text": "Does the boat have an inverter, or an inverter/charger?",
    "question.inverter.why": (
        "An inverter joins neutral and ground (earth) while shore power is away. It must let go when shore power comes."
    ),
    "question.inverter.yes": _YES,
    "question.inverter.no": _NO,
    # --- who, and with what ---
    "who.user": "Anyone aboard with dry hands. No meter, no tools, no covers off.",
    "who.instructed": "A person trained to use the meter.",
    "who.technician": "A marine electrical technician.",
    "who.electrician": "A licensed electrician who may work ashore.",
    "tool.none": "No tools",
    "tool.multimeter": "A fused multimeter, CAT III",
    "tool.clamp": "A leakage clamp that shows milliamps",
    "tool.insulation": "An insulation tester, 250 V and 500 V DC",
    "repair.user": "You can do this: leave the part out or replace it. No wiring work.",
    "repair.technician": "A marine electrical technician must repair this aboard.",
    "repair.electrician": "The marina's licensed electrician must repair this ashore.",
    # --- causes ---
    "cause.appliance_leak.title": "One appliance leaks",
    "cause.appliance_leak.lead": (
        "Inside one appliance, current gets from a hot part to the metal case. It goes home by the ground (earth) wire or "
        "the water, so less comes back than went out. A water heater is the usual one."
    ),
    "cause.appliance_leak.tonight": (*_LETHAL_TONIGHT, "Leave the suspect appliance off, with its plug out if it has one."),
    "cause.appliance_leak.remedy": (
        "Leave that appliance off and out of use.",
        "A technician tests it and replaces the leaking part.",
        "Then test again with everything else running.",
    ),
    "cause.appliance_leak.marina": (
        "My boat trips the power. One appliance aboard seems to leak to ground (earth). The boat stays unplugged until a "
        "technician has seen to it."
    ),
    "cause.appliance_leak.confirm": "A technician tests that appliance alone, unplugged: insulation far below 1 megohm confirms it.",
    "cause.wet_cord.title": "The shore cord is wet or damaged",
    "cause.wet_cord.lead": (
        "Water or salt in the cord or its ends lets current cross to ground (earth) or into the water. A device aboard "
        "cannot see it, because it happens before the boat."
    ),
    "cause.wet_cord.tonight": (*_LETHAL_TONIGHT, "Keep the cord out of the water and out of use."),
    "cause.wet_cord.remedy": (
        "Replace the cord. Tape or a splice will not do.",
        "Hang the new one clear of the water, with no strain on its ends.",
    ),
    "cause.wet_cord.marina": (
        "My shore cord seems wet or damaged and trips the power. I have taken it out of use. Please check that the outlet is dry."
    ),
    "cause.wet_cord.confirm": "A technician tests the cord, unplugged at both ends: below about 5 megohms when dry is a failed cord.",
    "cause.wet_inlet.title": "The boat's shore inlet is wet or tracked",
    "cause.wet_inlet.lead": (
        "Salt, water or a burnt path in the boat's inlet lets current cross to ground (earth). It leaks even while the "
        "main switch aboard is off."
    ),
    "cause.wet_inlet.tonight": (*_LETHAL_TONIGHT, "Keep the inlet covered."),
    "cause.wet_inlet.remedy": (
        "A technician replaces the inlet, and the cord end that mates with it if that is marked too.",
        "Ask for a new seal, and check that the cover shuts.",
    ),
    "cause.wet_inlet.marina": (
        "My boat's shore inlet seems wet or burnt and trips the power. The boat stays unplugged until it is replaced."
    ),
    "cause.wet_inlet.confirm": (
        "A technician tests the inlet with the cord out and all sources locked out: insulation far below 1 megohm confirms it."
    ),
    "cause.wet_pedestal.title": "The dock post is wet or faulty",
    "cause.wet_pedestal.lead": (
        "Water or damage in the dock post lets current leak before it reaches your cord. It trips with nothing plugged in."
    ),
    "cause.wet_pedestal.tonight": (*_LETHAL_TONIGHT, "Keep people away from that post. Its metal may be live."),
    "cause.wet_pedestal.remedy": (
        "Leave its breaker off. Do not use any outlet on that post.",
        "The marina's electrician dries it, repairs it and tests it.",
    ),
    "cause.wet_pedestal.marina": (
        "This dock post trips with nothing plugged in. Please cut its power and send your electrician. Please keep people away from it."
    ),
    "cause.wet_pedestal.confirm": "The marina's electrician tests the post and its feed: low insulation to ground (earth) confirms it.",
    "cause.summed_filters.title": "Many small leaks add up",
    "cause.summed_filters.lead": (
        "Chargers and electronics each leak a little to ground (earth) through their filters. Together they reach the "
        "level at which the device opens."
    ),
    "cause.summed_filters.tonight": (_UNPLUGGED, _NO_SWIM, "Turn off chargers and electronics that you can do without."),
    "cause.summed_filters.remedy": (
        "A technician reads the leakage of each charger and electronic load.",
        "The worst ones are replaced, or the loads are shared between two circuits.",
    ),
    "cause.summed_filters.marina": (
        "Many small leaks aboard seem to add up and trip the power. The boat stays unplugged until a technician has read them."
    ),
    "cause.summed_filters.confirm": "A technician reads the leakage while loads go off one by one: it falls in small even steps.",
    "cause.panel_bond.title": "Neutral and ground are joined in the boat's panel",
    "cause.panel_bond.lead": (
        "Neutral and ground (earth) must meet ashore only. If they also meet aboard, part of every load's current goes "
        "home by the ground wire and the water."
    ),
    "cause.panel_bond.tonight": _LETHAL_TONIGHT,
    "cause.panel_bond.remedy": (
        "A technician finds where neutral meets ground (earth) in the panel and parts the two.",
        "The ground wire itself stays connected.",
        "Then the reading from neutral to ground is taken again.",
    ),
    "cause.panel_bond.marina": (
        "Neutral and ground (earth) seem to be joined on my boat, so current runs in the ground and the water. The boat "
        "stays unplugged until a technician has parted them."
    ),
    "cause.panel_bond.confirm": (
        "A technician reads ohms from neutral to ground (earth) aboard, all sources locked out: under about 5 ohms confirms it."
    ),
    "cause.frame_strap.title": "A strap in a stove or dryer joins neutral and ground",
    "cause.frame_strap.lead": (
        "Some stoves and dryers are built for houses, with a strap from neutral to the frame. Aboard, it sends part of "
        "every load's current into the ground (earth). It does so even with that appliance's breaker off."
    ),
    "cause.frame_strap.tonight": (
        *_LETHAL_TONIGHT,
        "If the stove or dryer has a plug, pull it once the boat is unplugged and the inverter is off.",
    ),
    "cause.frame_strap.remedy": (
        "A technician takes the strap out and fits a four-wire lead.",
        "The frame stays connected to the ground (earth) wire.",
        "Until then the appliance stays unplugged.",
    ),
    "cause.frame_strap.marina": (
        "A stove or dryer on my boat seems to join neutral and ground (earth). The boat stays unplugged until a "
        "technician has put it right."
    ),
    "cause.frame_strap.confirm": (
        "A technician reads neutral to ground (earth), all sources locked out: low, and open once that appliance is unplugged."
    ),
    "cause.inverter_bond.title": "The inverter keeps neutral and ground joined",
    "cause.inverter_bond.lead": (
        "An inverter joins neutral and ground (earth) while it makes its own power. If it lets go late, or never, shore "
        "current strays into the ground."
    ),
    "cause.inverter_bond.tonight": (*_LETHAL_TONIGHT, "Use the inverter only with the shore cord out and the inlet covered."),
    "cause.inverter_bond.remedy": (
        "A technician checks the inverter's transfer relay and that its neutrals are kept apart.",
        "A stuck relay means a repair or a new unit.",
    ),
    "cause.inverter_bond.marina": (
        "My boat's inverter seems to join neutral and ground (earth) on shore power. The boat stays unplugged until a "
        "technician has checked it."
    ),
    "cause.inverter_bond.confirm": (
        "A technician checks the relay with shore power present: neutral and ground (earth) must be apart after the wait."
    ),
    "cause.ground_neutral_exchanged.title": "Neutral and ground are swapped in a cord or adapter",
    "cause.ground_neutral_exchanged.lead": (
        "Two wires are swapped, so the boat's metal hangs on the neutral. All load current runs home in the ground "
        "(earth) wire, and some goes through the water."
    ),
    "cause.ground_neutral_exchanged.tonight": (*_LETHAL_TONIGHT, "Put the cord and the adapters aside. Nobody else uses them."),
    "cause.ground_neutral_exchanged.remedy": (
        "Do not use that cord or adapter again. Replace it.",
        "If cord and adapters test right, a technician checks the boat's inlet and the marina checks the post.",
    ),
    "cause.ground_neutral_exchanged.marina": (
        "Neutral and ground (earth) seem to be swapped in my cord, adapter or inlet, or in your post. The boat stays "
        "unplugged. Please have the outlet checked."
    ),
    "cause.ground_neutral_exchanged.confirm": (
        "A trained person reads ohms through the cord or adapter, unplugged at both ends: the neutral pin reads through "
        "to the ground (earth) pin."
    ),
    "cause.line_ground_exchanged.title": "Line and ground are swapped in a cord or adapter",
    "cause.line_ground_exchanged.lead": (
        "Two wires are swapped, so the boat's metal hangs on the live line. Touching it, or the water near it, can kill."
    ),
    "cause.line_ground_exchanged.tonight": (
        *_LETHAL_TONIGHT,
        "Turn the dock breaker off first. Touch no metal aboard until the plug is out.",
        "Put the cord and the adapters aside. Nobody uses them again.",
    ),
    "cause.line_ground_exchanged.remedy": (
        "Do not use that cord or adapter again. Replace it.",
        "A technician checks the boat's inlet and bonding before it is plugged in.",
    ),
    "cause.line_ground_exchanged.marina": (
        "Line and ground (earth) may be swapped in my cord, adapter or inlet, or in your post. People could be hurt. "
        "Please cut the power of this outlet and have it checked."
    ),
    "cause.line_ground_exchanged.confirm": (
        "A trained person reads ohms through the cord or adapter, unplugged at both ends: a line pin reads through to "
        "the ground (earth) pin."
    ),
    "cause.neutral_ahead_of_device.title": "A neutral is landed on the wrong side of a device",
    "cause.neutral_ahead_of_device.lead": (
        "One neutral wire goes around the device instead of through it. The device sees that load's current go out but not come back."
    ),
    "cause.neutral_ahead_of_device.tonight": (_UNPLUGGED, _NO_SWIM, "Leave off the load that trips it."),
    "cause.neutral_ahead_of_device.remedy": (
        "A technician moves that neutral to the right side of the device.",
        "Then TEST and each load are tried again.",
    ),
    "cause.neutral_ahead_of_device.marina": (
        "A neutral on my boat seems to go around its own ground-fault device. The boat stays unplugged until a technician has moved it."
    ),
    "cause.neutral_ahead_of_device.confirm": (
        "A technician clamps line and neutral together in the cord: near zero, while the device aboard still trips."
    ),
    "cause.open_ground_with_leak.title": "The ground wire is broken, and something leaks",
    "cause.open_ground_with_leak.lead": (
        "The ground (earth) wire no longer reaches the dock, so a leak makes the boat's metal live. The current runs "
        "off into the water, or waits for a person to touch it."
    ),
    "cause.open_ground_with_leak.tonight": (
        *_LETHAL_TONIGHT,
        "Turn the dock breaker off before anyone touches metal aboard or steps off.",
        "Nobody touches the ladder, the engine or the taps until the boat is unplugged.",
    ),
    "cause.open_ground_with_leak.remedy": (
        "The boat stays unplugged until two things are done.",
        "A technician restores the ground (earth) wire, and then finds the leak.",
        "The marina checks the ground in its outlet.",
    ),
    "cause.open_ground_with_leak.marina": (
        "The ground (earth) between my boat and your post may be broken, and something leaks. People could get a shock. "
        "The boat is unplugged. Please check your outlet and keep people out of the water."
    ),
    "cause.open_ground_with_leak.confirm": (
        "A technician reads from the cord's ground (earth) pin to the boat's ground bus, cord out and sources locked out: open on "
        "ohms, and on the diode range both ways, confirms it."
    ),
    "cause.feeder_accumulation.title": "The leaks of several boats add up on the dock",
    "cause.feeder_accumulation.lead": (
        "Each boat leaks a little. The device that feeds the whole dock sees the sum, and opens when it gets too large."
    ),
    "cause.feeder_accumulation.tonight": (_UNPLUGGED, _NO_SWIM, _TELL),
    "cause.feeder_accumulation.remedy": (
        "The marina's electrician reads the leakage of each boat and of the feeder.",
        "Boats that leak most are seen to first. Then the electrician shares out the load.",
    ),
    "cause.feeder_accumulation.marina": (
        "The whole dock went dark while my own breaker held. The leaks of several boats may add up. Please have each boat "
        "and the feeder read."
    ),
    "cause.feeder_accumulation.confirm": (
        "The marina's electrician reads the feeder and each boat: the feeder nears its trip level, no single boat does."
    ),
    "cause.touchy_device.title": "The device trips too early",
    "cause.touchy_device.lead": (
        "The dock device may be worn or damp inside, so it opens below the level on its label. It then trips on boats "
        "that leak very little."
    ),
    "cause.touchy_device.tonight": (_UNPLUGGED, _NO_SWIM, _TELL),
    "cause.touchy_device.remedy": (
        "The marina's electrician tests the device, with nothing plugged in.",
        "If it opens too early, the same kind with the same rating replaces it.",
    ),
    "cause.touchy_device.marina": (
        "The ground-fault device on this post may open below its rating. Please have your electrician test it. The boat "
        "stays unplugged until then."
    ),
    "cause.touchy_device.confirm": (
        "The marina's electrician raises a test current step by step: opening below half its rating confirms it."
    ),
    "cause.overload.title": "Too many loads at once",
    "cause.overload.lead": (
        "The breaker opens because of total current, not because of a leak. It takes minutes, and comes sooner on a hot "
        "day or with a poor contact."
    ),
    "cause.overload.tonight": (
        "Leave the heaters, the water heater and the air conditioner off.",
        "Feel the plug with the breaker off. If it was hot, leave the boat unplugged and tell the marina.",
        _NO_SWIM,
    ),
    "cause.overload.remedy": (
        "Run fewer heavy loads at the same time.",
        "If it still trips well below the rating on its handle, the marina must check the breaker and the outlet.",
    ),
    "cause.overload.marina": (
        "My boat seems to draw too much at once. I now run fewer loads. Please check that the outlet and breaker do not get hot."
    ),
    "cause.overload.confirm": (
        "A technician clamps one line wire in a closed break-out lead: amperes over the rating on the handle confirm it."
    ),
    "cause.nothing_now.title": "No leakage now, with these loads running",
    "cause.nothing_now.lead": (
        "Nothing strays at this moment. The fault may come back with heat, damp, motion, or a load that was not running."
    ),
    "cause.nothing_now.tonight": (_UNPLUGGED, _NO_SWIM, _TELL),
    "cause.nothing_now.remedy": (
        "Write down each trip: time, rain, tide, and what was running.",
        "Have a technician test the water heater and the cord, since both can leak only at times.",
    ),
    "cause.nothing_now.marina": (
        "My boat tripped the power, and the cause has not been found. It may come back. Please tell me when this post or the dock trips."
    ),
    "cause.nothing_now.confirm": "Only time and a log can tell. A technician can test the insulation of each circuit meanwhile.",
    "cause.damp_element.title": "A heater is damp from standing unused",
    "cause.damp_element.lead": (
        "A water heater, oven or space heater that stood unused draws damp into its element. The damp lets current reach the "
        "case until the heat has dried it."
    ),
    "cause.damp_element.tonight": (*_LETHAL_TONIGHT, "Leave every heater and the oven off."),
    "cause.damp_element.remedy": (
        "Leave that heater off and out of use.",
        "A technician takes it out, dries it on the bench and tests it. If it stays low, it is replaced.",
        "Do not try to dry it out on shore power.",
    ),
    "cause.damp_element.marina": (
        "My boat trips the power. A heater that stood unused seems to be damp. The boat stays unplugged until a technician has tested it."
    ),
    "cause.damp_element.confirm": (
        "A technician tests that heater alone, unplugged: insulation is low when cold and rises as it dries on the bench."
    ),
    "cause.compressor_leak.title": "A cooling compressor leaks",
    "cause.compressor_leak.lead": (
        "Inside the sealed compressor of an air conditioner or freezer, the wire of the motor leaks to the shell. It leaks most "
        "when it starts, and when it is hot."
    ),
    "cause.compressor_leak.tonight": (*_LETHAL_TONIGHT, "Leave the air conditioner, fridge and freezer off."),
    "cause.compressor_leak.remedy": (
        "Leave that unit off and out of use.",
        "A technician tests the compressor and its start parts, and replaces what leaks.",
    ),
    "cause.compressor_leak.marina": (
        "My boat trips the power. A compressor aboard seems to leak to ground (earth). The boat stays unplugged until a technician has "
        "tested it."
    ),
    "cause.compressor_leak.confirm": (
        "A technician tests from each motor terminal to the shell, unplugged: below about 2 megohms counts as a fault in makers' handbooks."
    ),
    "cause.branch_wiring_leak.title": "A cable aboard is chafed or wet",
    "cause.branch_wiring_leak.lead": (
        "Behind one breaker a cable has rubbed through, or a joint is wet. Current gets from the wire to metal or bilge water, "
        "even with the appliance off."
    ),
    "cause.branch_wiring_leak.tonight": (*_LETHAL_TONIGHT, "Keep that breaker off. Touch no wet cable or joint."),
    "cause.branch_wiring_leak.remedy": (
        "Leave that breaker off.",
        "A technician tests the circuit piece by piece and replaces the bad cable or joint.",
        "Then the new cable is kept clear of edges and of the bilge.",
    ),
    "cause.branch_wiring_leak.marina": (
        "My boat trips the power. A cable aboard seems to leak. The boat stays unplugged until a technician has repaired it."
    ),
    "cause.branch_wiring_leak.confirm": (
        "A technician tests that circuit with its appliances unplugged, all sources locked out: insulation stays low on the cable itself."
    ),
    "cause.charger_filter.title": "One charger leaks through its filter",
    "cause.charger_filter.lead": (
        "A charger or other large power unit has a filter that lets a little current pass to ground (earth) all the time. A big or "
        "failing filter passes enough to trip the device."
    ),
    "cause.charger_filter.tonight": (_UNPLUGGED, _NO_SWIM, "Turn the charger off. Watch the battery that feeds the bilge pump."),
    "cause.charger_filter.remedy": (
        "Leave that charger off.",
        "A technician reads its leakage and replaces it with a marine unit that leaks little.",
    ),
    "cause.charger_filter.marina": (
        "One charger aboard seems to leak enough to trip the power. The boat stays unplugged until a technician has read it."
    ),
    "cause.charger_filter.confirm": (
        "A technician clamps the boat's live wires as the charger goes on: the reading jumps at once, while its insulation tests high."
    ),
    "cause.surge_suppressor.title": "A surge strip is worn out",
    "cause.surge_suppressor.lead": (
        "The parts in a surge strip that catch pulses wear out. Then they let current pass to ground (earth) all the time, and more "
        "when something is switched."
    ),
    "cause.surge_suppressor.tonight": (_UNPLUGGED, _NO_SWIM, "Take the surge strip out of use once the boat is unplugged."),
    "cause.surge_suppressor.remedy": (
        "Throw the surge strip away. Do not use it ashore.",
        "If surge parts are built in, a technician replaces them.",
    ),
    "cause.surge_suppressor.marina": (
        "A worn surge strip aboard seems to trip the power. I have taken it out of use. The boat stays unplugged until it has been tested."
    ),
    "cause.surge_suppressor.confirm": "A technician reads the leakage with the surge strip in use and again with it out: it falls at once.",
    "cause.cycling_appliance.title": "An appliance leaks in part of its cycle",
    "cause.cycling_appliance.lead": (
        "A fridge, ice maker, washer or pump works in cycles. It leaks only in one part of the cycle, such as the defrost, so it "
        "trips hours apart."
    ),
    "cause.cycling_appliance.tonight": (
        *_LETHAL_TONIGHT,
        "Leave fridges, ice makers, washers and automatic pumps off, the bilge pump on its battery excepted.",
    ),
    "cause.cycling_appliance.remedy": (
        "Note the time of each trip, and which machine was at work.",
        "A technician runs each machine through its whole cycle and tests it.",
        "The one that leaks is repaired or replaced.",
    ),
    "cause.cycling_appliance.marina": (
        "My boat trips the power some hours apart. A machine that works in cycles seems to leak. The boat stays unplugged until a "
        "technician has found it."
    ),
    "cause.cycling_appliance.confirm": (
        "A technician logs the leakage over a day: it rises each time that one machine starts the same part of its cycle."
    ),
    "cause.isolator_self_test.title": "The galvanic isolator tests itself",
    "cause.isolator_self_test.lead": (
        "Some older isolators against corrosion test themselves. They send a small current through the ground (earth) wire now and "
        "then. The dock device takes it for a leak."
    ),
    "cause.isolator_self_test.tonight": (_UNPLUGGED, _NO_SWIM, _TELL),
    "cause.isolator_self_test.remedy": (
        "A technician checks the isolator and its monitor.",
        "An isolator that keeps the ground (earth) path when it fails, and needs no monitor, takes its place.",
        "The ground (earth) wire itself stays connected.",
    ),
    "cause.isolator_self_test.marina": (
        "The isolator on my boat seems to send a test current that trips your device. The boat stays unplugged until a technician has "
        "changed it."
    ),
    "cause.isolator_self_test.confirm": (
        "A technician logs the leakage: brief pulses, evenly spaced, that end when the isolator's monitor has no power."
    ),
    "cause.transformer_primary_leak.title": "The isolation transformer leaks on the dock's side",
    "cause.transformer_primary_leak.lead": (
        "The boat's isolation transformer leaks from its input winding to its shield or case. It leaks even with every load aboard off."
    ),
    "cause.transformer_primary_leak.tonight": (*_LETHAL_TONIGHT, "Keep hands off the transformer's case."),
    "cause.transformer_primary_leak.remedy": (
        "A technician tests the transformer and replaces it if the winding leaks.",
        "Until then the boat stays unplugged.",
    ),
    "cause.transformer_primary_leak.marina": (
        "My boat's isolation transformer seems to leak on your side of it. The boat stays unplugged until a technician has tested it."
    ),
    "cause.transformer_primary_leak.confirm": (
        "A technician tests from the input winding to shield and case, cord out: insulation far below 1 megohm confirms it."
    ),
    "cause.drive_leakage.title": "A variable-speed motor leaks at high frequency",
    "cause.drive_leakage.lead": (
        "Some air conditioners and pumps change speed by switching very fast. That sends quick pulses to ground (earth). Some devices "
        "take them for a leak, and some clamps do not show them."
    ),
    "cause.drive_leakage.tonight": (_UNPLUGGED, _NO_SWIM, "Leave the air conditioner and variable-speed pumps off."),
    "cause.drive_leakage.remedy": (
        "A technician reads the leakage with a meter that shows fast pulses.",
        "A filter made for that drive, or another unit, cures it.",
        "The device itself stays in use.",
    ),
    "cause.drive_leakage.marina": (
        "A variable-speed unit aboard seems to trip your device. The boat stays unplugged until a technician has fitted a filter."
    ),
    "cause.drive_leakage.confirm": (
        "A technician reads the leakage twice, with a 50/60 Hz filter and with none: a large gap between the two confirms it."
    ),
    "cause.rectified_leakage.title": "Direct current leaks and dulls the device",
    "cause.rectified_leakage.lead": (
        "A fault in a charger or power unit leaks direct current. That can dull the device that should watch over you, so it may not "
        "open when it must."
    ),
    "cause.rectified_leakage.tonight": (
        *_LETHAL_TONIGHT,
        "Do not trust a device that holds. It may be dulled.",
        "Leave chargers and power units off.",
    ),
    "cause.rectified_leakage.remedy": (
        "A technician finds the unit that leaks direct current and replaces it.",
        "Then the dock device is tested by its TEST button and by the marina's electrician.",
    ),
    "cause.rectified_leakage.marina": (
        "A unit on my boat may leak direct current, which can dull your device so that it does not open. The boat is unplugged. "
        "Please have that device tested."
    ),
    "cause.rectified_leakage.confirm": (
        "A technician clamps the live wires with a clamp that shows direct current: a steady reading that goes with one unit confirms it."
    ),
    "cause.cancelling_legs.title": "Two leaks cancel each other",
    "cause.cancelling_legs.lead": (
        "Two appliances on different lines both leak. Together the leaks nearly cancel, so it holds. It trips when one of them goes off."
    ),
    "cause.cancelling_legs.tonight": (*_LETHAL_TONIGHT, "Do not use the boat with both on just because it holds that way."),
    "cause.cancelling_legs.remedy": (
        "Leave both appliances off and out of use.",
        "A technician tests each line alone and repairs both leaks.",
    ),
    "cause.cancelling_legs.marina": (
        "Two leaks on my boat seem to cancel each other, so your device sees little of them. The boat stays unplugged until both "
        "are repaired."
    ),
    "cause.cancelling_legs.confirm": (
        "A technician reads the leakage with only one line's loads on, then only the other's: each alone is far above both together."
    ),
    "cause.inverter_common_neutral.title": "The inverter's neutrals share one bar",
    "cause.inverter_common_neutral.lead": (
        "An inverter joins neutral and ground (earth) on its output side. Aboard, its output and its input share one neutral bar, so "
        "that joint reaches the dock's neutral too."
    ),
    "cause.inverter_common_neutral.tonight": (*_LETHAL_TONIGHT, "Use the inverter only with the shore cord out and the inlet covered."),
    "cause.inverter_common_neutral.remedy": (
        "A technician gives the inverter's output a neutral bar of its own.",
        "Then neutral to ground (earth) is read again with the inverter out of circuit.",
    ),
    "cause.inverter_common_neutral.marina": (
        "The neutrals of my boat's inverter seem to be joined, so current runs in the ground (earth) and the water. The boat stays "
        "unplugged until a technician has parted them."
    ),
    "cause.inverter_common_neutral.confirm": (
        "A technician reads neutral to ground (earth), all sources locked out: low with the inverter wired in, open with it wired out."
    ),
    "cause.generator_bond.title": "The generator keeps neutral and ground joined",
    "cause.generator_bond.lead": (
        "A generator joins neutral and ground (earth) for its own power. If the switch between shore and generator leaves the neutrals "
        "together, that joint stays in place on shore power."
    ),
    "cause.generator_bond.tonight": _LETHAL_TONIGHT,
    "cause.generator_bond.remedy": (
        "A technician fits a transfer switch that switches the neutral along with the lines.",
        "The generator keeps its own joint, and the ground (earth) wires stay connected.",
    ),
    "cause.generator_bond.marina": (
        "My boat's generator seems to join neutral and ground (earth) while on shore power. The boat stays unplugged until a technician "
        "has changed the switch."
    ),
    "cause.generator_bond.confirm": (
        "A technician reads neutral to ground (earth) on the shore side, all sources locked out: low, and open once the generator's "
        "neutral is off its terminal."
    ),
    "cause.transformer_bypassed.title": "The isolation transformer is wired around",
    "cause.transformer_bypassed.lead": (
        "Someone has wired the boat straight to the dock, past its isolation transformer. The joint of neutral and ground (earth) that "
        "belongs behind the transformer is now tied to the dock."
    ),
    "cause.transformer_bypassed.tonight": _LETHAL_TONIGHT,
    "cause.transformer_bypassed.remedy": (
        "A technician wires the transformer as its maker drew it.",
        "If it stays out for good, neutral and ground (earth) are parted aboard.",
    ),
    "cause.transformer_bypassed.marina": (
        "My boat's isolation transformer seems to be wired around, so current runs in the ground (earth) and the water. The boat stays "
        "unplugged until a technician has put it right."
    ),
    "cause.transformer_bypassed.confirm": (
        "A technician reads ohms from a line pin of the cord to the boat's line bus, all sources locked out: straight through confirms it."
    ),
    "cause.soft_neutral_leak.title": "A damp path from neutral to ground",
    "cause.soft_neutral_leak.lead": (
        "Damp or salt joins neutral and ground (earth) a little, not firmly. It lets little pass at home, and more under heavy load "
        "or at other docks."
    ),
    "cause.soft_neutral_leak.tonight": (_UNPLUGGED, _NO_SWIM, _TELL),
    "cause.soft_neutral_leak.remedy": (
        "A technician finds the damp spot, dries it, and renews what is corroded.",
        "Then neutral to ground (earth) is read again.",
    ),
    "cause.soft_neutral_leak.marina": (
        "Damp seems to join neutral and ground (earth) a little on my boat. The boat stays unplugged until a technician has dried it."
    ),
    "cause.soft_neutral_leak.confirm": (
        "A technician reads neutral to ground (earth) aboard, all sources locked out: between about 5 ohms and 10 kilohms confirms it."
    ),
    "cause.dock_bond.title": "Neutral and ground are joined in the dock's own wiring",
    "cause.dock_bond.lead": (
        "Neutral and ground (earth) meet in a dock post, where they must not. Part of the dock's current runs home in the ground wire "
        "and the water. The device of the whole dock sees it, and your own does not."
    ),
    "cause.dock_bond.tonight": (*_LETHAL_TONIGHT, "Keep people away from that post. Stray current may run in it."),
    "cause.dock_bond.remedy": (
        "Nothing aboard cures this.",
        "The marina's electrician finds where the two meet and parts them.",
        "The ground (earth) wire itself stays connected.",
    ),
    "cause.dock_bond.marina": (
        "The dock went dark while my own breaker held. Neutral and ground (earth) may be joined in a post. People in the water are at "
        "risk. Please send your electrician."
    ),
    "cause.dock_bond.confirm": (
        "The marina's electrician reads volts from neutral to ground (earth) in the post under load: next to zero confirms a joint there."
    ),
    "cause.forced_plug.title": "A plug is forced into the wrong outlet",
    "cause.forced_plug.lead": (
        "A plug of another kind can be pushed into some outlets with force. Its ground (earth) pin then meets a live line, and the "
        "boat's metal is live. Touching it, or the water near it, can kill."
    ),
    "cause.forced_plug.tonight": (
        *_LETHAL_TONIGHT,
        "Turn the dock breaker off first. Touch no metal aboard until the plug is out.",
        "Do not use that plug or that outlet.",
    ),
    "cause.forced_plug.remedy": (
        "Use only the cord end that was made for this outlet.",
        "The marina checks the outlet. A technician checks the plug and the boat's wiring.",
    ),
    "cause.forced_plug.marina": (
        "A plug may have been forced into an outlet of another kind, and metal on my boat may have been live. Please cut the power "
        "of this outlet and have it checked."
    ),
    "cause.forced_plug.confirm": "With the dock breaker off, the plug and the outlet are of two kinds, or their blades are marked or bent.",
    "cause.reversed_polarity.title": "Line and neutral are swapped at the dock",
    "cause.reversed_polarity.lead": (
        "Line and neutral have changed places, in the outlet or in a cord. Nothing need trip. But switches aboard now cut the wrong "
        "wire, so things stay live when they are off."
    ),
    "cause.reversed_polarity.tonight": (*_LETHAL_TONIGHT, "Work on nothing aboard that was plugged in, even if it is switched off."),
    "cause.reversed_polarity.remedy": (
        "Do not use that outlet.",
        "The marina's electrician puts the two wires right.",
        "If other outlets give the same sign, a technician checks the cord and the inlet.",
    ),
    "cause.reversed_polarity.marina": (
        "Line and neutral seem to be swapped in this outlet. Please cut its power and have your electrician check it."
    ),
    "cause.reversed_polarity.confirm": (
        "The marina's electrician reads the outlet: full volts from the neutral slot to ground (earth) confirm it."
    ),
    "cause.reversed_with_soft_neutral.title": "Swapped wires ashore bring out a damp spot aboard",
    "cause.reversed_with_soft_neutral.lead": (
        "Aboard, damp joins neutral and ground (earth) a little. At home that stays quiet. Here line and neutral are swapped, so the "
        "damp spot now carries full volts."
    ),
    "cause.reversed_with_soft_neutral.tonight": (
        *_LETHAL_TONIGHT,
        "Work on nothing aboard that was plugged in, even if it is switched off.",
    ),
    "cause.reversed_with_soft_neutral.remedy": (
        "Both ends need repair.",
        "A technician finds and dries the damp spot aboard.",
        "The marina's electrician puts the two wires in the outlet right.",
    ),
    "cause.reversed_with_soft_neutral.marina": (
        "My boat held elsewhere and trips here. Line and neutral may be swapped in this outlet, and something aboard leaks. The boat is "
        "unplugged. Please have the outlet checked."
    ),
    "cause.reversed_with_soft_neutral.confirm": (
        "A technician reads neutral to ground (earth) aboard, all sources locked out, below about 10 kilohms, and the marina finds the "
        "outlet swapped."
    ),
    "cause.reversed_with_bond.title": "Swapped wires ashore meet joined wires aboard",
    "cause.reversed_with_bond.lead": (
        "Line and neutral are swapped ashore. Aboard, neutral is joined to ground (earth). Together that is a dead short, with a bang "
        "as soon as the power goes on."
    ),
    "cause.reversed_with_bond.tonight": (*_LETHAL_TONIGHT, "Nobody turns this outlet on after the bang."),
    "cause.reversed_with_bond.remedy": (
        "The marina's electrician puts the two wires in the outlet right and checks it for burns.",
        "A technician parts neutral and ground (earth) aboard and checks cord and inlet for burns.",
        "Both must be done before power.",
    ),
    "cause.reversed_with_bond.marina": (
        "There was a bang when my boat got power. Line and neutral may be swapped in this outlet. Please cut its power and have it checked."
    ),
    "cause.reversed_with_bond.confirm": (
        "The marina finds the outlet swapped, and a technician reads under about 5 ohms from neutral to ground (earth) aboard, all "
        "sources locked out."
    ),
    "cause.crossed_neutral.title": "A load on one inlet returns to the other",
    "cause.crossed_neutral.lead": (
        "The boat has two inlets. One load takes its power from the first and sends it back to the second. Each dock breaker sees half "
        "a pair, but only while that load runs."
    ),
    "cause.crossed_neutral.tonight": (
        *_LETHAL_TONIGHT,
        "Turn off the main and both dock breakers. Then take both cords out. Use neither of them.",
    ),
    "cause.crossed_neutral.remedy": (
        "A technician moves that load's neutral to its own panel.",
        "Until that is done, neither cord is used.",
    ),
    "cause.crossed_neutral.marina": (
        "One load on my boat seems to return by the wrong cord. Both cords are out until a technician has moved its neutral."
    ),
    "cause.crossed_neutral.confirm": (
        "A technician clamps the live wires of both inlets: the whole current of that one load shows in each, equal and opposite."
    ),
    "cause.shared_neutral_branch.title": "Two circuits share a neutral, and one device watches",
    "cause.shared_neutral_branch.lead": (
        "Two circuits aboard share one neutral wire. Only one of them has a device, so it sees current come back that it never saw go out."
    ),
    "cause.shared_neutral_branch.tonight": (_UNPLUGGED, _NO_SWIM, "Leave both of those circuits off."),
    "cause.shared_neutral_branch.remedy": (
        "A technician gives each circuit its own neutral, or one two-pole device for both.",
        "Then TEST and each load are tried again.",
    ),
    "cause.shared_neutral_branch.marina": (
        "Two circuits on my boat seem to share a neutral and trip a device aboard. The boat stays unplugged until a technician has "
        "parted them."
    ),
    "cause.shared_neutral_branch.confirm": "A technician loads only the other circuit: the device trips with nothing on its own.",
    "cause.shared_outlet_neutral.title": "Two outlets of the dock post share a neutral",
    "cause.shared_outlet_neutral.lead": (
        "In the dock post the neutrals of two outlets are joined or swapped. Each device sees the current of the other outlet come home. "
        "Any boat trips it."
    ),
    "cause.shared_outlet_neutral.tonight": (*_LETHAL_TONIGHT, "Do not use any outlet on that post."),
    "cause.shared_outlet_neutral.remedy": (
        "Nothing aboard cures this.",
        "The marina's electrician gives each outlet its own neutral and tests both devices.",
    ),
    "cause.shared_outlet_neutral.marina": (
        "Two outlets on this post seem to share a neutral, so each trips on the other's load. Please turn both off and send your "
        "electrician."
    ),
    "cause.shared_outlet_neutral.confirm": (
        "The marina's electrician loads one outlet alone: the clamp around its live wires reads the load, and the other reads the same."
    ),
    "cause.open_ground.title": "The ground wire is broken",
    "cause.open_ground.lead": (
        "The ground (earth) wire no longer reaches the dock. Nothing trips or shows it. The next leak makes the boat's metal live."
    ),
    "cause.open_ground.tonight": (
        *_LETHAL_TONIGHT,
        "Turn the dock breaker off before anyone touches metal aboard or steps off.",
        "Nobody touches the ladder, the engine or the taps until the boat is unplugged.",
    ),
    "cause.open_ground.remedy": (
        "The boat stays unplugged until the ground (earth) wire is whole.",
        "A technician finds the break in the cord, the inlet or the boat.",
        "The marina checks the ground in its outlet.",
    ),
    "cause.open_ground.marina": (
        "The ground (earth) between my boat and your post may be broken. The boat is unplugged. Please check your outlet and keep "
        "people out of the water."
    ),
    "cause.open_ground.confirm": (
        "A technician reads from the cord's ground (earth) pin to the boat's ground bus, cord out and sources locked out: open on "
        "ohms, and on the diode range both ways, confirms it."
    ),
    "cause.open_neutral.title": "The neutral is broken",
    "cause.open_neutral.lead": (
        "The neutral wire no longer reaches the dock. Where two lines come aboard, some things get far too many volts and others too "
        "few. Lamps go very bright or dim. That can start a fire."
    ),
    "cause.open_neutral.tonight": (
        *_LETHAL_TONIGHT,
        "Turn the dock breaker off at once. Use nothing that was plugged in.",
        "Smell and look for anything hot before you leave the boat alone.",
    ),
    "cause.open_neutral.remedy": (
        "The boat stays unplugged until the neutral is whole.",
        "The marina's electrician checks the outlet and its feed.",
        "A technician checks the cord, the inlet and the panel, and what the wrong volts may have harmed.",
    ),
    "cause.open_neutral.marina": (
        "Lights on my boat went very bright or dim. The neutral may be broken in your outlet or in my cord. Please cut the power of "
        "this outlet and have it checked."
    ),
    "cause.open_neutral.confirm": (
        "A trained person reads ohms through the cord, unplugged at both ends: neutral open confirms it. Else the marina's electrician "
        "checks the outlet under load."
    ),
    "cause.wet_feeder.title": "The dock's own cable is wet or damaged",
    "cause.wet_feeder.lead": (
        "Water or damage in the dock's cable lets current leak before it reaches any outlet. The device of the whole dock opens, and "
        "yours does not. It comes with rain, tide or wakes."
    ),
    "cause.wet_feeder.tonight": (*_LETHAL_TONIGHT, "Keep people off that part of the dock until its power is cut."),
    "cause.wet_feeder.remedy": (
        "Nothing aboard cures this.",
        "The marina's electrician cuts the dock's power, then tests and repairs its cable and posts.",
    ),
    "cause.wet_feeder.marina": (
        "The whole dock goes dark while my own breaker holds. Its cable may be wet or damaged. Please cut its power, keep people out of "
        "the water, and send your electrician."
    ),
    "cause.wet_feeder.confirm": (
        "The marina's electrician tests the dock's cable with every boat unplugged: low insulation to ground (earth) confirms it."
    ),
    "cause.other_loads_on_device.title": "Something else hangs on the same device",
    "cause.other_loads_on_device.lead": (
        "Your outlet shares its device with something else: another outlet, a dock lamp, a pump, a boat. That other thing leaks, and you "
        "lose power with it."
    ),
    "cause.other_loads_on_device.tonight": (*_LETHAL_TONIGHT, "Touch nothing else that is fed from that post."),
    "cause.other_loads_on_device.remedy": (
        "Ask the marina what else is on that device.",
        "The marina's electrician tests each thing on it and repairs the one that leaks.",
        "Each outlet for a boat gets a device of its own.",
    ),
    "cause.other_loads_on_device.marina": (
        "My outlet trips at times with nothing of mine in it. What else is on its device? Please have your electrician test all of it."
    ),
    "cause.other_loads_on_device.confirm": (
        "The marina's electrician takes the other loads off that device: with your outlet empty it holds, and trips when they return."
    ),
    "cause.foreign_current.title": "Current from elsewhere runs through the boat",
    "cause.foreign_current.lead": (
        "Current from another boat or from the dock gets into the water, enters your hull and runs home in your ground (earth) wire. Your "
        "own devices cannot see it."
    ),
    "cause.foreign_current.tonight": (*_LETHAL_TONIGHT, "Keep everyone out of the water along the whole dock."),
    "cause.foreign_current.remedy": (
        "The marina's electrician finds the boat or cable that the current comes from.",
        "A technician checks that your own boat adds nothing to it.",
    ),
    "cause.foreign_current.marina": (
        "Current that is not mine seems to run through my hull and ground (earth) wire. Someone's boat or your dock leaks into the water. "
        "Please keep people out and send your electrician."
    ),
    "cause.foreign_current.confirm": (
        "A technician clamps the whole cord, then its ground (earth) wire: both read the same, while the live wires together read next to "
        "nothing."
    ),
    "cause.data_cable_path.title": "A data or TV cable ties the boat to the shore",
    "cause.data_cable_path.lead": (
        "The shield of a TV, phone or network cable joins the boat's ground (earth) to the shore a second time. Stray current can "
        "take that way."
    ),
    "cause.data_cable_path.tonight": (
        _UNPLUGGED,
        _NO_SWIM,
        "Once the boat is unplugged, pull every TV, phone and network cable to the shore.",
    ),
    "cause.data_cable_path.remedy": (
        "Use no metal cable to the shore but the shore cord. Radio links or glass fibre do the rest.",
        "If such a cable must stay, a technician fits an isolating coupler in it.",
    ),
    "cause.data_cable_path.marina": (
        "A TV or network cable seems to carry stray current between my boat and your dock. I have pulled it. Please check its outlet."
    ),
    "cause.data_cable_path.confirm": "A technician clamps that cable while the boat has power: more than a few milliamps confirms it.",
    "cause.second_inlet_live.title": "The pins of an unused inlet are live",
    "cause.second_inlet_live.lead": (
        "The boat has a second inlet that nobody uses, and it hangs on the same wires. Its bare pins are live while the boat has "
        "power. Touching them can kill."
    ),
    "cause.second_inlet_live.tonight": (*_LETHAL_TONIGHT, "Keep hands and faces away from every open inlet. Warn all who come aboard."),
    "cause.second_inlet_live.remedy": (
        "The boat stays unplugged until this is done.",
        "A technician fits a switch that lets only one inlet feed the boat at a time.",
    ),
    "cause.second_inlet_live.marina": (
        "The pins of an unused inlet on my boat may be live. The boat is unplugged. Please keep people from plugging it in."
    ),
    "cause.second_inlet_live.confirm": (
        "A technician reads ohms from inlet to inlet, both cords out and sources locked out: line through to line confirms it."
    ),
    "cause.device_locked_out.title": "The dock device has worn out and stays off",
    "cause.device_locked_out.lead": (
        "Some devices test themselves and shut for good at the end of their life. This one opens, or stays off, with nothing plugged in."
    ),
    "cause.device_locked_out.tonight": (_UNPLUGGED, _NO_SWIM, _TELL),
    "cause.device_locked_out.remedy": (
        "Leave it off. Do not use that outlet.",
        "The marina's electrician replaces it with the same kind and rating.",
    ),
    "cause.device_locked_out.marina": (
        "The ground-fault device on this post will not stay on, with nothing plugged in. Please have it replaced with the same kind."
    ),
    "cause.device_locked_out.confirm": (
        "The marina's electrician tests the outlet with its wires off the device: they test well, and the device still does not close."
    ),
    "cause.surge.title": "A pulse from lightning or the grid",
    "cause.surge.lead": (
        "Lightning or switching in the grid sends a pulse along the dock. It lasts no time, and many devices open at once. The same "
        "pulse may have harmed something."
    ),
    "cause.surge.tonight": (_UNPLUGGED, _NO_SWIM, _TELL),
    "cause.surge.remedy": (
        "Ask at the next posts: did they trip at the same moment?",
        "The marina tests its devices with TEST before boats are plugged in.",
        "A technician checks chargers and electronics after a near strike.",
    ),
    "cause.surge.marina": (
        "My power tripped in a storm or a power dip. Did other posts trip too? Please test your devices before you turn them on."
    ),
    "cause.surge.confirm": "The marina's log shows that many posts opened in the same minute. No test on the boat can show it afterwards.",
    "cause.uncoordinated_devices.title": "One hard fault darkens the whole dock",
    "cause.uncoordinated_devices.lead": (
        "A boat has a hard fault. The device of the whole dock sees it as well, and it is as quick as the one at the outlet. So the whole "
        "dock can go dark for one boat."
    ),
    "cause.uncoordinated_devices.tonight": (*_LETHAL_TONIGHT, "Leave every load aboard off."),
    "cause.uncoordinated_devices.remedy": (
        "A technician finds the hard fault aboard.",
        "The marina's electrician checks that the dock's device waits long enough for the outlet's own.",
    ),
    "cause.uncoordinated_devices.marina": (
        "The whole dock and my own outlet went dark together. My boat may have a hard fault and is unplugged. Please check how your "
        "devices work together."
    ),
    "cause.uncoordinated_devices.confirm": (
        "Both devices were found open. The marina's electrician compares ratings and delays; a technician tests the boat's insulation."
    ),
    "cause.hot_breaker.title": "The breaker or a joint in it gets hot",
    "cause.hot_breaker.lead": (
        "A worn breaker or a loose joint makes heat of its own. It opens after minutes, below its rating, and sooner on a hot day. It "
        "can start a fire."
    ),
    "cause.hot_breaker.tonight": (
        _UNPLUGGED,
        _NO_SWIM,
        _TELL,
        "Turn the breaker off and let plug and outlet cool before the plug is pulled.",
    ),
    "cause.hot_breaker.remedy": (
        "Leave that breaker off.",
        "The marina's electrician tightens or replaces the breaker and the outlet.",
        "A plug with brown or melted pins is replaced too.",
    ),
    "cause.hot_breaker.marina": (
        "This breaker opens after minutes at less than its rating. It or the outlet may get hot. Please turn it off and have it checked."
    ),
    "cause.hot_breaker.confirm": (
        "The marina's electrician runs a known load through it: it opens below its rating, and one joint is far warmer than the rest."
    ),
    "cause.inrush.title": "A start takes too much current",
    "cause.inrush.lead": ("A motor or transformer takes many times its normal current as it starts. The breaker opens in that instant."),
    "cause.inrush.tonight": (
        "Leave the air conditioner and other large motors off.",
        _UNPLUGGED,
        _NO_SWIM,
    ),
    "cause.inrush.remedy": (
        "Before power goes on, turn every load off. Then turn loads on with a pause between them.",
        "A technician can fit a soft start to the motor or transformer.",
        "The breaker keeps its rating.",
    ),
    "cause.inrush.marina": (
        "My boat seems to take too much current for a moment when a motor starts. I keep it off until a technician has fitted a soft start."
    ),
    "cause.inrush.confirm": (
        "A technician records the peak current at the start: many times the running current, with the residual near zero."
    ),
    "cause.short_circuit.title": "Line and neutral touch",
    "cause.short_circuit.lead": (
        "Somewhere line and neutral touch. All the current that the wires can carry flows at once, with a bang or a flash. It can "
        "start a fire."
    ),
    "cause.short_circuit.tonight": (
        _UNPLUGGED,
        _NO_SWIM,
        _TELL,
        "Nobody turns it on after the bang. Smell and look for anything hot before you leave the boat alone.",
    ),
    "cause.short_circuit.remedy": (
        "Leave everything off.",
        "A technician finds the place, repairs it, and checks cords and panel for burns.",
    ),
    "cause.short_circuit.marina": (
        "There was a bang when my boat got power, and the breaker opened. The boat is unplugged. Please check the outlet for burns."
    ),
    "cause.short_circuit.confirm": (
        "A technician reads ohms from line to neutral, all loads unplugged and all sources locked out: next to nothing confirms it."
    ),
    "cause.low_voltage.title": "Too few volts reach the boat",
    "cause.low_voltage.lead": (
        "Long or thin wires, or too many boats on the dock, eat up the volts. Motors then stall or draw more current, and get hot."
    ),
    "cause.low_voltage.tonight": (
        "Leave the air conditioner, fridge and pumps off: few volts can burn their motors.",
        _UNPLUGGED,
        _NO_SWIM,
    ),
    "cause.low_voltage.remedy": (
        "Use one cord of the right size, as short as it can be, and no coil of spare cord.",
        "The marina's electrician reads the volts at the post under load.",
    ),
    "cause.low_voltage.marina": (
        "Too few volts seem to reach my boat, and motors suffer. Please have the volts at this post read when the dock is busy."
    ),
    "cause.low_voltage.confirm": (
        "The boat's own voltmeter falls far as loads go on. A technician compares volts at the post and aboard under the same load."
    ),
    "cause.supply_lost.title": "The dock itself has no power",
    "cause.supply_lost.lead": "Nothing tripped on this boat. The power of the dock or of the whole town is out.",
    "cause.supply_lost.tonight": (
        "Turn off the main switch and the breaker on the dock post until the power is back.",
        _UNPLUGGED,
        _NO_SWIM,
    ),
    "cause.supply_lost.remedy": (
        "Ask the marina when the power comes back.",
        "Plug in with every load off, and turn loads on with a pause between them.",
    ),
    "cause.supply_lost.marina": "There is no power at my post, and my breakers are on. Is the power of the dock out?",
    "cause.supply_lost.confirm": "Other posts and the dock's lamps are dark too, and every breaker is still on.",
    "cause.combining_y.title": "The Y with two dock plugs",
    "cause.combining_y.lead": (
        "The Y joins two neutrals. Current goes out by one dock plug and partly comes home by the other, so each breaker "
        "sees an unequal pair. It trips with no fault aboard."
    ),
    "cause.combining_y.tonight": (
        *_LETHAL_TONIGHT,
        "Turn off the main and both dock breakers. Then take the whole Y out, both plugs.",
    ),
    "cause.combining_y.remedy": (
        "Stop using the Y at outlets with ground-fault devices.",
        "Ask the marina for one outlet that fits the boat's own cord.",
        "If there is none, ask a technician about an isolation transformer.",
        "Test again without the Y: it can hide a second fault.",
    ),
    "cause.combining_y.marina": (
        "I used a Y with two of your outlets. It trips ground-fault devices. I have taken the whole Y out. Is there one "
        "outlet that fits my cord?"
    ),
    "cause.combining_y.confirm": (
        "With the whole Y out and one proper outlet in use, it holds. Clamped by a technician, the two plugs read equal and opposite."
    ),
    "cause.joined_inlets.title": "Two inlets, with neutrals joined aboard",
    "cause.joined_inlets.lead": (
        "The boat has two cords, and their neutrals meet aboard. Current goes out by one cord and partly comes home by "
        "the other, so both breakers see an unequal pair."
    ),
    "cause.joined_inlets.tonight": (
        *_LETHAL_TONIGHT,
        "Turn off the main and both dock breakers. Then take both cords out. Use neither of them.",
    ),
    "cause.joined_inlets.remedy": ("A technician gives each inlet its own neutral bus.", "Until that is done, neither cord is used."),
    "cause.joined_inlets.marina": (
        "The neutrals of my two inlets seem to be joined aboard. Both cords are out until a technician has parted them."
    ),
    "cause.joined_inlets.confirm": (
        "A technician reads ohms between the two neutrals, both cords out and sources locked out: under about 1 ohm confirms it."
    ),
    # --- tests ---
    "test.ask": "What did you see?",
    "test.over_range": "OL: the meter shows no end",
    "test.cannot": "I can't do this one",
    "test.look_over.title": "Look at plug, cord, inlet and adapter",
    "test.look_over.steps": (
        *_DARK,
        "Wait a minute. Feel near the plug with the back of your hand. If it is warm, let it cool.",
        *_UNPLUG,
        "Look at both ends of the cord, the adapter, the inlet and the face of the dock outlet. Only look.",
        "Walk along the cord. Look for cuts, burns, and places that lay in the water.",
        "Note what you see: clean and dry, wet or salty, or burnt.",
    ),
    "test.look_over.cautions": (
        "If there is water in the dock outlet, do not touch it. Tap Stop.",
        "Put nothing into the outlet or the inlet.",
        "What looks clean can still leak inside.",
    ),
    "test.look_over.clean": "Clean and dry",
    "test.look_over.wet": "Wet, salty or green",
    "test.look_over.burnt": "Burnt, melted or cut",
    "test.look_over.why": "It takes three minutes with the power off, and it finds many bad cords.",
    "test.test_button.title": "Press TEST on the dock breaker",
    "test.test_button.steps": (
        *_DARK,
        *_UNPLUG,
        _POSTS_ON,
        "Press TEST once.",
        "Note whether the breaker opens.",
        "To end: turn off the breaker on the dock post.",
    ),
    "test.test_button.cautions": (*_LIVE, "If it stays on, turn it off by hand. Do not use that outlet, and tell the marina."),
    "test.test_button.opens": "It opens",
    "test.test_button.stays": "It stays on",
    "test.test_button.why": "A dead device holds because nothing is watching. “It holds” counts only once TEST has opened it.",
    "test.pedestal_alone.title": "Dock breaker on, nothing plugged in",
    "test.pedestal_alone.steps": (*_DARK, *_UNPLUG, _POSTS_ON, _WAIT_MINUTE, "To end: turn off the breaker on the dock post."),
    "test.pedestal_alone.cautions": _LIVE,
    "test.pedestal_alone.holds": _HOLDS,
    "test.pedestal_alone.trips": _TRIPS,
    "test.pedestal_alone.why": "If it trips with nothing plugged in, the cause is ashore.",
    "test.cord_alone.title": "Only the cord on the dock breaker",
    "test.cord_alone.steps": (
        *_DARK,
        *_UNPLUG,
        "Check the whole cord. It must be dry and whole, and its boat end must have sockets deep inside a shroud. If not, stop here.",
        "Hang the boat end up dry, in sight, and clear of the planks and the water.",
        "Send everyone away from the cord.",
        "Push the plug into the dock post.",
        _POST_ON,
        _WAIT_MINUTE,
        "To end: turn off the breaker on the dock post before anyone touches the cord. Then pull the plug.",
    ),
    "test.cord_alone.cautions": (
        *_LIVE,
        "Only with one plain cord: no Y, no adapter, no bare pins anywhere.",
        "The far end is live. Keep it in sight, and let nobody touch it.",
    ),
    "test.cord_alone.holds": _HOLDS,
    "test.cord_alone.trips": _TRIPS,
    "test.cord_alone.why": "It tells a bad cord from a fault on the boat.",
    "test.main_off.title": "Cord to the boat, main switch off",
    "test.main_off.steps": (*_DARK, _CORD_IN, _MAIN_STAYS_OFF, _POSTS_ON, _WAIT_MINUTE, "To end: turn off the breaker on the dock post."),
    "test.main_off.cautions": _LIVE,
    "test.main_off.holds": _HOLDS,
    "test.main_off.trips": _TRIPS,
    "test.main_off.why": "It splits the path: cord and inlet on one side, the boat's wiring on the other.",
    "test.branches_off.title": "Main switch on, all branch breakers off",
    "test.branches_off.steps": (*_DARK, _CORD_IN, _BRANCHES_OFF, _POSTS_ON, _MAIN_ON, _WAIT_MINUTE, _DONE),
    "test.branches_off.cautions": _ABOARD,
    "test.branches_off.holds": _HOLDS,
    "test.branches_off.trips": _TRIPS,
    "test.branches_off.why": "With no load on, a trip points to the panel or the wires that lead to it.",
    "test.one_at_a_time.title": "One load at a time",
    "test.one_at_a_time.steps": (
        *_DARK,
        _CORD_IN,
        _BRANCHES_OFF,
        _POSTS_ON,
        _MAIN_ON,
        "Turn on one branch breaker and its load.",
        "Wait until it really runs: hot, cold, or humming. Ask yourself: did it run? If not, it does not count.",
        "Turn that load and its breaker off. Go on with the next one.",
        "If one trips it, turn off the main and that branch. That branch stays off.",
        "Look again before the dock breaker goes on for the next load: nobody in the water, dry hands, dry feet.",
        "Stop when two loads have tripped it, or when all have run.",
        _DONE,
    ),
    "test.one_at_a_time.cautions": (
        *_ABOARD,
        "A load that tripped it stays off for good today.",
        "A water heater that is hot already will not run. Let some hot water out first.",
    ),
    "test.one_at_a_time.holds_all": "All of them ran, and it held",
    "test.one_at_a_time.one_trips": "Only one of them trips it",
    "test.one_at_a_time.any_trips": "Two or more trip it, each alone",
    "test.one_at_a_time.why": "One bad load means a leak in it. If every load trips it, the wiring or the plug is to blame.",
    "test.appliance_unplugged.title": "The suspect appliance unplugged",
    "test.appliance_unplugged.steps": (
        *_DARK,
        "Turn off the branch breaker of the appliance you suspect. Often it is the water heater.",
        "Pull that appliance's own plug. If it has no plug, choose “I can't do this one”.",
        _CORD_IN,
        _POSTS_ON,
        _MAIN_ON,
        "Turn on the loads that ran when it tripped, but not that appliance. Let them run for a minute.",
        _NOTE,
        _DONE,
    ),
    "test.appliance_unplugged.cautions": (*_ABOARD, "Take no covers off. A wired-in appliance is work for a technician."),
    "test.appliance_unplugged.holds": _HOLDS,
    "test.appliance_unplugged.trips": _TRIPS,
    "test.appliance_unplugged.why": "A switch or breaker leaves the neutral connected. Only the plug takes the appliance fully away.",
    "test.test_load.title": "One plain lamp or heater, all else off",
    "test.test_load.steps": (
        *_DARK,
        _BRANCHES_OFF,
        "Find a plain lamp or heater with a plug, of at most 1500 W. Plug it into a dry cabin socket.",
        _CORD_IN,
        _POSTS_ON,
        _MAIN_ON,
        "Turn on only the branch breaker of that socket, and the lamp or heater. Check that it runs.",
        _WAIT_MINUTE,
        _DONE,
    ),
    "test.test_load.cautions": (*_ABOARD, "Use a whole, dry lamp or heater that you know works. Stay with it."),
    "test.test_load.holds": _HOLDS,
    "test.test_load.trips": _TRIPS,
    "test.test_load.why": "A plain load does not leak. If it trips even so, its return current is going the wrong way.",
    "test.wait_then_load.title": "Wait for the inverter, then turn loads on",
    "test.wait_then_load.steps": (
        *_DARK,
        _CORD_IN,
        _BRANCHES_OFF,
        "Turn the inverter/charger back on, with all loads off.",
        _POSTS_ON,
        _MAIN_ON,
        "Wait one minute, until the inverter/charger shows that it has taken shore power.",
        "Then turn on one plain load, such as a lamp. Check that it runs.",
        _NOTE,
        _DONE,
    ),
    "test.wait_then_load.cautions": _ABOARD,
    "test.wait_then_load.holds": _HOLDS,
    "test.wait_then_load.trips": _TRIPS,
    "test.wait_then_load.why": (
        "An inverter joins neutral and ground (earth) for some seconds after you plug in. Loads that come later tell us if that is it."
    ),
    "test.without_y.title": "The whole Y out, one proper plug in its place",
    "test.without_y.steps": (
        _LOADS_OFF,
        _MAIN_OFF,
        "Turn off both breakers on the dock post (pedestal). Both cords must be dead before you touch either.",
        "Pull both plugs of the Y out of the dock post. Take the whole Y away.",
        "Find one outlet that fits the boat's own cord, or one proper single adapter. If there is neither, choose “I can't do this one”.",
        "Check the boat end of the cord. If it is out, connect it first.",
        "Then push the one plug into the dock post.",
        _POST_ON,
        _MAIN_ON,
        "Turn on one small load, such as a lamp. Check that it runs.",
        _WAIT_MINUTE,
        _DONE,
    ),
    "test.without_y.cautions": (
        "Never leave one plug of the Y in and one out. The loose pins can be live.",
        "The one outlet must have a ground-fault device, and its TEST button must have opened it.",
        "With a single adapter, leave all big loads and all 240 V loads off.",
        _CLEAR,
        _ONCE,
        _NEVER_AFTER,
        _POLARITY,
    ),
    "test.without_y.holds": _HOLDS,
    "test.without_y.trips": _TRIPS,
    "test.without_y.why": "A Y trips ground-fault breakers with no fault aboard, and it hides other faults. So it goes first.",
    "test.other_pedestal.title": "Another dock post that is watching",
    "test.other_pedestal.steps": (
        "Ask the marina which post you may use. It must have a ground-fault device with a TEST button.",
        *_DARK,
        *_UNPLUG,
        "Leave the branch breaker of the load you suspect off.",
        "Go to the new post, with nothing plugged in. Turn on the breaker on the new dock post, once, and press TEST.",
        "If TEST does not open it, stop here and do not use that post.",
        "Turn off the breaker on the new dock post, all the way.",
        "Connect the boat end of the cord first. Then push the plug into the new dock post.",
        "Turn on the breaker on the new dock post, once.",
        _MAIN_ON,
        "Turn on one small load, such as a lamp.",
        _WAIT_MINUTE,
        "To end: loads off, main off, then turn off the breaker on the new dock post.",
    ),
    "test.other_pedestal.cautions": (
        *_ABOARD,
        "Never do this after a tingle, or after lights that were too bright or too dim.",
        "If it holds here, that is a clue. It is no leave to stay plugged in.",
        "Do not ask another boat to plug in at your post.",
    ),
    "test.other_pedestal.holds": _HOLDS,
    "test.other_pedestal.trips": _TRIPS,
    "test.other_pedestal.why": "If the trip follows the boat, the cause is aboard. If it stays behind, it is in the first post.",
    "test.light_load.title": "A few light loads for 15 minutes",
    "test.light_load.steps": (
        *_DARK,
        _CORD_IN,
        "Turn off the branch breakers of all heavy loads: heaters, water heater, air conditioner, stove.",
        _POSTS_ON,
        _MAIN_ON,
        "Turn on a few lamps and nothing heavy.",
        "Wait 15 minutes. Stay near. Note whether the breaker holds or trips.",
        _DONE,
    ),
    "test.light_load.cautions": _ABOARD,
    "test.light_load.holds": _HOLDS,
    "test.light_load.trips": _TRIPS,
    "test.light_load.why": "Light loads cannot overload the breaker. A trip now is more likely a leak.",
    "test.adapter_continuity.title": "Ohms through the cord or adapter, in your hand",
    "test.adapter_continuity.steps": (
        *_DARK,
        *_UNPLUG,
        "Take the cord and each adapter apart from each other. Both ends of each must be in your hand.",
        "Set the meter to ohms. Touch its leads together and note the reading.",
        "Measure each pin to the same pin at the far end. It should read close to the leads alone.",
        "Measure each pin to every other pin. It should read open, unless the label shows that they are joined.",
        "Note above all what the ground (earth) pin reads through to.",
    ),
    "test.adapter_continuity.cautions": (
        "Only with the part unplugged at both ends. Never measure into the dock outlet or the boat's inlet.",
        "Wriggle the ends while you measure: a loose wire may come and go.",
    ),
    "test.adapter_continuity.fine": "Each pin reads through to its own pin only",
    "test.adapter_continuity.exchanged": "A pin reads through to the wrong pin",
    "test.adapter_continuity.ground_open": "The ground (earth) pin reads open",
    "test.adapter_continuity.why": "A swapped or broken wire in a cord or adapter is deadly, and no trip test is sure to show it.",
    "test.bond_ohms.title": "Ohms from neutral to ground aboard",
    "test.bond_ohms.steps": (
        *_DARK,
        *_UNPLUG,
        *_SOURCES_LOCKED,
        *_PROVE_DEAD,
        "Only now set the meter to ohms. Read from the neutral bus to the boat's ground (earth) bus.",
        "Turn off the main switch aboard before anything is put back.",
    ),
    "test.bond_ohms.cautions": (
        "A boat can feed itself: inverter, a welded relay, a generator that starts alone. So no ohms before volts are read.",
        "An inverter may join neutral and ground (earth) while it is off. A low reading may be its relay.",
        "At the cord plug a galvanic isolator looks open. Read at the ground bus.",
    ),
    "test.bond_ohms.ask": "What does the meter read, in ohms?",
    "test.bond_ohms.why": "Neutral and ground (earth) must be apart aboard. A few ohms between them explain trips with any load.",
    "test.clamp_cord.title": "Clamp around the whole cord",
    "test.clamp_cord.steps": (
        *_DARK,
        "Close the clamp around the whole cord, where it is whole and dry. Rest the meter where you can read it.",
        _CORD_IN,
        _POSTS_ON,
        _MAIN_ON,
        "Turn on one load. Check that it runs. Read the clamp, and turn that load off before the next.",
        "If one load makes it trip, leave that load off. Enter the highest reading, in milliamps.",
        _DONE,
    ),
    "test.clamp_cord.cautions": (*_ABOARD, _CLAMP_SMALL, _CLAMP_PICKUP, _TRIPS_FIRST, "Stand on the dock and do not lean over the water."),
    "test.clamp_cord.ask": "What does the clamp read, in milliamps?",
    "test.clamp_cord.why": "With all wires inside the clamp, what it reads is current that goes by the water or another boat.",
    "test.clamp_live.title": "Clamp around the live wires together",
    "test.clamp_live.steps": (
        *_DARK,
        _POST_OUT,
        "Connect the cord's plug to a closed break-out lead. Then push the break-out lead's plug into the dock post.",
        "Close the clamp around all line and neutral wires together, with the ground (earth) wire outside.",
        _POSTS_ON,
        _MAIN_ON,
        "Turn on one load. Check that it runs. Read the clamp, and turn that load off before the next.",
        "If one load makes it trip, leave that load off. Enter the highest reading, in milliamps.",
        _DONE,
    ),
    "test.clamp_live.cautions": (
        *_ABOARD,
        "Use only a closed break-out lead, made for this, with every wire insulated.",
        _CLAMP_SMALL,
        _CLAMP_PICKUP,
        _TRIPS_FIRST,
    ),
    "test.clamp_live.ask": "What does the clamp read, in milliamps?",
    "test.clamp_live.why": "This is the very sum that the dock device watches.",
    "test.clamp_ground.title": "Clamp around the ground wire alone",
    "test.clamp_ground.steps": (
        *_DARK,
        _POST_OUT,
        "Connect the cord's plug to a closed break-out lead. Then push the break-out lead's plug into the dock post.",
        "Close the clamp around the green ground (earth) wire only. The wire stays connected.",
        _POSTS_ON,
        _MAIN_ON,
        "Turn on one load. Check that it runs. Read the clamp, and turn that load off before the next.",
        "If one load makes it trip, leave that load off. Enter the highest reading, in milliamps.",
        _DONE,
    ),
    "test.clamp_ground.cautions": (
        *_ABOARD,
        "Use only a closed break-out lead, made for this, with every wire insulated.",
        "A reading of zero here, with a trip, may mean that the ground (earth) is broken and the water carries the current.",
        _CLAMP_SMALL,
        _TRIPS_FIRST,
    ),
    "test.clamp_ground.ask": "What does the clamp read, in milliamps?",
    "test.clamp_ground.why": "It tells how much of the stray current comes home by the ground (earth) wire and how much does not.",
    "test.insulation.title": "Insulation of the boat's live wires",
    "test.insulation.steps": (
        *_DARK,
        *_UNPLUG,
        *_SOURCES_LOCKED,
        *_PROVE_DEAD,
        "Read ohms from neutral to ground (earth) first. If they are joined, this test says nothing; stop here.",
        "Disconnect electronics, chargers, surge devices, polarity lights and meters from the circuits under test.",
        "Join line and neutral of the boat. Keep every person away from all wiring.",
        "Apply 250 V DC to ground (earth), then 500 V DC for one minute. Note the reading at the end.",
        "Let the tester discharge the wiring. Read zero volts before you touch anything.",
        "Part line and neutral, and put back what you disconnected. Turn off the main switch aboard.",
    ),
    "test.insulation.cautions": (
        "The test voltage gives a shock, and it kills electronics that were left connected.",
        "Wiring and filters hold charge after the test.",
        "Heating elements may read high cold and low warm. Test both ways.",
    ),
    "test.insulation.ask": "What does the tester read, in megohms?",
    "test.insulation.why": "It finds weak insulation that no trip test shows, such as a heating element that failed in its middle.",
    # --- labels of facts on a test card ---
    "fact.who": "Who may do it",
    "fact.tool": "What it takes",
    "fact.minutes": "Work",
    "fact.minutes.text": "about {minutes} min",
    "fact.waiting": "Waiting",
    "fact.waiting.text": "about {minutes} min",
    "fact.power": "Power",
    "fact.power.on": "Power goes on during this test",
    "fact.power.off": "Power stays off",
    # --- why, in numbers ---
    "device.pedestal": "dock post's device",
    "device.aboard": "device aboard",
    "device.feeder": "dock feeder's device",
    "verdict.holds": "holds",
    "verdict.may_trip": "may trip",
    "verdict.trips": "trips",
    "verdict.unprotected": "nothing is watching",
    "why.residual": "The {device} would see {current}: it {verdict}.",
    "why.unprotected": "{current} would stray here, and nothing is watching.",
    "why.hull": "The boat's metal would stand at {volts} against the water around it.",
    "why.ratio.for": "“{asked}” – “{answer}”: {times} times as likely if this is the cause.",
    "why.ratio.against": "“{asked}” – “{answer}”: {times} times less likely if this is the cause.",
    # --- the verdict at the end ---
    "verdict.named.title": "Most likely: {title}",
    "verdict.named.lead": ("It stands at {percent}. That is an estimate, and a check by the right person comes next.",),
    "verdict.group.title": "One of these {count}",
    "verdict.group.lead": (
        "Together they stand at {percent}. The tests that you can do here do not tell them apart.",
        "Act on the worst of them.",
    ),
    "verdict.nothing_now.title": "No leakage now, with these loads running",
    "verdict.nothing_now.lead": (
        "The fault may come back. It may hide in a load that was not running, or in damp that has dried.",
        "Keep a log, and keep to the advice for tonight.",
    ),
    "verdict.unknown.title": "I can't name the cause",
    "verdict.unknown.lead": (
        "Your answers fit no single cause well enough, and no test is left that you may do.",
        "Leave the boat unplugged and call a marine electrical technician. Show this page.",
    ),
    "verdict.possible": "It may be this: {title}.",
    "verdict.danger.title": "Stop: do not use this hook-up",
    "verdict.danger.lead": (
        "What you told me can make metal or water live.",
        "Cut the power at the dock. Leave the boat unplugged until a technician has seen it.",
    ),
    "verdict.unwatched.title": "It holds because nothing is watching",
    "verdict.unwatched.lead": (
        "The outlet has no ground-fault device, or a dead one. Do not use it.",
        "A boat can leak here and nobody would know.",
    ),
    # --- how sure ---
    "progress.start": "Nothing known yet. A few questions come first.",
    "progress.early": "How sure: not yet. The likeliest stands at {percent}.",
    "progress.sure": "How sure: {percent} for “{title}”.",
    "progress.group": "How sure: {percent} that it is one of {count}.",
    "progress.tests": "Tests done: {count}.",
    "progress.misfit": "Some answers do not fit together. Please check them: {answers}.",
    # --- what was assumed ---
    "assumed.unknown": "Not known: “{asked}” Every answer to it is still counted in.",
    "assumed.default": "Nobody said, so I took {what} as {value}.",
    "assumed.mistakes": "I count on about {percent} of answers being wrong.",
    "assumed.steady": "I work with steady current. Surges and very fast currents are outside what I can compute.",
    # --- problems with what was typed ---
    "problem.number": "That is not one number. Type digits, such as 12.5 or 12,5, in {unit}.",
    "problem.ambiguous": "That can be read in two ways. Leave the comma out, or use a point before the decimals.",
    "problem.range": "It must be between {low} and {high} {unit}.",
    "problem.unit": "Please give it in {unit}.",
    "problem.no_choice": "Choose one of the answers. “I don't know” is one of them.",
    "problem.unknown_choice": "That answer is not in the list. Choose one of these.",
    # --- fixed labels of the page: webui/index.html, webui/static_pages.py and webui/page/ name them without "page." ---
    "page.description": "Why a boat's shore power trips, and which test to do next.",
    "page.skip": "Skip to the question",
    "page.reach": "Always at hand",
    "page.stop": "Stop",
    "page.stop_always": "Always",
    "page.gate_again": "Start again from the gate",
    "page.tonight": "Tonight",
    "page.cautions": "Cautions",
    "page.return": "Back to the question",
    "page.back": "Back",
    "page.keep": "Keep my answer",
    "page.undo": "Undo",
    "page.change": "Change",
    "page.save": "Enter",
    "page.answers": "Answers so far",
    "page.answer_kept": "Your answers are kept on this phone.",
    "page.storage_failed": "This phone did not let me save. Keep this page open, or your answers are lost.",
    "page.why": "Why do you ask?",
    "page.ranking": "Likely causes",
    "page.less_likely": "Less likely",
    "page.numbers": "In numbers",
    "page.for": "Speaks for it",
    "page.against": "Speaks against it",
    "page.repair": "Who may fix it",
    "page.remedy": "What puts it right",
    "page.marina": "Tell the marina",
    "page.assumed": "What I assumed",
    "page.new_case": "New case",
    "page.boot_wait": "The engine is starting",
    "page.boot_failed": "The engine did not start. Stop and Tonight still work. Your answers are kept. Try a newer browser if this stays.",
    "page.trouble": "Something went wrong here",
    "page.start_again": "Start the engine again",
    "page.offline_getting": "Saving for offline use: {done} of {total}",
    "page.offline_ready": "Ready to work offline",
    "page.offline_failed": "Not all parts are saved yet. Stay online and open this page once more.",
    "page.offline_never": "This browser can't keep the page for offline use.",
    "page.update_ready": "A new version is here. It starts when all tabs of this page are closed.",
    "page.notices": "Notices",
    "page.version": "Version",
    "page.no_script": "Scripts are off in this browser. You can still read Stop, Tonight and the cautions.",
}
