//! How long a folder of catalogs takes to read, beside what the `csv` crate alone takes on one core.
//!
//! ```text
//! cargo run --release -p catalog --example read_timing            # large catalogs made from a seed
//! cargo run --release -p catalog --example read_timing -- FOLDER  # or those of a folder
//! ```

use catalog::{Kind, ReadOptions, Shop, read_folder};
use std::error::Error;
use std::fmt::Write as _;
use std::path::Path;
use std::time::{Duration, Instant};

const ROWS: usize = 100_000;
const SINKS: usize = 10_000;
const ROUNDS: usize = 7;

fn main() -> Result<(), Box<dyn Error>> {
    if let Some(folder) = std::env::args().nth(1) {
        return compare(Path::new(&folder));
    }
    let folder = tempfile::tempdir()?;
    make(folder.path(), 1)?;
    compare(folder.path())
}

fn compare(folder: &Path) -> Result<(), Box<dyn Error>> {
    let mut bytes = 0;
    for kind in Kind::ALL {
        bytes += std::fs::metadata(folder.join(kind.file_name())).map_or(0, |m| m.len());
    }
    println!("{:.1} MB, {} threads", bytes as f64 / 1e6, rayon::current_num_threads());
    let (records, alone) = best(|| csv_alone(folder))?;
    println!("csv alone, one core   {:7.1} ms, {records} records", millis(alone));
    let (rows, whole) = best(|| whole_reading(folder))?;
    println!("read_folder           {:7.1} ms, {rows} rows", millis(whole));
    println!("ratio                 {:7.2}", whole.as_secs_f64() / alone.as_secs_f64());
    Ok(())
}

/// A count, and what was read, so that it is thrown away after the clock has stopped.
type Counted<T> = Result<(usize, T), Box<dyn Error>>;

/// The shortest of several rounds: what else the machine does only ever adds.
fn best<T>(work: impl Fn() -> Counted<T>) -> Result<(usize, Duration), Box<dyn Error>> {
    let mut shortest = (0, Duration::MAX);
    for _ in 0..ROUNDS {
        let begin = Instant::now();
        let (count, _read) = work()?;
        let took = begin.elapsed();
        if took < shortest.1 {
            shortest = (count, took);
        }
    }
    Ok(shortest)
}

fn csv_alone(folder: &Path) -> Counted<()> {
    let mut count = 0;
    let mut record = csv::ByteRecord::new();
    for kind in Kind::ALL {
        let path = folder.join(kind.file_name());
        if !path.exists() {
            continue;
        }
        let mut reader = csv::ReaderBuilder::new().flexible(true).from_path(path)?;
        while reader.read_byte_record(&mut record)? {
            count += 1;
        }
    }
    Ok((count, ()))
}

fn whole_reading(folder: &Path) -> Counted<Shop> {
    let mut notices = Vec::new();
    let shop = read_folder(folder, &ReadOptions::default(), &mut notices);
    let Some(shop) = shop else {
        for notice in notices.iter().take(5) {
            eprintln!("{notice}");
        }
        return Err("the catalogs hold errors".into());
    };
    let rows = shop.zeners.rows.len()
        + shop.opamps.rows.len()
        + shop.transistors.rows.len()
        + shop.resistors.rows.len()
        + shop.pots.rows.len()
        + shop.heatsinks.rows.len();
    Ok((rows, shop))
}

fn millis(time: Duration) -> f64 {
    time.as_secs_f64() * 1e3
}

/// Steele and others' SplitMix64: enough for figures that only have to differ.
struct Dice(u64);

impl Dice {
    fn throw(&mut self) -> u64 {
        self.0 = self.0.wrapping_add(0x9E37_79B9_7F4A_7C15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xBF58_476D_1CE4_E5B9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94D0_49BB_1331_11EB);
        z ^ (z >> 31)
    }

    fn between(&mut self, low: f64, high: f64) -> f64 {
        low + (high - low) * (self.throw() >> 11) as f64 / (1u64 << 53) as f64
    }
}

