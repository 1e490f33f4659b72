//! Explanations of readings: what they state must give the number, on its own.

use std::collections::BTreeMap;

use edgesheet::device::ContactIdx;
use edgesheet::network::Feed;
use edgesheet::network::Wired;
use edgesheet::number::Number;
use edgesheet::number::Rational;
use edgesheet::quantity::Polarity;
use edgesheet::report::Texts;
use edgesheet::report::WhySource;
use edgesheet::resistance::Arrival;
use edgesheet::resistance::Explanation;
use edgesheet::resistance::Origin;
use edgesheet::resistance::Prediction;
use edgesheet::resistance::ReadingState;
use edgesheet::resistance::Setup;
use edgesheet::resistance::Why;
use edgesheet::resistance::WhyStep;
use edgesheet::resistance::every_reading;
use serde_json::Value;

use crate::bar::BOTH;
use crate::bar::Made;
use crate::bar::make;
use crate::bar::six_text;
use crate::pixel_bar::PixelBar;
use crate::program::bar;
use crate::program::fresh;
use crate::program::run;
use crate::random_bar::RandomBar;

const BARS: u64 = 60;

fn setup(made: &Made, polarity: Polarity) -> Setup {
    let operating = edgesheet::network::operating(&made.network, &made.device, &made.device.points[0], polarity);
    Setup { operating, circuit: None }
}

/// Every reading between the first five contacts of many random bars, some with contacts that take up a part, some with
/// full mixing, some with both signs.
fn each_explanation(mut check: impl FnMut(&Made, &Prediction, usize, &Why)) {
    let plain = (0..BARS).map(RandomBar::new).map(|bar| bar.text(&bar.names()));
    let pixels = (0..BARS).map(|seed| PixelBar::new(seed).text());
    for text in plain.chain(pixels) {
        let made = make(&text);
        let readings = every_reading(made.device.contacts.len().min(5));
        for polarity in BOTH {
            let prediction = made.predict(0, polarity, &readings);
            let setup = setup(&made, polarity);
            for row in 0..readings.len() {
                let why = edgesheet::resistance::why(&made.network, &setup, &prediction, row).expect("an explanation");
                check(&made, &prediction, row, &why);
            }
        }
    }
}

fn means(explanation: &Explanation) -> Vec<(Origin, &[Arrival], &Number)> {
    let of_step = |step| match step {
        &WhyStep::Leaves { .. } => Vec::new(),
        WhyStep::Mean { at, arrivals, share, .. } => vec![(*at, arrivals.as_slice(), share)],
        WhyStep::HandedOn { contacts, arrivals, share, .. } => {
            let each = contacts.iter().zip(arrivals);
            each.map(|(contact, arrivals)| (Origin::Contact(*contact), arrivals.as_slice(), share)).collect()
        }
    };
    explanation.steps.iter().flat_map(of_step).collect()
}

fn exact(number: &Number) -> Rational {
    number.exact().expect("a fraction").clone()
}

fn wired(prediction: &Prediction) -> &Wired<Rational> {
    prediction.channels.exact().expect("fractions")
}

/// What a contact emits: the weights of the feeds that come from it.
fn emitted(prediction: &Prediction, contact: ContactIdx) -> Rational {
    let feeds = wired(prediction).bundles.iter().flat_map(|bundle| &bundle.feeds);
    feeds.filter(|(feed, _)| *feed == Feed::Contact(contact)).map(|(_, weight)| weight.clone()).sum()
}

/// The shares that an explanation states, with 1 at the inlet and 0 at the outlet.
fn stated(explanation: &Explanation, current: [ContactIdx; 2]) -> BTreeMap<Origin, Rational> {
    let mut shares: BTreeMap<Origin, Rational> = BTreeMap::new();
    shares.insert(Origin::Contact(current[0]), Rational::ONE);
    shares.insert(Origin::Contact(current[1]), Rational::ZERO);
    for (at, _, share) in means(explanation) {
        assert!(shares.insert(at, exact(share)).is_none(), "{at:?} is told twice");
    }
    shares
}

fn weight(arrivals: &[Arrival]) -> Rational {
    arrivals.iter().map(|arrival| exact(&arrival.strand.weight)).sum()
}

