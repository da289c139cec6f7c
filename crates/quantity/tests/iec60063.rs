//! Preferred values against figures that others published.

use quantity::preferred::Series;

fn decade(series: Series) -> Vec<u64> {
    (0..series.per_decade()).map(|n| u64::from(series.hundreds(n))).collect()
}

/// Source: values as Wikipedia prints them, "E series of preferred numbers" (CC BY-SA); sums of one decade,
/// written with two and three digits, computed with `eseries` 1.2.1.
#[test]
fn sums_of_a_decade_are_those_of_the_standard() {
    let old = [
        (Series::E3, 79, 2793),
        (Series::E6, 195, 8731),
        (Series::E12, 429, 21309),
        (Series::E24, 901, 47227),
    ];
    for (series, sum, squares) in old {
        let two_digits: Vec<u64> = decade(series).iter().map(|v| v / 10).collect();
        assert_eq!(two_digits.iter().sum::<u64>(), sum, "{series}");
        assert_eq!(two_digits.iter().map(|v| v * v).sum::<u64>(), squares, "{series}");
    }
    for (series, sum, last) in [(Series::E48, 18313, 953), (Series::E96, 37070, 976)] {
        assert_eq!(decade(series).iter().sum::<u64>(), sum, "{series}");
        assert_eq!(decade(series).last(), Some(&last), "{series}");
    }
}

/// Source: as above; the standard departs from the rounded geometric row in these places and no others.
#[test]
fn the_old_series_depart_from_the_geometric_row_where_the_standard_does() {
    let rounded = |n: usize| (10.0 * 10f64.powf(n as f64 / 24.0)).round() as u64 * 10;
    let e24 = decade(Series::E24).into_iter().enumerate();
    let off: Vec<(usize, u64)> = e24.filter(|(n, value)| rounded(*n) != *value).collect();
    let published =
        [(10, 270), (11, 300), (12, 330), (13, 360), (14, 390), (15, 430), (16, 470), (22, 820)];
    assert_eq!(off, published);
}

/// Source: counts per decade times decades, and one for the end (arithmetic).
#[test]
fn a_line_holds_both_ends() {
    let counts = [
        (Series::E24, 10.0, 1e6, 121),
        (Series::E96, 10.0, 1e6, 481),
        (Series::E12, 1.0, 10e6, 85),
        (Series::E192, 100.0, 100e3, 577),
        (Series::E24, 4.7, 470e3, 121),
    ];
    for (series, low, high, count) in counts {
        let values = series.between(low, high);
        assert_eq!(values.len(), count, "{series} from {low} to {high}");
        assert_eq!((values.first(), values.last()), (Some(&low), Some(&high)));
    }
}
