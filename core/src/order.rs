//! Sorting by numbers: one routine for all, as each further kind of thing sorted would weigh 3 kB in the page; and names
//! as numbers, to be sorted by it.

/// Puts `items` in the order of a first number, then of a second; equal ones stay in the order they had.
pub(crate) fn sort<T>(items: &mut Vec<T>, key: impl Fn(&T) -> [f64; 2]) {
    let mut keys: Vec<Key> = items.iter().enumerate().map(|(i, item)| (key(item), i)).collect();
    arrange(&mut keys);
    let mut taken: Vec<Option<T>> = items.drain(..).map(Some).collect();
    items.extend(keys.iter().filter_map(|(_, i)| taken.get_mut(*i)?.take()));
}

type Key = ([f64; 2], usize);

/// The one routine.
#[inline(never)]
fn arrange(keys: &mut [Key]) {
    keys.sort_unstable_by(|([a, b], i), ([c, d], j)| a.total_cmp(c).then(b.total_cmp(d)).then(i.cmp(j)));
}

/// A number for a name, the same in capitals and not: FNV-1a (Fowler, Noll & Vo, constants from memory), to the bits a
/// number holds whole. Two names may share one: compare the names as well.
pub(crate) fn hash(name: &str) -> f64 {
    let byte = |sum: u64, b: u8| (sum ^ u64::from(b.to_ascii_lowercase())).wrapping_mul(0x0000_0100_0000_01b3);
    (name.bytes().fold(0xcbf2_9ce4_8422_2325, byte) >> 11) as f64
}