fn brought(arrivals: &[Arrival], shares: &BTreeMap<Origin, Rational>) -> Rational {
    arrivals.iter().map(|arrival| &exact(&arrival.strand.weight) * &shares[&arrival.strand.from]).sum()
}

/// A contact without current has the mean potential of what it absorbs, a mixture that of what runs into it; the current
/// is what the inlet emits less what it absorbs, or what the outlet absorbs (M. Büttiker, Phys. Rev. Lett. 57, 1761
/// (1986)); the reading is (V_k − V_l)/I. All of it again from what is stated, share by share.
#[test]
fn what_is_stated_gives_the_number() {
    let mut numbers = 0;
    each_explanation(|_, prediction, row, why| {
        let expected = &prediction.expected[row];
        let Why::Number(explanation) = why else { return assert_ne!(expected.state, ReadingState::Fine) };
        let reading = &expected.reading;
        let shares = stated(explanation, reading.current);
        for (at, arrivals, share) in means(explanation) {
            assert!(arrivals.iter().all(|arrival| exact(&arrival.share) == shares[&arrival.strand.from]));
            assert_eq!(&exact(share) * &weight(arrivals), brought(arrivals, &shares), "{at:?} {reading:?}");
        }
        let balance = &explanation.balance;
        let emitted = &emitted(prediction, balance.at);
        assert_eq!(weight(&balance.arrivals), *emitted, "{reading:?}");
        let taken = brought(&balance.arrivals, &shares);
        let current = if balance.at == reading.current[0] { emitted - &taken } else { taken };
        let [plus, minus] = reading.voltage.map(|contact| shares[&Origin::Contact(contact)].clone());
        assert_eq!(current, exact(&balance.current));
        assert_eq!(Some(&(plus - minus) / &current), expected.exact, "{reading:?}");
        numbers += 1;
    });
    assert!(numbers > 5_000, "{numbers}");
}

/// The stated shares of contacts, put into the conductance matrix, leave every contact but inlet and outlet without
/// current as far as all its neighbours are stated, and the stated current flows in.
#[test]
fn stated_shares_satisfy_the_conductance_matrix() {
    let mut rows_checked = 0;
    each_explanation(|_, prediction, row, why| {
        let Why::Number(explanation) = why else { return };
        let current = prediction.expected[row].reading.current;
        let shares = stated(explanation, current);
        let matrix = &prediction.conductance.exact().unwrap().matrix;
        let contacts = matrix.rows();
        for contact in (0..contacts).filter(|contact| shares.contains_key(&Origin::Contact(ContactIdx(*contact)))) {
            let terms = (0..contacts)
                .filter(|other| !matrix[(contact, *other)].is_zero())
                .map(|other| Some(&matrix[(contact, other)] * shares.get(&Origin::Contact(ContactIdx(other)))?));
            let Some(flowing) = terms.sum::<Option<Rational>>() else { continue };
            let driven = match ContactIdx(contact) {
                at if at == current[0] => exact(&explanation.balance.current),
                at if at == current[1] => -exact(&explanation.balance.current),
                _ => Rational::ZERO,
            };
            assert_eq!(flowing, driven);
            rows_checked += 1;
        }
    });
    assert!(rows_checked > 5_000, "{rows_checked}");
}

/// All that a contact absorbs is told, and no contact, mixture or border is named that is not there.
#[test]
fn explanations_speak_of_what_there_is() {
    let texts = Texts::built_in("field").unwrap();
    each_explanation(|made, prediction, row, why| {
        let expected = &prediction.expected[row];
        if let Why::Number(explanation) = why {
            for (at, arrivals, _) in means(explanation) {
                let whole = match at {
                    Origin::Contact(contact) => emitted(prediction, contact),
                    Origin::Mixture(bundle) => wired(prediction).bundles[bundle.0].weight.clone(),
                };
                assert_eq!(weight(arrivals), whole, "{at:?}");
            }
        }
        let source = WhySource {
            device: &made.device,
            network: &made.network,
            point: &made.device.points[0],
            polarity: Polarity::Toward,
        };
        let sentences = edgesheet::report::why_sentences(source, expected, why, &texts).unwrap();
        assert!(sentences.len() >= 2, "{sentences:?}");
        for sentence in &sentences {
            for named in sentence.split("contact ").skip(1) {
                let name: String = named.chars().take_while(|c| c.is_ascii_alphanumeric()).collect();
                assert!(made.device.contacts.iter().any(|contact| contact.name == name), "{name} in {sentence}");
            }
            assert!(sentence.ends_with('.') && !sentence.contains("  ") && !sentence.contains(" ,"), "{sentence}");
        }
    });
}

