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
