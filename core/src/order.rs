//! Sorting by numbers: one routine for all, as each further kind of thing sorted would weigh 3 kB in the page.

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