fn told(text: &str, reading: &str, polarity: Polarity) -> String {
    let made = make(text);
    let names: Vec<ContactIdx> = reading.chars().map(|c| named(&made, c)).collect();
    let reading = edgesheet::resistance::Reading::new([names[0], names[1]], [names[2], names[3]]);
    let prediction = made.predict(0, polarity, &[reading]);
    let why = edgesheet::resistance::why(&made.network, &setup(&made, polarity), &prediction, 0).unwrap();
    let source = WhySource { device: &made.device, network: &made.network, point: &made.device.points[0], polarity };
    let texts = Texts::built_in("field").unwrap();
    edgesheet::report::why_sentences(source, &prediction.expected[0], &why, &texts).unwrap().join("\n")
}

fn named(made: &Made, name: char) -> ContactIdx {
    ContactIdx(made.device.contacts.iter().position(|contact| contact.name == name.to_string()).unwrap())
}

#[track_caller]
fn holds(told: &str, parts: &[&str]) {
    let mut rest = told;
    for part in parts {
        let at = rest.find(part).unwrap_or_else(|| panic!("“{part}” is not said, or too early, in\n{told}"));
        rest = &rest[at + part.len()..];
    }
}

/// Filling 3 with 1 under the gate, told by hand after the picture of the edge channels: electrons clockwise at +.
#[test]
fn a_gate_is_told_by_hand() {
    let text = six_text("3", &[("TG", "gate", 250, 350, "1")], "");
    holds(
        &told(&text, "1425", Polarity::Toward),
        &[
            "electrons run clockwise round the outer rim, with the higher filling on their right hand",
            "Contact 1, at share 1, sends out 3 channels, which run along the rim to contact 2.",
            "Contact 2 takes up only channels from contact 1 and takes their share: 1.",
            "1 runs under TG to contact 3; 2 turn at the border of TG and run along it to contact 6.",
            "Contact 6 takes up 2 channels from contact 2 at share 1 and 1 channel from contact 5 at share 0",
            "(2 × 1 + 1 × 0)/3 = 2/3",
            "The + lead on contact 2 reads share 1, the − lead on contact 5 share 0.",
            "3 − 3 × 2/3 = 1, in e²/h",
            "= (1 − 0)/1 h/e² = 1 h/e² = 25.8128 kΩ",
        ],
    );
    holds(
        &told(&text, "1425", Polarity::Away),
        &[
            "electrons run counter-clockwise",
            "left hand",
            "sends out 3 channels, which run along the rim to contact 6.",
        ],
    );
}

/// Holes run the other way round; their larger |ν| lies on the left hand at +.
#[test]
fn holes_are_told_by_hand() {
    let text = six_text("-3", &[("TG", "gate", 250, 350, "-1")], "");
    holds(
        &told(&text, "1436", Polarity::Toward),
        &[
            "holes run counter-clockwise round the outer rim, with the larger |ν| on their left hand",
            "which run along the rim to contact 6.",
            "= −1 h/e² = −25.8128 kΩ",
        ],
    );
}

/// Electrons in the bar, holes under the gate: both run side by side along its border and mix fully. Between borders that
/// mix, 1 and 2 lie on one side: shares 4/7 and 3/7 of 2|−6|2 by own algebra, (2 + 6 b)/8 = a, 6 a/8 = b.
#[test]
fn mixing_borders_are_told_by_hand() {
    let text = six_text("2", &[("TG", "gate", 250, 350, "-6")], "");
    holds(
        &told(&text, "1426", Polarity::Toward),
        &[
            "mixture A, along the border of TG: 2 electron channels from contact 2 at share 1 and 6 hole channels from \
             mixture B at share 3/7. Their common share is the mean, (2 × 1 + 6 × 3/7)/8 = 4/7.",
            "Contact 6 takes up 2 electron channels from mixture A at share 4/7: its share is 4/7.",
            "mixture B, along the border of TG: 6 hole channels from mixture A at share 4/7",
        ],
    );
}

