(** * Kind [sweep]: the chain of a cycle

    Let [h] be a Hamiltonian cycle. Cut at its edges that are still to come, it falls into
    the pieces of the state, in the order in which [h] runs through them: a closed
    _chain_ of pieces. The _links_ of the chain, from each piece to the next, are the
    edges still to come. To choose an edge of [h] is to make one piece of two that follow
    each other ([contract]). So a chain needs no more of its pieces than their ends, and the
    state names the same pieces, without their order. *)

From Coq Require Import Bool List Arith PArith FMapPositive Permutation Lia.
From Certify Require Import Statement Steps Question Edges Facts Sweep.
Import ListNotations.

(** ** Lists *)

Lemma cycle_steps_rotate : forall (V : Type) (l r : list V),
  Permutation (cycle_steps (l ++ r)) (cycle_steps (r ++ l)).
Proof.
  intros V [|p l] [|q r]; cbn [app]; rewrite ?app_nil_r; try reflexivity.
  unfold cycle_steps. cbn [app].
  rewrite <- !app_assoc. cbn [app].
  change (p :: l ++ q :: r ++ [p]) with ((p :: l) ++ q :: r ++ [p]).
  change (q :: r ++ p :: l ++ [q]) with ((q :: r) ++ p :: l ++ [q]).
  rewrite (path_steps_app (p :: l)), (path_steps_app (q :: r)).
  apply Permutation_app_comm.
Qed.

(** A step of a closed walk, with the walk turned so that it comes first. *)
Lemma cycle_steps_split : forall (V : Type) (c : list V) p q,
  In (p, q) (cycle_steps c) ->
  (c = [p] /\ p = q) \/ exists l r m, c = l ++ r /\ r ++ l = p :: q :: m.
