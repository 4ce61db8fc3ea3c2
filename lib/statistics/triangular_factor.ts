/** Householder triangularisation, in place: A = QR for a matrix of m rows and n columns, row-major,
 * with Qᵀ applied to a right-hand side as well. Afterwards the upper triangle of `a` is R and the
 * first n entries of `b` are the head of Qᵀb; the rest of `b` holds what R cannot reach.
 *
 * Source: A. S. Householder, J. ACM 5 (1958) 339; G. Golub, Numer. Math. 7 (1965) 206.
 *
 * @param a matrix, length m·n, overwritten
 * @param b right-hand side, length m, overwritten
 * @param m rows @param n columns, n ≤ m */
export function triangularize(a: Float64Array, b: Float64Array, m: number, n: number): void {
  for (let j = 0; j < n; j++) {
    // Entries are taken relative to the greatest, so that their squares cannot vanish or overflow.
    let greatest = 0;
    for (let i = j; i < m; i++) greatest = Math.max(greatest, Math.abs(a[i * n + j]));
    if (greatest === 0) continue;
    let square = 0;
    for (let i = j; i < m; i++) square += (a[i * n + j] / greatest) ** 2;
    let norm = greatest * Math.sqrt(square);
    if (a[j * n + j] > 0) norm = -norm;
    // v = (x − norm·e₁)/norm, kept in column j; the reflection is I + v vᵀ / v₁.
    for (let i = j; i < m; i++) a[i * n + j] /= norm;
    a[j * n + j] -= 1;
    const scale = 1 / a[j * n + j];
    for (let k = j + 1; k < n; k++) {
      let dot = 0;
      for (let i = j; i < m; i++) dot += a[i * n + j] * a[i * n + k];
      dot *= scale;
      for (let i = j; i < m; i++) a[i * n + k] += dot * a[i * n + j];
    }
    let dot = 0;
    for (let i = j; i < m; i++) dot += a[i * n + j] * b[i];
    dot *= scale;
    for (let i = j; i < m; i++) b[i] += dot * a[i * n + j];
    a[j * n + j] = norm;
  }
}