/// A level half of which passes: behind the gate both halves are one channel again (own algebra).
#[test]
fn a_level_that_passes_in_part_is_told_by_hand() {
    let text = six_text("2", &[("TG", "gate", 250, 350, "1.5")], "");
    let told = told(&text, "1423", Polarity::Toward);
    holds(&told, &["channels of 1/2 e²/h", "along the rim"]);
}

#[test]
fn a_contact_that_takes_up_a_part_is_told_by_hand() {
    let text = six_text("2", &[("TG", "gate", 250, 350, "1")], "");
    let told = told(&text.replace("name = \"2\"\n", "name = \"2\"\ntransmission = 0.5\n"), "1423", Polarity::Toward);
    holds(&told, &["behind contact 2, which takes up and sends out a part and lets a part pass"]);
}

#[test]
fn what_has_no_number_says_why() {
    let shut = six_text("2", &[("TG", "gate", 250, 350, "0")], "");
    holds(
        &told(&shut, "1423", Polarity::Toward),
        &[
            "join contact 1, directly or over other contacts, to contacts 2 and 6 only, not to contact 4: no current can",
        ],
    );
    holds(&told(&shut, "1626", Polarity::Toward), &["= 1/2 h/e²"]);
    holds(&told(&shut, "1623", Polarity::Toward), &["not to contact 3: nothing holds that voltage lead"]);
    let dead = six_text("2", &[("TG", "gate", 250, 350, "1")], "")
        .replace("name = \"3\"\n", "name = \"3\"\ntransmission = 0\n");
    holds(&told(&dead, "1423", Polarity::Toward), &["No channel begins or ends in contact 3: nothing holds"]);
    holds(&told(&dead, "1426", Polarity::Toward), &["past contact 3"]);
}

/// The machine output states the same: rebuilt from its strings alone.
#[test]
fn machine_output_gives_the_number_again() {
    let folder = fresh("why-json");
    std::fs::write(folder.join("bar.toml"), bar("3", "1", "")).unwrap();
    let json = run(&folder, "expect bar.toml --why --json").json();
    let fraction = |value: &Value| Rational::from_text(value.as_str().unwrap()).unwrap();
    for point in json["points"].as_array().unwrap() {
        for reading in point["readings"].as_array().unwrap() {
            let number = &reading["why"]["number"];
            let mut shares: BTreeMap<String, Rational> = BTreeMap::new();
            shares.insert(format!("{{\"contact\":{}}}", reading["current"][0]), Rational::ONE);
            shares.insert(format!("{{\"contact\":{}}}", reading["current"][1]), Rational::ZERO);
            let sum = |arrivals: &Value| -> Rational {
                let arrivals = arrivals.as_array().unwrap().iter();
                arrivals.map(|one| &fraction(&one["conductance_e2_per_h"]) * &fraction(&one["share"])).sum()
            };
            for mean in number["means"].as_array().unwrap() {
                shares.insert(mean["at"].to_string(), fraction(&mean["share"]));
                let whole: Rational =
                    mean["arrivals"].as_array().unwrap().iter().map(|one| fraction(&one["conductance_e2_per_h"])).sum();
                assert_eq!(&fraction(&mean["share"]) * &whole, sum(&mean["arrivals"]));
            }
            let all = number["means"].as_array().unwrap().iter().chain([&number["balance"]]);
            for arrival in all.flat_map(|one| one["arrivals"].as_array().unwrap()) {
                assert_eq!(shares[&arrival["from"].to_string()], fraction(&arrival["share"]), "{reading}");
            }
            let voltage = |at: usize| shares[&format!("{{\"contact\":{}}}", reading["voltage"][at])].clone();
            let balance = &number["balance"];
            let inlet = balance["at"]["contact"] == reading["current"][0];
            let taken = sum(&balance["arrivals"]);
            let current = if inlet { fraction(&balance["emitted_e2_per_h"]) - taken } else { taken };
            assert_eq!(&(voltage(0) - voltage(1)) / &current, fraction(&reading["exact"]));
            assert!(reading["why"]["sentences"].as_array().unwrap().len() > 5);
        }
    }
    assert!(!run(&folder, "expect bar.toml --json").answer().contains("why"));
}

