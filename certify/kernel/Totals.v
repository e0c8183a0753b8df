(** * Sums along a Hamiltonian cycle

    Give each edge a number; the total of a cycle is the sum over its edges. What degree, cut
    and parity say of totals is what separators, independent sets and weights argue with. *)

From Coq Require Import Bool List Permutation PArith ZArith Lia.
From Certify Require Import Statement Question Edges Facts.
Import ListNotations.

Implicit Types (u v w x : vertex).
Local Open Scope Z_scope.

Fixpoint sum {A : Type} (f : A -> Z) (l : list A) : Z :=
  match l with
  | [] => 0
  | a :: l => f a + sum f l
  end.

Lemma sum_plus : forall (A : Type) (f g : A -> Z) l,
  sum (fun a => f a + g a) l = sum f l + sum g l.
Proof. intros A f g l. induction l as [| a l IH]; cbn [sum] in *; lia. Qed.

Lemma sum_times : forall (A : Type) (c : Z) (f : A -> Z) l,
  sum (fun a => c * f a) l = c * sum f l.
Proof. intros A c f l. induction l as [| a l IH]; cbn [sum] in *; lia. Qed.

Lemma sum_le : forall (A : Type) (f g : A -> Z) l,
  (forall a, In a l -> f a <= g a) -> sum f l <= sum g l.
Proof.
  intros A f g l below. induction l as [| a l IH]; cbn [sum] in *; [lia |].
  pose proof (below a (or_introl eq_refl)).
  assert (forall b, In b l -> f b <= g b) as later by (intros; apply below; now right).
  specialize (IH later). lia.
Qed.

Lemma sum_ext : forall (A : Type) (f g : A -> Z) l,
  (forall a, In a l -> f a = g a) -> sum f l = sum g l.
Proof.
  intros A f g l same. apply Z.le_antisymm; apply sum_le; intros a listed;
    rewrite (same a listed); lia.
Qed.

Lemma sum_constant : forall (A : Type) (c : Z) (l : list A),
  sum (fun _ => c) l = c * Z.of_nat (length l).
Proof. intros A c l. induction l as [| a l IH]; cbn [sum length] in *; lia. Qed.

Lemma sum_swap : forall (A B : Type) (f : A -> B -> Z) l m,
  sum (fun a => sum (f a) m) l = sum (fun b => sum (fun a => f a b) l) m.
Proof.
  intros A B f l m. induction l as [| a l IH].
  - cbn [sum]. rewrite sum_constant. lia.
  - cbn [sum]. rewrite sum_plus. lia.
Qed.

Lemma sum_count : forall (A : Type) (p : A -> bool) l,
  sum (fun a => Z.b2z (p a)) l = Z.of_nat (count p l).
Proof.
  intros A p l. unfold count. induction l as [| a l IH]; [reflexivity |].
  cbn [sum filter] in *. destruct (p a); cbn [Z.b2z length]; lia.
Qed.

(** Something is once in a list without doubles, or not at all. *)
Lemma count_equal : forall (A : Type) (eqb : A -> A -> bool),
  (forall a b, eqb a b = true <-> a = b) ->
  forall l a (here : bool), NoDup l -> (here = true <-> In a l) ->
  Z.of_nat (count (fun b => eqb b a) l) = Z.b2z here.
Proof.
  intros A eqb spec l a here distinct. revert here.
  induction distinct as [| b l fresh _ IH]; intros here listed.
  - destruct here; [destruct (proj1 listed eq_refl) | reflexivity].
  - unfold count in *. cbn [filter]. destruct (eqb b a) eqn:same.
    + apply spec in same as ->. rewrite (proj2 listed (or_introl eq_refl)).
      cbn [length]. rewrite Nat2Z.inj_succ, (IH false); [reflexivity | now split].
    + apply IH. rewrite listed. split; [intros [-> | ?]; [| easy] | now right].
      exfalso. apply not_true_iff_false in same. now apply same, spec.
Qed.

(** How many vertices of a list an edge has as ends. *)
Lemma sum_touches : forall l (u v : vertex) (s : vertex -> bool),
  NoDup l -> (forall w, s w = true <-> In w l) -> u <> v ->
  sum (fun w => Z.b2z (touches w (u, v))) l = Z.b2z (s u) + Z.b2z (s v).
Proof.
  intros l u v s distinct listed differ.
  rewrite <- (count_equal _ Pos.eqb Pos.eqb_eq l u (s u) distinct (listed u)).
  rewrite <- (count_equal _ Pos.eqb Pos.eqb_eq l v (s v) distinct (listed v)).
  rewrite sum_count. unfold touches. cbn [fst snd].
  rewrite (count_or _ (fun w => u =? w)%positive (fun w => v =? w)%positive).
  - rewrite Nat2Z.inj_add. unfold count.
    do 3 f_equal; apply filter_ext; intros w; apply Pos.eqb_sym.
  - intros w _. rewrite !Pos.eqb_eq. congruence.
Qed.

Section Totals.

