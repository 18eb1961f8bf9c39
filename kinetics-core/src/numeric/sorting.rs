//! Sorting through one sort of numbered keys. The library's sort is compiled anew for every type
//! and every key, which costs the page more than anything that is sorted here gains by it.

/// Sorts by a key, smallest first; equals stay in their order.
pub fn sort_by<T>(items: &mut Vec<T>, key: impl Fn(&T) -> f64) {
    let order = order(items.iter().map(key).collect());
    let mut taken: Vec<Option<T>> = std::mem::take(items).into_iter().map(Some).collect();
    items.extend(order.into_iter().filter_map(|at| taken.get_mut(at)?.take()));
}

/// The places of the keys, that of the smallest first.
fn order(keys: Vec<f64>) -> Vec<usize> {
    let mut placed: Vec<(f64, usize)> = keys.into_iter().zip(0..).collect();
    placed.sort_by(|a, b| a.0.total_cmp(&b.0));
    placed.into_iter().map(|(_, at)| at).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn sorts_and_keeps_equals_in_order() {
        let mut words = vec!["ccc", "a", "bb", "b", "aa", ""];
        sort_by(&mut words, |word| word.len() as f64);
        assert_eq!(words, ["", "a", "b", "bb", "aa", "ccc"]);
        sort_by(&mut words, |word| -(word.len() as f64));
        assert_eq!(words, ["ccc", "bb", "aa", "a", "b", ""]);
    }
}
