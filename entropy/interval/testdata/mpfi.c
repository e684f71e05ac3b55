/* Ranges of operations with the MPFI library. Records of eight native doubles
   are read from standard input: the number of the operation, an integer
   parameter, and the bounds of three operands inside the domain. For each, two
   doubles are written: bounds of the range, rounded outward from 200 bits.
   Powers, roots and the error function are not in MPFI: there MPFR rounds the
   values at the ends in the two directions. */
#include <mpfi.h>
#include <mpfi_io.h>
#include <stdio.h>

enum { ADD, SUB, MUL, DIV, SQR, SQRT, FMA, POWN, POW, ROOTN, CBRT, ABS, EXP,
       LOG, SIN, COS, TAN, SINH, COSH, TANH, ATAN, ERF, POWRAT, RECIP };

static void nth_root(mpfi_t r, mpfi_t x, unsigned long n)
{
  /* monotone, directed by MPFR at each end */
  mpfr_rootn_ui(&r->left, &x->left, n, MPFR_RNDD);
  mpfr_rootn_ui(&r->right, &x->right, n, MPFR_RNDU);
}

/* 1/x where one end of x may be zero */
static void invert(mpfi_t r, mpfi_t x)
{
  int lo = mpfr_sgn(&x->left), hi = mpfr_sgn(&x->right);
  if (lo < 0 && hi > 0) { mpfr_set_inf(&r->left, -1); mpfr_set_inf(&r->right, 1); return; }
  mpfr_t t;
  mpfr_init2(t, 200);
  if (hi == 0) mpfr_set_inf(t, -1); else mpfr_ui_div(t, 1, &x->right, MPFR_RNDD);
  if (lo == 0) mpfr_set_inf(&r->right, 1); else mpfr_ui_div(&r->right, 1, &x->left, MPFR_RNDU);
  mpfr_set(&r->left, t, MPFR_RNDD);
  mpfr_clear(t);
}

static void divide(mpfi_t r, mpfi_t x, mpfi_t y)
{
  int lo = mpfr_sgn(&y->left), hi = mpfr_sgn(&y->right);
  if (lo * hi > 0) { mpfi_div(r, x, y); return; }
  if (mpfi_is_zero(x)) { mpfi_set_ui(r, 0); return; }
  /* towards a zero of y the quotient grows beyond all bounds */
  int up = mpfr_sgn(&x->right) > 0, down = mpfr_sgn(&x->left) < 0;
  if (lo < 0 && hi > 0) up = down = 1;
  else if (lo == 0) mpfi_div_fr(r, x, &y->right);
  else { int t = up; up = down; down = t; mpfi_div_fr(r, x, &y->left); }
  if (up) mpfr_set_inf(&r->right, 1);
  if (down) mpfr_set_inf(&r->left, -1);
}

static void power(mpfi_t r, mpfi_t x, long n)
{
  unsigned long m = n < 0 ? -n : n;
  if (m % 2 == 0) mpfi_abs(x, x);
  mpfr_pow_ui(&r->left, &x->left, m, MPFR_RNDD);
  mpfr_pow_ui(&r->right, &x->right, m, MPFR_RNDU);
  if (n < 0) { mpfi_set(x, r); invert(r, x); }
}

/* x^y for x >= 0: extremes at the corners of the box */
static void real_power(mpfi_t r, mpfi_t x, mpfi_t y)
{
  mpfr_ptr xs[2] = {&x->left, &x->right}, ys[2] = {&y->left, &y->right};
  mpfr_t t;
  mpfr_init2(t, 200);
  mpfr_set_inf(&r->left, 1);
  mpfr_set_inf(&r->right, -1);
  for (int i = 0; i < 2; i++)
    for (int j = 0; j < 2; j++) {
      mpfr_pow(t, xs[i], ys[j], MPFR_RNDD);
      mpfr_min(&r->left, &r->left, t, MPFR_RNDD);
      mpfr_pow(t, xs[i], ys[j], MPFR_RNDU);
      mpfr_max(&r->right, &r->right, t, MPFR_RNDU);
    }
  mpfr_clear(t);
}

int main(void)
{
  double in[8], out[2];
  mpfi_t x, y, z, r;
  mpfi_init2(x, 200); mpfi_init2(y, 200); mpfi_init2(z, 200); mpfi_init2(r, 200);
  while (fread(in, sizeof *in, 8, stdin) == 8) {
    int op = (int)in[0];
    long n = (long)in[1];
    mpfi_interv_d(x, in[2], in[3]);
    mpfi_interv_d(y, in[4], in[5]);
    mpfi_interv_d(z, in[6], in[7]);
    switch (op) {
    case ADD: mpfi_add(r, x, y); break;
    case SUB: mpfi_sub(r, x, y); break;
    case MUL: mpfi_mul(r, x, y); break;
    case DIV: divide(r, x, y); break;
    case RECIP: invert(r, x); break;
    case SQR: mpfi_sqr(r, x); break;
    case SQRT: mpfi_sqrt(r, x); break;
    case FMA:
      mpfi_set_prec(r, 4500); mpfi_mul(r, x, y); mpfi_add(r, r, z); break;
    case POWN: power(r, x, n); break;
    case ROOTN: nth_root(r, x, (unsigned long)n); break;
    case CBRT: mpfi_cbrt(r, x); break;
    case ABS: mpfi_abs(r, x); break;
    case EXP: mpfi_exp(r, x); break;
    case LOG: mpfi_log(r, x); break;
    case SIN: mpfi_sin(r, x); break;
    case COS: mpfi_cos(r, x); break;
    case TAN: mpfi_tan(r, x); break;
    case SINH: mpfi_sinh(r, x); break;
    case COSH: mpfi_cosh(r, x); break;
    case TANH: mpfi_tanh(r, x); break;
    case ATAN: mpfi_atan(r, x); break;
    case ERF: /* not in MPFI: increasing, MPFR at each end */
      mpfr_erf(&r->left, &x->left, MPFR_RNDD);
      mpfr_erf(&r->right, &x->right, MPFR_RNDU);
      break;
    case POW: real_power(r, x, y); break;
    case POWRAT: mpfi_set_si(z, n); mpfi_div(z, z, y); real_power(r, x, z); break;
    default: return 2;
    }
    /* the range to two doubles, outward */
    out[0] = mpfr_get_d(&r->left, MPFR_RNDD);
    out[1] = mpfr_get_d(&r->right, MPFR_RNDU);
    if (op == FMA) mpfi_set_prec(r, 200);
    if (fwrite(out, sizeof *out, 2, stdout) != 2) return 1;
  }
  return 0;
}