fn make(folder: &Path, seed: u64) -> Result<(), Box<dyn Error>> {
    let mut d = Dice(seed);
    let mut text = String::from(
        "part,maker,cost,stock,status,package,vz_v,tol_pct,izt_a,zzt_ohm,iz_min_a,pd_w,tj_max_c,\
         tc_min_mv_per_c,tc_max_mv_per_c,zzk_ohm,izk_a,vz_at\n",
    );
    for n in 0..ROWS {
        let vz = d.between(2.4, 47.0);
        let tc = (vz - 5.0) * 0.8;
        writeln!(
            text,
            "ZD-{n},Maker {},{:.3},{},active,axial,{vz:.2},{:.1},5m,{:.1},0.5m,0.5,175,{:.2},{:.2},300,1m,pulse",
            n % 7,
            d.between(0.02, 0.3),
            d.throw() % 2000,
            d.between(1.0, 5.0),
            d.between(5.0, 80.0),
            tc - 1.0,
            tc + 1.0,
        )?;
    }
    std::fs::write(folder.join("zeners.csv"), text)?;

    let mut text = String::from(
        "part,maker,cost,stock,status,package,vs_min_v,vs_max_v,vcm_low_v,vcm_high_v,swing_low_v,\
         swing_high_v,iout_a,vos_max_v,ib_max_a,iq_max_a,tj_max_c,rth_ja_c_per_w,isc_max_a,isink_a,\
         gain_min_db,psrr_min_db,cmrr_min_db,vs_test_v\n",
    );
    for n in 0..ROWS {
        writeln!(
            text,
            "OA-{n},Maker {},{:.3},{},active,DIP-8,5,{:.1},0,1.5,0.05,{:.2},{:.1}m,{:.2}m,200n,{:.3}m,150,{:.0},35m,5m,{:.0},65,65,5",
            n % 5,
            d.between(0.1, 3.0),
            d.throw() % 2000,
            d.between(18.0, 44.0),
            d.between(0.5, 2.5),
            d.between(5.0, 40.0),
            d.between(0.1, 6.0),
            d.between(0.2, 3.0),
            d.between(80.0, 150.0),
            d.between(70.0, 110.0),
        )?;
    }
    std::fs::write(folder.join("opamps.csv"), text)?;

    let mut text = String::from(
        "part,maker,cost,stock,status,package,polarity,junctions,vceo_v,ic_max_a,pd_w,tj_max_c,\
         rth_jc_c_per_w,rth_ja_c_per_w,hfe_min,vbe_max_v,vce_sat_v,soa_dc,soa_1s,\
         hfe_tempco_pct_per_c,ileak_max_a\n",
    );
    for n in 0..ROWS {
        let (ic, vceo) = (d.between(2.0, 15.0), d.between(40.0, 120.0));
        writeln!(
            text,
            "TR-{n},Maker {},{:.2},{},active,TO-220,npn,{},{vceo:.0},{ic:.1},{:.0},150,{:.2},62.5,\
             0.1:{:.0};1:{:.0};{ic:.1}:{:.0},2.5,1:0.8;{ic:.1}:2.2,10:{ic:.2};25:{:.2};{vceo:.0}:{:.3},\
             10:{ic:.2};30:{:.2};{vceo:.0}:{:.3},0.7,0.2m",
            n % 9,
            d.between(0.3, 4.0),
            d.throw() % 500,
            1 + n % 2,
            d.between(30.0, 150.0),
            d.between(0.8, 3.0),
            d.between(100.0, 500.0),
            d.between(500.0, 1000.0),
            d.between(100.0, 700.0),
            ic * 0.5,
            ic * 0.05,
            ic * 0.6,
            ic * 0.1,
        )?;
    }
    std::fs::write(folder.join("transistors.csv"), text)?;

    let mut text = String::from("part,maker,cost,stock,status,fits,rth_sa_c_per_w,cth_j_per_c\n");
    for n in 0..SINKS {
        writeln!(
            text,
            "HS-{n},Maker {},{:.2},40,active,TO-220;TO-247,{:.2},{:.0} J/°C",
            n % 3,
            d.between(0.5, 9.0),
            d.between(0.8, 20.0),
            d.between(20.0, 400.0)
        )?;
    }
    std::fs::write(folder.join("heatsinks.csv"), text)?;
    std::fs::write(
        folder.join("resistors.csv"),
        "part,maker,cost,series,tol_pct,tempco_ppm,power_w,vmax_v,min_ohm,max_ohm\n\
         MF-E96,Maker 1,0.02,E96,1,50,0.25,250,10,1M\n",
    )?;
    Ok(())
}
