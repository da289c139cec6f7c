//! Order lines: what is put together, at which quantity it is priced, and what is said of stock.

use catalog::{Kind, Price, Status};
use circuit::slot::Slot;
use design::keys::Resistor;
use proptest::prelude::*;
use purchase::article::{Article, Nominal};
use purchase::order::{Line, Need, Order, Supply};
use purchase::piece::Piece;

fn article<'a>(kind: Kind, part: &'a str, price: Option<&'a Price>) -> Article<'a> {
    Article {
        kind,
        maker: "Brindlow",
        part,
        file: "x.csv",
        line: 2,
        nameless_in: None,
        price,
        stock: None,
        lead_weeks: None,
        status: Some(Status::Active),
        package: None,
        nominal: None,
        tolerance: None,
    }
}

fn piece(slot: Slot, article: Article<'_>) -> Piece<'_> {
    Piece { slot, resistor: None, article, nominal: article.nominal }
}

fn resistor<'a>(resistor: Resistor, article: Article<'a>, ohm: f64) -> Piece<'a> {
    let slot = if resistor == Resistor::Rz { Slot::BiasLine } else { Slot::DividerLine };
    let nominal = Some(Nominal { value: ohm, unit: "Ω" });
    Piece { slot, resistor: Some(resistor), article, nominal }
}

fn prices(line: &Line<'_>) -> (f64, f64) {
    let amount = |money: &Option<purchase::money::Money>| money.as_ref().unwrap().amount();
    (amount(&line.unit_price), amount(&line.total))
}

#[test]
fn two_rails_reach_a_break_that_neither_reaches_alone() {
    let price = Price::breaks(&[(1, 0.5), (50, 0.4), (100, 0.3)]).unwrap();
    let zener = piece(Slot::Zener, article(Kind::Zeners, "Z1", Some(&price)));
    let need = |boards| Need { boards, pieces: vec![zener] };
    let order = Order::new(&[need(30), need(25)]);
    let [line] = order.lines.as_slice() else { panic!("one line") };
    assert_eq!(prices(line), (0.4, 22.0));
    assert_eq!((line.pieces, line.uses[0].pieces, line.uses[1].pieces), (55, 30, 25));
    assert_eq!(line.next_break.as_ref().map(|(at, price)| (*at, price.amount())), Some((100, 0.3)));
    let costs: Vec<(f64, f64)> =
        order.rails.iter().map(|r| (r.together.amount(), r.alone.amount())).collect();
    assert_eq!(costs, [(12.0, 15.0), (10.0, 12.5)]);
    assert_eq!(order.total.amount(), 22.0);
}

#[test]
fn resistors_of_one_line_are_priced_together_whatever_their_values() {
    let price = Price::breaks(&[(1, 0.03), (50, 0.01)]).unwrap();
    let line = article(Kind::Resistors, "R-24", Some(&price));
    let pieces = vec![resistor(Resistor::Rf, line, 4700.0), resistor(Resistor::Ri, line, 15_000.0)];
    let order = Order::new(&[Need { boards: 25, pieces }]);
    let values: Vec<f64> = order.lines.iter().map(|l| l.nominal.unwrap().value).collect();
    assert_eq!(values, [4700.0, 15_000.0]);
    for line in &order.lines {
        assert_eq!((line.pieces, line.article_pieces), (25, 50));
        assert_eq!(prices(line), (0.01, 0.25), "two a board are fifty pieces");
        assert_eq!(line.ranked_price(25).unwrap().amount(), 0.03, "the ranking counts boards");
    }
}

#[test]
fn resistors_of_one_line_and_value_are_one_order_line_of_two_a_board() {
    let price = Price::single(0.1);
    let line = article(Kind::Resistors, "R-24", Some(&price));
    let pieces = vec![resistor(Resistor::Rf, line, 1e4), resistor(Resistor::Ri, line, 1e4)];
    let order = Order::new(&[Need { boards: 3, pieces }]);
    let [line] = order.lines.as_slice() else { panic!("one line") };
    assert_eq!((line.uses[0].per_board(), line.pieces), (2, 6));
    // In binary 0.1 · 6 is 0.6000000000000001.
    assert_eq!(prices(line), (0.1, 0.6));
}