Proof.
  intros V c p q.
  assert (split : forall l, In (p, q) (path_steps l) -> exists l1 l2, l = l1 ++ p :: q :: l2).
  { induction l as [|a [|b l] IH]; cbn [path_steps]; try easy.
    intros [same | later].
    - inversion same; subst. now exists [], l.
    - destruct (IH later) as (l1 & l2 & E). exists (a :: l1), l2. cbn. now rewrite E. }
  destruct c as [|z c]; [easy|].
  unfold cycle_steps. intros here. destruct (split _ here) as (l1 & l2 & E).
  destruct l2 as [|y l2 _] using rev_ind.
  - change (p :: q :: []) with ([p] ++ [q]) in E. rewrite app_assoc in E.
    apply app_inj_tail in E as [E ->].
    destruct l1 as [|z' l1]; cbn in E; inversion E; subst; [now left|].
    right. exists (z' :: l1), [p], l1. now split.
  - right. exists l1, (p :: q :: l2), (l2 ++ l1).
    change (l1 ++ p :: q :: l2 ++ [y]) with (l1 ++ (p :: q :: l2) ++ [y]) in E.
    rewrite app_assoc in E. apply app_inj_tail in E as [E _]. now split.
Qed.

Lemma cycle_steps_at : forall (V : Type) (c : list V) p, In p c ->
  (exists q, In (p, q) (cycle_steps c)) /\ exists q, In (q, p) (cycle_steps c).
Proof.
  intros V c p here. apply in_split in here as (l & r & ->).
  assert (E := cycle_steps_rotate V l (p :: r)). symmetry in E. cbn [app] in E.
  remember (r ++ l) as m eqn:Em. clear Em. unfold cycle_steps in E at 1. cbn [app] in E. split.
  - destruct m as [|q m]; eexists; apply (Permutation_in _ E); now left.
  - destruct m as [|q m _] using rev_ind.
    + exists p. apply (Permutation_in _ E). now left.
    + exists q. apply (Permutation_in _ E). rewrite <- app_assoc. cbn [app].
      change (p :: m ++ [q; p]) with ((p :: m) ++ q :: [p]).
      rewrite path_steps_app. apply in_or_app. right. now left.
Qed.

Lemma count_cons : forall (A : Type) (f : A -> bool) a l,
  count f (a :: l) = Nat.b2n (f a) + count f l.
Proof. intros A f a l. unfold count. cbn. now destruct (f a). Qed.

Lemma count_zero : forall (A : Type) (f : A -> bool) a l,
  count f l = 0 -> In a l -> f a = false.
Proof.
  intros A f a l. induction l as [|b l IH]; [easy|].
  rewrite count_cons. intros zero [-> | later].
  - destruct (f a); [discriminate | reflexivity].
  - apply IH; [lia | exact later].
Qed.

(** ** Pairs, of which it does not matter which one is first *)

Lemma ordered_swap : forall a b, ordered (a, b) = ordered (b, a).
Proof.
  intros a b. destruct (ordered_cases a b) as [[] | []], (ordered_cases b a) as [[] | []]; try lia.
  - congruence.
  - congruence.
  - assert (a = b) by lia. congruence.
Qed.

Lemma ordered_ends : forall a b, ordered (a, b) = (a, b) \/ ordered (a, b) = (b, a).
Proof. intros a b. destruct (ordered_cases a b); tauto. Qed.

Lemma ordered_again : forall p, ordered (ordered p) = ordered p.
Proof.
  intros [a b]. destruct (ordered_ends a b) as [E | E]; rewrite E; [exact E|].
  rewrite ordered_swap. exact E.
Qed.

Lemma ordered_other : forall x a b, ordered (x, a) = ordered (x, b) -> a = b.
Proof. intros x a b E. apply ordered_same in E. intuition congruence. Qed.

Lemma ordered_touches : forall x p, touches x (ordered p) = touches x p.
Proof.
  intros x [a b]. destruct (ordered_ends a b) as [-> | ->]; [reflexivity|].
  unfold touches. cbn. apply orb_comm.
Qed.

Lemma touches_spec : forall x a b, touches x (a, b) = true <-> x = a \/ x = b.
Proof.
  intros x a b. unfold touches. cbn. rewrite orb_true_iff, !Pos.eqb_eq. intuition congruence.
Qed.

Lemma touches_first : forall x a, touches x (ordered (x, a)) = true.
Proof. intros x a. rewrite ordered_touches. apply touches_spec. now left. Qed.

(** ** Taking and placing pieces *)

Lemma place_permutation : forall p s, Permutation (place p s) (p :: s).
Proof.
  intros p s. induction s as [|q s IH]; [reflexivity|].
  cbn. destruct (_ <? _)%positive; [reflexivity|].
  rewrite IH. apply perm_swap.
Qed.

Lemma take_some : forall u s b rest, take u s = Some (b, rest) ->
  Permutation (map ordered s) (ordered (u, b) :: map ordered rest).
Proof.
  intros u s. induction s as [|(x, y) s IH]; [easy|].
  intros b rest. cbn [take].
  destruct (Pos.eqb_spec x u) as [-> | _]; [intros E; inversion E; reflexivity|].
  destruct (Pos.eqb_spec y u) as [-> | _].
  - intros E; inversion E; subst. cbn [map]. now rewrite ordered_swap.
  - destruct (take u s) as [(c, r)|]; [|easy].
    intros E; inversion E; subst. cbn [map]. rewrite (IH _ _ eq_refl). apply perm_swap.
Qed.

Lemma take_none : forall u s, take u s = None ->
  forall p, In p (map ordered s) -> touches u p = false.
Proof.
  intros u s. induction s as [|(x, y) s IH]; [easy|].
  cbn [take]. destruct (Pos.eqb_spec x u) as [|x_not]; [easy|].
  destruct (Pos.eqb_spec y u) as [|y_not]; [easy|].
  destruct (take u s) as [(c, r)|]; [easy|]. intros _ p [<- | later]; [|now apply IH].
  rewrite ordered_touches. destruct (touches u (x, y)) eqn:E; [|reflexivity].
  apply touches_spec in E. intuition congruence.
Qed.

(** ** Chains *)

Definition chain := list (vertex * vertex).

Definition link (step : (vertex * vertex) * (vertex * vertex)) : vertex * vertex :=
  ordered (snd (fst step), fst (snd step)).

Definition links (c : chain) : list (vertex * vertex) := map link (cycle_steps c).

Definition alone (v : vertex) : vertex * vertex := (v, v).

Lemma map_ordered_alone : forall l, map ordered (map alone l) = map alone l.
Proof.
  intros l. rewrite map_map. apply map_ext. intros v. unfold alone.
  now destruct (ordered_ends v v).
Qed.

(** At most one piece ends in [x]. *)
Definition once (c : chain) : Prop := forall x, count (touches x) c <= 1.

Lemma once_only : forall c p rest x, once c -> Permutation c (p :: rest) ->
  touches x p = true -> forall q, In q rest -> touches x q = false.
Proof.
  intros c p rest x few E at_x q. apply count_zero.
  specialize (few x). rewrite (count_same _ _ _ _ E), count_cons, at_x in few.
  cbn in few. lia.
Qed.

(** Every end of a piece has a link. *)
Lemma ends_linked : forall c p x, In p (map ordered c) -> touches x p = true ->
  exists e, In e (links c) /\ touches x e = true.
Proof.
  intros c p x here at_x. apply in_map_iff in here as ((a, b) & <- & here).
  rewrite ordered_touches in at_x. apply cycle_steps_at in here as [(q & next) (r & before)].
  apply touches_spec in at_x as [-> | ->].
  - exists (link (r, (a, b))). split; [now apply in_map|].
    unfold link. cbn. rewrite ordered_swap. apply touches_first.
  - exists (link ((a, b), q)). split; [now apply in_map|]. apply touches_first.
Qed.

(** A link makes one piece of two, or it closes the only one. *)
Lemma contract : forall c v u, In (ordered (v, u)) (links c) ->
  (map ordered c = [ordered (v, u)] /\ links c = [ordered (v, u)]) \/
  exists a b rest c',
    Permutation (map ordered c) (ordered (v, a) :: ordered (u, b) :: rest) /\
    map ordered c' = ordered (a, b) :: rest /\
    Permutation (links c) (ordered (v, u) :: links c').
Proof.
  intros c v u here.
  assert (middle : forall m p q p' q', snd q = snd q' -> fst p = fst p' ->
    map link (path_steps (q :: m ++ [p])) = map link (path_steps (q' :: m ++ [p']))).
  { induction m as [|r m IH]; intros p q p' q' Eq Ep.
    - cbn. unfold link. cbn. now rewrite Eq, Ep.
    - cbn [app path_steps map]. f_equal; [|now apply IH].
      unfold link. cbn. now rewrite Eq. }
  apply in_map_iff in here as (((a, x), (y, d)) & E & here). unfold link in E. cbn in E.
  apply cycle_steps_split in here as [[-> same] | (l & r & m & -> & turned)].
  - left. inversion same; subst. cbn. unfold link. cbn. now rewrite E, ordered_swap, E.
  - right.
    assert (pieces : Permutation (map ordered (l ++ r))
      (ordered (a, x) :: ordered (y, d) :: map ordered m)).
    { rewrite (Permutation_app_comm l r), turned. reflexivity. }
    assert (links_ : Permutation (links (l ++ r)) (ordered (v, u) :: links ((a, d) :: m))).
    { unfold links at 1. rewrite (cycle_steps_rotate _ l r), turned.
      change (Permutation
        (ordered (x, y) :: map link (path_steps ((y, d) :: m ++ [(a, x)])))
        (ordered (v, u) :: map link (path_steps ((a, d) :: m ++ [(a, d)])))).
      now rewrite E, (middle m (a, x) (y, d) (a, d) (a, d)). }
    apply ordered_same in E as [[= -> ->] | [= -> ->]].
    + exists a, d, (map ordered m), ((a, d) :: m).
      rewrite (ordered_swap v a). auto.
    + exists d, a, (map ordered m), ((a, d) :: m).
      rewrite (ordered_swap u a), (ordered_swap d a). split; [|now split].
      rewrite pieces. apply perm_swap.
Qed.
