(** * The variables of a question, and what they mean

    Variable [i] says that the cycle uses the [i]-th edge. Facts may bring further variables,
    numbered on from fact to fact; each of them has a value that follows from those before. *)

From Coq Require Import Bool List PArith Arith FMapPositive Lia.
From Certify Require Import Statement Question Edges Facts Propagation.
Import ListNotations.

Implicit Types (u v w : vertex) (e : vertex * vertex) (i j x next free : variable)
  (a b c : variable -> bool).

Section Variables.

Variable Q : question.

Definition numbered_edges : list (variable * (vertex * vertex)) := number 1%positive (edges Q).

Definition first_free : variable := Pos.of_succ_nat (length (edges Q)).

(** For each vertex its neighbours, with the variables of the edges to them, ascending. *)
Definition neighbourhoods := PositiveMap.t (list (vertex * variable)).

Definition around (near : neighbourhoods) (v : vertex) : list (vertex * variable) :=
  match PositiveMap.find v near with Some l => l | None => [] end.

Definition put (v w : vertex) (i : variable) (near : neighbourhoods) : neighbourhoods :=
  PositiveMap.add v ((w, i) :: around near v) near.

Definition surroundings (l : list (variable * (vertex * vertex))) : neighbourhoods :=
  fold_right (fun '(i, (u, v)) near => put u v i (put v u i near)) (PositiveMap.empty _) l.

Definition near_edges : neighbourhoods := surroundings numbered_edges.

Definition variable_of (near : neighbourhoods) (u v : vertex) : option variable :=
  option_map snd (find (fun entry => (fst entry =? v)%positive) (around near u)).

(** ** Places in a list *)

Lemma number_in : forall (A : Type) (l : list A) j i d, In (i, d) (number j l) ->
  (j <= i)%positive /\ nth_error l (Pos.to_nat i - Pos.to_nat j) = Some d.
Proof.
  induction l as [| d' l IH]; intros j i d listed; [easy |]. cbn [number] in listed.
  destruct listed as [[= -> ->] | listed].
  - split; [lia |]. now rewrite Nat.sub_diag.
  - apply IH in listed as [later found]. split; [lia |].
    now replace (Pos.to_nat i - Pos.to_nat j) with (S (Pos.to_nat i - Pos.to_nat (Pos.succ j)))
      by lia.
Qed.

Lemma in_number : forall (A : Type) (l : list A) j d, In d l -> exists i, In (i, d) (number j l).
Proof.
  induction l as [| d' l IH]; intros j d listed; [easy |]. destruct listed as [-> | listed].
  - exists j. now left.
  - destruct (IH (Pos.succ j) d listed) as [i found]. exists i. now right.
Qed.

Lemma number_snd : forall (A : Type) (l : list A) j, map snd (number j l) = l.
Proof. induction l as [| d l IH]; intros j; [easy |]. cbn [number map snd]. now rewrite IH. Qed.

Lemma numbered_edge : forall i e, In (i, e) numbered_edges ->
  In e (edges Q) /\ (i < first_free)%positive.
Proof.
  intros i e listed. apply number_in in listed as [_ found]. split.
  - now apply nth_error_In in found.
  - assert (Pos.to_nat i - Pos.to_nat 1 < length (edges Q)) by (apply nth_error_Some; congruence).
    unfold first_free. lia.
Qed.

Lemma numbered_once : forall i e e', In (i, e) numbered_edges -> In (i, e') numbered_edges ->
  e = e'.
Proof.
  intros i e e' one other. apply number_in in one as [_ one], other as [_ other]. congruence.
Qed.

(** ** The edges around a vertex *)

Definition entries (v : vertex) (l : list (variable * (vertex * vertex)))
    : list (vertex * variable) :=
  flat_map (fun '(i, (x, y)) => if (x =? v)%positive then [(y, i)]
                                else if (y =? v)%positive then [(x, i)] else []) l.

Lemma around_put : forall near v w i u,
  around (put v w i near) u = if (u =? v)%positive then (w, i) :: around near v else around near u.
Proof.
  intros near v w i u. unfold around, put at 1. destruct (Pos.eqb_spec u v) as [-> | differ].
  - now rewrite PositiveMap.gss.
  - now rewrite PositiveMap.gso by exact differ.
Qed.

Lemma around_surroundings : forall v l, (forall i x y, In (i, (x, y)) l -> x <> y) ->
  around (surroundings l) v = entries v l.
Proof.
  intros v. induction l as [| [i [x y]] l IH]; intros differ.
  - unfold around. cbn. now rewrite PositiveMap.gempty.
  - assert (x <> y) by (apply (differ i); now left).
    assert (around (surroundings l) v = entries v l) as rest
      by (apply IH; intros j x' y' listed; apply (differ j); now right).
    unfold surroundings, entries. cbn [fold_right flat_map].
    fold (surroundings l). fold (entries v l). rewrite !around_put, <- rest.
    rewrite (Pos.eqb_sym v x), (Pos.eqb_sym v y), (Pos.eqb_sym x y).
    destruct (Pos.eqb_spec x v), (Pos.eqb_spec y v), (Pos.eqb_spec y x); subst; easy.
Qed.

Lemma entries_in : forall v l w i, In (w, i) (entries v l) ->
  In (i, (v, w)) l \/ In (i, (w, v)) l.
Proof.
  intros v l w i. unfold entries. rewrite in_flat_map. intros ([j [x y]] & listed & found).
  destruct (Pos.eqb_spec x v) as [-> |]; [| destruct (Pos.eqb_spec y v) as [-> |]; [| easy]];
    destruct found as [[= -> ->] | []]; tauto.
Qed.

Hypothesis fine : well_formed Q = true.

Lemma around_edges : forall v, around near_edges v = entries v numbered_edges.
Proof.
  intros v. apply around_surroundings. intros i x y listed.
  apply numbered_edge in listed as [listed _]. apply (joined_differ Q fine). now left.
Qed.

Lemma around_in : forall v w i, In (w, i) (around near_edges v) ->
  In (i, (v, w)) numbered_edges \/ In (i, (w, v)) numbered_edges.
Proof. intros v w i. rewrite around_edges. apply entries_in. Qed.

Lemma variable_of_spec : forall u v i, variable_of near_edges u v = Some i ->
  In (i, (u, v)) numbered_edges \/ In (i, (v, u)) numbered_edges.
Proof.
  intros u v i. unfold variable_of. destruct (find _ _) as [[w j] |] eqn:found; [| easy].
  intros [= <-]. apply find_some in found as [listed same]. apply Pos.eqb_eq in same.
  cbn [fst] in same. subst w. now apply around_in.
Qed.

(** ** Values *)

(** The variables of the edges have the values that the cycle gives them. *)
Definition agrees (h : list vertex) (a : variable -> bool) : Prop :=
  forall i e, In (i, e) numbered_edges -> a i = uses h e.

Definition values (h : list vertex) (i : variable) : bool :=
  match nth_error (edges Q) (Pos.to_nat i - 1) with Some e => uses h e | None => false end.

Lemma values_agree : forall h, agrees h (values h).
Proof.
  intros h i e listed. apply number_in in listed as [_ found].
  unfold values. change 1 with (Pos.to_nat 1). now rewrite found.
Qed.

Lemma count_around : forall h a v, agrees h a ->
  count a (map snd (around near_edges v)) =
  count (fun e => touches v e && uses h e) (edges Q).
Proof.
  intros h a v. rewrite around_edges. unfold agrees, numbered_edges. generalize 1%positive.
  induction (edges Q) as [| [x y] l IH]; intros j same; [reflexivity |].
  cbn [number entries flat_map]. rewrite map_app. unfold count in *. rewrite filter_app, app_length.
  fold (entries v (number (Pos.succ j) l)).
  rewrite IH by (intros i e listed; apply same; now right).
  assert (a j = uses h (x, y)) as first by (apply same; now left).
  cbn [filter]. unfold touches at 2. cbn [fst snd].
  destruct (x =? v)%positive, (y =? v)%positive; cbn; rewrite ?first;
    now destruct (uses h (x, y)).
Qed.

End Variables.

(** ** Clauses with further variables *)

(** Clauses, and the first variable that they leave free. *)
Definition formula : Type := list clause * variable.

(** The same values below a variable. *)
Definition extends (next : variable) (a b : variable -> bool) : Prop :=
  forall x, (x < next)%positive -> b x = a x.

(** The variables from [next] on can be given values with which the clauses hold, whatever
    the values of the variables that they leave free. *)
Definition possible (next : variable) (a : variable -> bool) (f : formula) : Prop :=
  (next <= snd f)%positive /\
  exists b, extends next a b /\
    forall c, extends (snd f) b c -> forall d, In d (fst f) -> satisfied c d.

Definition assign (x : variable) (value : bool) (a : variable -> bool) : variable -> bool :=
  fun y => if (y =? x)%positive then value else a y.

Lemma assign_extends : forall next value a, extends next a (assign next value a).
Proof.
  intros next value a x below. unfold assign. destruct (Pos.eqb_spec x next); [lia | easy].
Qed.

Lemma assign_same : forall x value a, assign x value a x = value.
Proof. intros x value a. unfold assign. now rewrite Pos.eqb_refl. Qed.

Lemma extends_trans : forall next free a b c, (next <= free)%positive ->
  extends next a b -> extends free b c -> extends next a c.
Proof. intros next free a b c more ab bc x below. rewrite bc, ab by lia. easy. Qed.

Lemma possible_now : forall next a l,
  (forall c, extends next a c -> forall d, In d l -> satisfied c d) ->
  possible next a (l, next).
Proof.
  intros next a l all. split; [apply Pos.le_refl |]. exists a. split; [now intros x | exact all].
Qed.

(** Some clauses first, more after them. *)
Lemma possible_app : forall next a free b some f,
  (next <= free)%positive -> extends next a b ->
  (forall c, extends free b c -> forall d, In d some -> satisfied c d) ->
  possible free b f -> possible next a (some ++ fst f, snd f).
Proof.
  intros next a free b some f more ab all (further & c & bc & rest). split; [cbn; lia |].
  exists c. split; [now apply (extends_trans next free a b c) |].
  intros d cd e listed. cbn [fst snd] in *. apply in_app_or in listed as [listed | listed].
  - apply all; [| exact listed]. now apply (extends_trans free (snd f) b c d).
  - now apply rest.
Qed.