/// A bar of filling 2 with an opening in the middle and two contacts on the rim of that: channels turn the other way round it,
/// and none joins it to the outer rim. From 5 to 6 flow two channels and none with a potential comes back: R_56,56 = 1/2
/// (M. Büttiker, Phys. Rev. B 38, 9375 (1988): 1/ν between two contacts of one rim).
#[test]
fn a_contact_at_a_cut_out_is_told_by_hand() {
    let outline = |contacts: &str, gate: &str, fillings: &str| {
        format!(
            "format = 1\n[device]\nid = \"T\"\nladder = \"spin-split\"\n[mesa]\nshape = \"outline\"\noutline_um = [[0, 0], \
             [300, 0], [300, 100], [0, 100]]\ncutouts_um = [[[130, 40], [170, 40], [170, 60], [130, 60]]]\n{contacts}{gate}\
             [[point]]\nname = \"p\"\nbulk = 2\nfillings = {{ {fillings} }}\n"
        )
    };
    let contact =
        |name: &str, x: u32, y: u32| format!("[[contact]]\nname = \"{name}\"\nat_um = [{x}, {y}]\nwidth_um = 10\n");
    let contacts = [("1", 0, 50), ("2", 100, 100), ("3", 200, 100), ("4", 300, 50), ("5", 150, 60), ("6", 150, 40)];
    let contacts: String = contacts.map(|(name, x, y)| contact(name, x, y)).concat();
    holds(
        &told(&outline(&contacts, "", ""), "1425", Polarity::Toward),
        &["not to contact 5: nothing holds that voltage lead"],
    );
    holds(
        &told(&outline(&contacts, "", ""), "5656", Polarity::Toward),
        &["and the other way round a cut-out", "Contact 5, at share 1, sends out 2 channels", "cut-out", "= 1/2 h/e²"],
    );
}

/// Two barriers of one channel in a bar of two with mixing over a length between them: R = (2 − m)/(2(1 − m)) with the share
/// m = (1 − exp(−2))/2 that changes channel, where length and mixing length are equal (own algebra after M. Büttiker,
/// Phys. Rev. B 38, 9375 (1988)); there the factor of two is that of departures from the mean. 1.3808 h/e².
#[test]
fn mixing_over_a_length_is_told_with_shares_in_decimals() {
    let parts = [("A", "gate", 210, 250, "1"), ("B", "gate", 350, 390, "1")];
    let text = six_text("2", &parts, "mixing = { length_um = 50 }");
    let told = told(&text, "1414", Polarity::Toward);
    holds(&told, &["over whose length channels mix in part", "= 1.3808 h/e² = 35.6422 kΩ"]);
    // What is stated gives the number again: the last line divides the shares by the current of the line before.
    let last = |line: &str| told.lines().find(|found| found.starts_with(line)).unwrap().to_owned();
    let current: f64 = last("Current:").split(" = ").nth(1).unwrap().split(',').next().unwrap().parse().unwrap();
    assert!((1.0 / current - 1.380797).abs() < 2e-4, "{told}");
}

/// One mode each way: a ring of six conductances e²/h. R_14,23 = 1/2 (M. Büttiker, Science 325, 278 (2009), and A. Roth et
/// al., Science 325, 294 (2009); values from memory, algebra verified): shares fall by thirds along each arm, and from
/// contact 1 to 2 and to 6 together flow 2 × 1/3 e²/h.
#[test]
fn modes_that_run_both_ways_are_told_by_hand() {
    let text = six_text("1", &[], "").replace("bulk = 1\nfillings = {  }\n", "modes = { forward = 1, backward = 1 }\n");
    holds(
        &told(&text, "1423", Polarity::Toward),
        &[
            "forward modes run clockwise round the outer rim, backward modes the other way",
            "2/3",
            "1/3",
            "The + lead on contact 2 reads share 2/3, the − lead on contact 3 share 1/3.",
            "= 2/3, in e²/h",
            "= (2/3 − 1/3)/(2/3) h/e² = 1/2 h/e² = 12.9064 kΩ",
        ],
    );
}