#[test]
fn a_part_without_a_price_is_listed_and_not_in_the_sum() {
    let price = Price::single(2.0);
    let pieces = vec![
        piece(Slot::Zener, article(Kind::Zeners, "own", None)),
        piece(Slot::Pass, article(Kind::Transistors, "Q1", Some(&price))),
    ];
    let order = Order::new(&[Need { boards: 4, pieces }]);
    assert_eq!((order.lines.len(), order.unpriced()), (2, 1));
    assert_eq!((order.total.amount(), order.rails[0].unpriced), (8.0, 1));
    assert_eq!(order.lines[0].total, None);
}

#[test]
fn stock_is_compared_with_all_pieces_of_the_part() {
    let price = Price::single(1.0);
    let of = |stock| {
        let article = Article { stock, ..article(Kind::Zeners, "Z1", Some(&price)) };
        let need = |boards| Need { boards, pieces: vec![piece(Slot::Zener, article)] };
        Order::new(&[need(10), need(10)]).lines[0].supply
    };
    assert_eq!(of(Some(20.0)), Supply::Enough);
    assert_eq!(of(Some(19.0)), Supply::ShortBy(1.0));
    assert_eq!(of(None), Supply::Unknown);
}

#[test]
fn nameless_parts_of_two_designs_are_two_parts() {
    let nameless = |place| {
        let article = Article { nameless_in: Some(place), ..article(Kind::Zeners, "zener", None) };
        Need { boards: 1, pieces: vec![piece(Slot::Zener, article)] }
    };
    assert_eq!(Order::new(&[nameless(0), nameless(1)]).lines.len(), 2);
}

#[test]
fn lines_come_in_the_same_order_whatever_the_order_of_rails() {
    let price = Price::single(1.0);
    let named = |part| piece(Slot::Zener, article(Kind::Zeners, part, Some(&price)));
    let need = |pieces| Need { boards: 1, pieces };
    let names = |needs: &[Need<'_>]| -> Vec<String> {
        Order::new(needs).lines.iter().map(|l| l.article.part.to_owned()).collect()
    };
    let (first, second) = (need(vec![named("B"), named("C")]), need(vec![named("A")]));
    assert_eq!(names(&[first.clone(), second.clone()]), names(&[second, first]));
}

#[test]
fn as_many_boards_as_there_are_numbers_are_no_fault() {
    let price = Price::single(0.01);
    let line = article(Kind::Resistors, "R", Some(&price));
    let pieces = vec![resistor(Resistor::Rf, line, 1.0), resistor(Resistor::Ri, line, 1.0)];
    let order = Order::new(&[Need { boards: u64::MAX, pieces }]);
    assert_eq!(order.lines[0].pieces, u64::MAX);
}

// ---- whatever is bought ----

const PARTS: [&str; 3] = ["Z1", "Z2", "Z3"];

/// Prices that fall with the quantity, in thousandths.
fn falling_prices() -> impl Strategy<Value = Price> {
    (1u32..2000, 0u32..500, 0u32..500, 2u64..40, 40u64..200).prop_map(
        |(last, b, a, second, third)| {
            let of = |thousandths: u32| f64::from(thousandths) / 1000.0;
            let breaks = [(1, of(last + a + b)), (second, of(last + b)), (third, of(last))];
            Price::breaks(&breaks).expect("rising quantities")
        },
    )
}

proptest! {
    #[test]
    fn rails_add_up_to_the_total_and_together_is_never_dearer(
        prices in proptest::array::uniform3(falling_prices()),
        rails in proptest::collection::vec((1u64..120, proptest::collection::vec(0usize..3, 1..6)), 1..5),
    ) {
        let need = |(boards, parts): &(u64, Vec<usize>)| {
            let of = |part: &usize| {
                piece(Slot::Zener, article(Kind::Zeners, PARTS[*part], Some(&prices[*part])))
            };
            Need { boards: *boards, pieces: parts.iter().map(of).collect() }
        };
        let needs: Vec<Need<'_>> = rails.iter().map(need).collect();
        let order = Order::new(&needs);
        let together: purchase::money::Money =
            order.rails.iter().map(|rail| rail.together.clone()).sum();
        prop_assert_eq!(together.amount(), order.total.amount());
        for rail in &order.rails {
            prop_assert!(rail.together <= rail.alone);
        }
        let asked: u64 = rails.iter().map(|(boards, parts)| boards * parts.len() as u64).sum();
        prop_assert_eq!(order.lines.iter().map(|line| line.pieces).sum::<u64>(), asked);
        let mut turned = needs.clone();
        turned.reverse();
        prop_assert_eq!(Order::new(&turned).total, order.total);
    }
}