Variable Q : question.
Hypothesis fine : well_formed Q = true.
Variable h : list vertex.
Hypothesis ham : cycle Q h.

Definition total (f : vertex * vertex -> Z) : Z := sum f (filter (uses h) (edges Q)).

Lemma total_le : forall f g,
  (forall e, In e (edges Q) -> uses h e = true -> f e <= g e) -> total f <= total g.
Proof.
  intros f g below. apply sum_le. intros e listed. apply filter_In in listed. now apply below.
Qed.

Lemma total_plus : forall f g, total (fun e => f e + g e) = total f + total g.
Proof. intros f g. apply sum_plus. Qed.

Lemma total_times : forall c f, total (fun e => c * f e) = c * total f.
Proof. intros c f. apply sum_times. Qed.

Lemma total_sum : forall (A : Type) (f : A -> vertex * vertex -> Z) l,
  total (fun e => sum (fun a => f a e) l) = sum (fun a => total (f a)) l.
Proof. intros A f l. symmetry. apply sum_swap. Qed.

Lemma total_one : total (fun _ => 1) = Z.of_nat (order Q).
Proof.
  unfold total. rewrite sum_constant, <- (total_count Q fine h ham). unfold count. lia.
Qed.

Lemma total_touches : forall v, In v (all_vertices (order Q)) ->
  total (fun e => Z.b2z (touches v e)) = 2.
Proof.
  intros v visited. unfold total.
  now rewrite sum_count, <- count_both, (degree_count Q fine h ham).
Qed.

Lemma total_leaves : forall s u v,
  In u (all_vertices (order Q)) -> In v (all_vertices (order Q)) ->
  s u = true -> s v = false -> 2 <= total (fun e => Z.b2z (leaves s e)).
Proof.
  intros s u v u_in v_in inside outside. unfold total.
  rewrite sum_count, <- count_both.
  pose proof (cut_count Q fine h ham s u v u_in v_in inside outside). lia.
Qed.

(** A set is left an even number of times, so not exactly along an odd set [F] of leaving
    edges: with [k] used edges in [F] and [j] used ones elsewhere, either [k < |F|], or
    [k = |F|] and [j >= 1]; so [j - k >= 1 - |F|]. *)
Lemma total_parity : forall s F,
  NoDup F -> Nat.odd (length F) = true ->
  (forall e, In e F -> In e (edges Q) /\ leaves s e = true) ->
  1 - Z.of_nat (length F)
  <= total (fun e => Z.b2z (leaves s e) - 2 * Z.b2z (existsb (pair_eqb e) F)).
Proof.
  intros s F distinct odd leaving.
  assert (total (fun e => Z.b2z (leaves s e) - 2 * Z.b2z (existsb (pair_eqb e) F))
          = total (fun e => Z.b2z (leaves s e))
            + - (2) * total (fun e => Z.b2z (existsb (pair_eqb e) F))) as ->.
  { rewrite <- total_times, <- total_plus. apply sum_ext. intros. lia. }
  unfold total. rewrite !sum_count, <- (count_both _ (leaves s)).
  destruct (cut_even Q fine h ham s) as [half even]. rewrite even.
  set (kept := filter (uses h) (edges Q)) in *.
  assert (some : (count (fun e => existsb (pair_eqb e) F) kept <= length F)%nat).
  { apply NoDup_incl_length; [apply NoDup_filter, NoDup_filter, (edges_distinct Q fine) |].
    intros e found. apply filter_In in found as [_ found].
    apply existsb_exists in found as (f & listed & same). now apply pair_eqb_spec in same as ->. }
  assert (part : (count (fun e => existsb (pair_eqb e) F) kept <= 2 * half)%nat).
  { rewrite <- even, count_both. fold kept.
    apply NoDup_incl_length; [apply NoDup_filter, NoDup_filter, (edges_distinct Q fine) |].
    intros e found. apply filter_In in found as [used found]. apply filter_In.
    apply existsb_exists in found as (f & listed & same). apply pair_eqb_spec in same as ->.
    split; [exact used | now apply leaving]. }
  apply Nat.odd_spec in odd as [j odd]. lia.
Qed.

(** The needed edges are among the used ones. *)
Lemma total_needed : forall p : vertex * vertex -> bool,
  Z.of_nat (count p (needed Q))
  <= total (fun e => Z.b2z (p e && existsb (pair_eqb e) (needed Q))).
Proof.
  intros p. unfold total. rewrite sum_count. apply inj_le.
  destruct (well_formed_spec Q fine) as (_ & _ & distinct & part & _).
  apply NoDup_incl_length; [now apply NoDup_filter |].
  intros [u v] found. apply filter_In in found as [listed good].
  destruct ham as (_ & _ & _ & must). rewrite !filter_In, andb_true_iff. repeat split.
  - now apply part.
  - apply (uses_spec Q fine h ham). now apply must.
  - exact good.
  - apply existsb_exists. exists (u, v). now rewrite pair_eqb_spec.
Qed.

End Totals.
