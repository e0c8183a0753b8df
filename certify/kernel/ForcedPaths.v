(** * The paths that used edges form

    A state keeps for the ends of each path of used edges its other end and its number of
    vertices. Here is what that table means, and that joining two paths keeps it right. *)

From Coq Require Import Bool List Permutation PArith Arith FMapPositive Lia.
From Certify Require Import Statement Question Forced.
Import ListNotations.

(** ** Tables *)

Lemma full_false : forall (A : Type) (l : list A), full l = false -> l = [] \/ exists a, l = [a].
Proof. intros A [|a [|b l]]; simpl; try discriminate; eauto. Qed.

Lemma neighbours_add : forall m u l v,
  neighbours (PositiveMap.add u l m) v = if (v =? u)%positive then l else neighbours m v.
Proof.
  intros m u l v. unfold neighbours. rewrite PositiveMapAdditionalFacts.gsspec.
  destruct (PositiveMap.E.eq_dec v u) as [E | E].
  - apply Pos.eqb_eq in E. now rewrite E.
  - apply Pos.eqb_neq in E. now rewrite E.
Qed.

Lemma far_end_add : forall m u p v,
  far_end (PositiveMap.add u p m) v = if (v =? u)%positive then p else far_end m v.
Proof.
  intros m u p v. unfold far_end. rewrite PositiveMapAdditionalFacts.gsspec.
  destruct (PositiveMap.E.eq_dec v u) as [E | E].
  - apply Pos.eqb_eq in E. now rewrite E.
  - apply Pos.eqb_neq in E. now rewrite E.
Qed.

Lemma neighbours_pushed : forall m u v x y,
  In y (neighbours (PositiveMap.add u (v :: neighbours m u)
                     (PositiveMap.add v (u :: neighbours m v) m)) x) <->
  In y (neighbours m x) \/ (x = u /\ y = v) \/ (x <> u /\ x = v /\ y = u).
Proof.
  intros m u v x y. rewrite !neighbours_add.
  destruct (Pos.eqb_spec x u) as [-> | D]; [simpl; intuition congruence |].
  destruct (Pos.eqb_spec x v) as [-> | D']; simpl; intuition congruence.
Qed.

(** ** Lists of vertices

    Ends are read off with [hd] and [last]; the default never shows, as paths are not
    empty. *)

Definition head (p : list vertex) : vertex := hd 1%positive p.

Definition tip (p : list vertex) : vertex := last p 1%positive.

Lemma head_in : forall p, p <> [] -> In (head p) p.
Proof. intros [|a p] H; [easy | now left]. Qed.

Lemma tip_app : forall p a, tip (p ++ [a]) = a.
Proof. intros. apply last_last. Qed.

Lemma head_rev : forall p, head (rev p) = tip p.
Proof.
  intros p. destruct p as [|a p] using rev_ind; [easy |].
  now rewrite rev_app_distr, tip_app.
Qed.

Lemma tip_rev : forall p, tip (rev p) = head p.
Proof. intros p. now rewrite <- head_rev, rev_involutive. Qed.

Lemma rev_nil : forall p : list vertex, p <> [] -> rev p <> [].
Proof. intros p H E. apply H. now rewrite <- (rev_involutive p), E. Qed.

Lemma tip_in : forall p, p <> [] -> In (tip p) p.
Proof. intros p H. rewrite <- head_rev, in_rev. now apply head_in, rev_nil. Qed.

Lemma head_app : forall p q, p <> [] -> head (p ++ q) = head p.
Proof. intros [|a p] q H; easy. Qed.

Lemma tip_app_right : forall p q, q <> [] -> tip (p ++ q) = tip q.
Proof.
  intros p q H. destruct q as [|a q] using rev_ind; [easy |].
  now rewrite app_assoc, !tip_app.
Qed.

Lemma steps_app : forall (p q : list vertex) u v, p <> [] -> q <> [] ->
  In (u, v) (path_steps (p ++ q)) ->
  In (u, v) (path_steps p) \/ (u = tip p /\ v = head q) \/ In (u, v) (path_steps q).
Proof.
  intros p q u v Hp Hq. induction p as [|a p IH]; [easy |].
  destruct p as [|b p].
  - destruct q as [|c q]; [easy |]. simpl.
    intros [E | H]; [injection E as <- <-; auto | auto].
  - intros H. assert (N : b :: p <> []) by easy. specialize (IH N).
    simpl in H. destruct H as [E | H].
    + left. left. exact E.
    + destruct (IH H) as [I | [I | I]]; [left; right; exact I | right; left; exact I | auto].
Qed.

Lemma steps_rev : forall (p : list vertex) u v,
  In (u, v) (path_steps (rev p)) -> In (v, u) (path_steps p).
Proof.
  intros p u v. induction p as [|a p IH]; [easy |]. simpl rev. intros H.
  destruct p as [|b p]; [easy |].
  apply steps_app in H; [| now apply rev_nil | easy].
  destruct H as [H | [[-> ->] | H]]; [| | easy].
  - right. apply IH, H.
  - left. now rewrite tip_rev.
Qed.

(** ** The paths that the used edges form *)

(** What the table of far ends says of a path. *)
Definition recorded (m : PositiveMap.t (vertex * positive)) (p : list vertex) : Prop :=
  far_end m (head p) = (tip p, Pos.of_nat (length p)) /\
  far_end m (tip p) = (head p, Pos.of_nat (length p)).

(** The paths [ps] have no vertex in common, their steps are used edges and their ends
    recorded; a vertex with fewer than two used edges is the end of one, and one without
    used edges a path by itself. *)
Record paths (n : nat) (c : PositiveMap.t (list vertex)) (m : PositiveMap.t (vertex * positive))
    (ps : list (list vertex)) : Prop := {
  paths_distinct : NoDup (concat ps);
  paths_some : forall p, In p ps -> p <> [];
  paths_steps : forall p u v, In p ps -> In (u, v) (path_steps p) ->
    In v (neighbours c u) /\ In u (neighbours c v);
  paths_recorded : forall p, In p ps -> recorded m p;
  paths_single : forall v, In v (all_vertices n) -> neighbours c v = [] -> In [v] ps;
  paths_ends : forall v a, In v (all_vertices n) -> neighbours c v = [a] ->
    exists p, In p ps /\ (head p = v \/ tip p = v)
}.

Lemma concat_permutation : forall ps qs : list (list vertex),
  Permutation ps qs -> Permutation (concat ps) (concat qs).
Proof.
  intros ps qs H. induction H as [| p ps qs H IH | p q ps | ps qs rs H IH H' IH']; simpl.
  - constructor.
  - now apply Permutation_app_head.
  - rewrite !app_assoc. apply Permutation_app_tail, Permutation_app_comm.
  - now transitivity (concat qs).
Qed.

(** At the start every vertex is a path by itself. *)
Lemma paths_start : forall n, NoDup (all_vertices n) ->
  paths n (PositiveMap.empty _) (PositiveMap.empty _) (map (fun v => [v]) (all_vertices n)).
Proof.
  intros n D. set (l := all_vertices n) in *.
  assert (Each : forall p, In p (map (fun v => [v]) l) -> exists v, p = [v]).
  { intros p H. apply in_map_iff in H as [v [<- _]]. now exists v. }
  assert (None_chosen : forall v, neighbours (PositiveMap.empty _) v = []).
  { intros v. unfold neighbours. now rewrite PositiveMap.gempty. }
  constructor.
  - replace (concat (map (fun v => [v]) l)) with l; [easy |].
    clear. induction l as [|a l IH]; simpl; congruence.
  - intros p H. now destruct (Each p H) as [v ->].
  - intros p u v H. now destruct (Each p H) as [w ->].
  - intros p H. destruct (Each p H) as [v ->]. unfold recorded, far_end.
    now rewrite !PositiveMap.gempty.
  - intros v H _. now apply (in_map (fun v => [v])).
  - intros v a _. now rewrite None_chosen.
Qed.

(** The order of the paths does not matter, *)
Lemma paths_permutation : forall n c m ps qs,
  Permutation ps qs -> paths n c m ps -> paths n c m qs.
Proof.
  intros n c m ps qs P [D S T R I E].
  assert (B : forall p, In p qs -> In p ps).
  { intros p. apply Permutation_in. now symmetry. }
  constructor; auto.
  - apply (Permutation_NoDup (concat_permutation _ _ P) D).
  - intros p u v Hp. apply T. auto.
  - intros v Hv N. apply (Permutation_in _ P). auto.
  - intros v a Hv N. destruct (E v a Hv N) as [p [Hp H]]. exists p. split; [| easy].
    apply (Permutation_in _ P Hp).
Qed.

(** nor does their direction. *)
Lemma paths_turn : forall n c m p ps, paths n c m (p :: ps) -> paths n c m (rev p :: ps).
Proof.
  intros n c m p ps [D S T R I E]. constructor.
  - simpl in *. apply (Permutation_NoDup (l := p ++ concat ps)); [| easy].
    apply Permutation_app_tail, Permutation_rev.
  - intros q [<- | Hq]; [apply rev_nil, S; now left | apply S; now right].
  - intros q u v [<- | Hq] H.
    + apply steps_rev in H. apply and_comm. apply (T p); [now left | easy].
    + apply (T q); [now right | easy].
  - intros q [<- | Hq].
    + unfold recorded. rewrite head_rev, tip_rev, rev_length. apply and_comm. apply R. now left.
    + apply R. now right.
  - intros v Hv N. destruct (I v Hv N) as [-> | H]; [now left | now right].
  - intros v a Hv N. destruct (E v a Hv N) as [q [[<- | Hq] H]].
    + exists (rev p). split; [now left | rewrite head_rev, tip_rev; now apply or_comm].
    + exists q. split; [now right | easy].
Qed.

Lemma paths_disjoint : forall n c m p q ps v,
  paths n c m (p :: ps) -> In q ps -> In v p -> In v q -> False.
Proof.
  intros n c m p q ps v [D _ _ _ _ _] Hq Hp Hv. simpl in D.
  induction p as [|a p IH]; [easy |]. simpl in D. apply NoDup_cons_iff in D as [A D].
  destruct Hp as [-> | Hp]; [| auto]. apply A, in_or_app. right.
  apply in_concat. eauto.
Qed.

Lemma distinct_front : forall l l' : list vertex, NoDup (l ++ l') -> NoDup l.
Proof.
  intros l l' D. induction l as [|a l IH]; [constructor |]. simpl in D.
  apply NoDup_cons_iff in D as [A D]. constructor; [| now apply IH].
  intros H. apply A, in_or_app. now left.
Qed.

Lemma paths_end : forall n c m ps v,
  paths n c m ps -> In v (all_vertices n) -> full (neighbours c v) = false ->
  exists p, In p ps /\ (head p = v \/ tip p = v).
Proof.
  intros n c m ps v P Hv F. destruct (full_false _ _ F) as [N | [a N]].
  - exists [v]. split; [apply (paths_single _ _ _ _ P); auto | now left].
  - apply (paths_ends _ _ _ _ P v a Hv N).
Qed.

Lemma in_permutation : forall (A : Type) (x : A) l,
  In x l -> exists l', Permutation l (x :: l').
Proof.
  intros A x l H. destruct (in_split _ _ H) as [l1 [l2 ->]].
  exists (l1 ++ l2). symmetry. apply Permutation_middle.
Qed.

(** A vertex with fewer than two used edges can be put at the tip of the first path, *)
Lemma paths_first : forall n c m ps v,
  paths n c m ps -> In v (all_vertices n) -> full (neighbours c v) = false ->
  exists p rest, paths n c m (p :: rest) /\ tip p = v.
Proof.
  intros n c m ps v P Hv F. destruct (paths_end _ _ _ _ _ P Hv F) as [p [Hp H]].
  destruct (in_permutation _ _ _ Hp) as [rest E].
  apply (paths_permutation _ _ _ _ _ E) in P. destruct H as [H | H].
  - exists (rev p), rest. split; [now apply paths_turn | now rewrite tip_rev].
  - now exists p, rest.
Qed.

(** and another one, which is not an end of this path, at the head of the second. *)
Lemma paths_second : forall n c m p ps v,
  paths n c m (p :: ps) -> In v (all_vertices n) -> full (neighbours c v) = false ->
  head p <> v -> tip p <> v ->
  exists q rest, paths n c m (p :: q :: rest) /\ head q = v.
Proof.
  intros n c m p ps v P Hv F Nh Nt.
  destruct (paths_end _ _ _ _ _ P Hv F) as [q [[<- | Hq] H]]; [tauto |].
  destruct (in_permutation _ _ _ Hq) as [rest E]. destruct H as [H | H].
  - exists q, rest. split; [| easy]. apply (paths_permutation _ _ _ (p :: ps)); auto.
  - exists (rev q), rest. split; [| now rewrite head_rev].
    apply (paths_permutation _ _ _ (rev q :: p :: rest)); [apply perm_swap |].
    apply paths_turn, (paths_permutation _ _ _ (p :: ps)); [| easy].
    rewrite E. apply perm_swap.
Qed.

(** A used edge from the tip of the first path to the head of the second makes them one. *)
Lemma paths_joined : forall n c m p q ps,
  paths n c m (p :: q :: ps) ->
  let u := tip p in
  let v := head q in
  let size := (Pos.of_nat (length p) + Pos.of_nat (length q))%positive in
  paths n (PositiveMap.add u (v :: neighbours c u) (PositiveMap.add v (u :: neighbours c v) c))
    (PositiveMap.add (head p) (tip q, size) (PositiveMap.add (tip q) (head p, size) m))
    ((p ++ q) :: ps).
Proof.
  intros n c m p q ps P u v size.
  assert (P' := P). destruct P as [D S T R I E].
  assert (Sp : p <> []) by (apply S; now left).
  assert (Sq : q <> []) by (apply S; right; now left).
  assert (Ht : In u p) by now apply tip_in.
  assert (Hh : In v q) by now apply head_in.
  assert (Far : forall w, In w p -> In w q -> False).
  { intros w. apply (paths_disjoint _ _ _ _ _ _ _ P'). now left. }
  assert (Other : forall r w, In r ps -> In w r -> ~ In w p /\ ~ In w q).
  { intros r w Hr Hw. split; intros Hw'.
    - apply (paths_disjoint _ _ _ _ r _ w P'); auto. now right.
    - apply (paths_permutation _ _ _ _ (q :: p :: ps)) in P'; [| apply perm_swap].
      apply (paths_disjoint _ _ _ _ r _ w P'); auto. now right. }
  assert (Kept : forall w, w <> u -> w <> v ->
    neighbours (PositiveMap.add u (v :: neighbours c u)
      (PositiveMap.add v (u :: neighbours c v) c)) w = neighbours c w).
  { intros w Nu Nv. apply Pos.eqb_neq in Nu, Nv. now rewrite !neighbours_add, Nu, Nv. }
  constructor.
  - simpl in *. now rewrite <- app_assoc.
  - intros r [<- | Hr]; [| apply S; right; now right].
    intros N. apply app_eq_nil in N. tauto.
  - intros r x y Hr H. rewrite !neighbours_pushed.
    assert (K : In y (neighbours c x) /\ In x (neighbours c y) \/ (x = u /\ y = v)).
    { destruct Hr as [<- | Hr].
      - apply steps_app in H as [H | [H | H]]; auto.
        + left. apply (T p); [now left | easy].
        + left. apply (T q); [right; now left | easy].
      - left. apply (T r); [right; now right | easy]. }
    destruct K as [[K K'] | [-> ->]]; [tauto |].
    split; right; [left | right]; try easy. split; [| easy].
    intros N. apply (Far v); [now rewrite N | easy].
  - intros r [<- | Hr]; unfold recorded.
    + rewrite head_app, tip_app_right, app_length by easy.
      rewrite Nat2Pos.inj_add by (destruct p, q; simpl; easy).
      fold size. rewrite !far_end_add, Pos.eqb_refl.
      destruct (Pos.eqb_spec (tip q) (head p)) as [N | N]; [| now rewrite Pos.eqb_refl].
      exfalso. apply (Far (head p)); [now apply head_in | rewrite <- N; now apply tip_in].
    + assert (Sr : r <> []) by (apply S; right; now right).
      destruct (Other r (head r) Hr (head_in r Sr)) as [Hp Hq].
      destruct (Other r (tip r) Hr (tip_in r Sr)) as [Tp Tq].
      assert (Ne : forall w, ~ In w p -> ~ In w q -> w <> head p /\ w <> tip q).
      { intros w Np Nq.
        split; intros ->; [now apply Np, head_in | now apply Nq, tip_in]. }
      apply Ne in Hp as [H1 H2]; [| easy]. apply Ne in Tp as [H3 H4]; [| easy].
      apply Pos.eqb_neq in H1, H2, H3, H4. rewrite !far_end_add, H1, H2, H3, H4.
      apply R. right. now right.
  - intros w Hw N. assert (Nw : w <> u /\ w <> v).
    { split; intros ->; rewrite !neighbours_add, Pos.eqb_refl in N; [easy |].
      destruct (v =? u)%positive; easy. }
    destruct Nw as [Nu Nv]. rewrite Kept in N by easy.
    destruct (I w Hw N) as [-> | [-> | H]]; [now elim Nu | now elim Nv | now right].
  - intros w a Hw N.
    destruct (Pos.eq_dec w u) as [-> | Nu]; [| destruct (Pos.eq_dec w v) as [-> | Nv]].
    + rewrite !neighbours_add, Pos.eqb_refl in N. injection N as _ N.
      exists (p ++ q). split; [now left |]. left. rewrite head_app by easy.
      destruct (I u Hw N) as [H | [H | H]].
      * now rewrite H.
      * elim (Far u Ht). rewrite H. now left.
      * elim (proj1 (Other _ u H (or_introl eq_refl)) Ht).
    + rewrite !neighbours_add, Pos.eqb_refl in N. apply Pos.eqb_neq in Nu. rewrite Nu in N.
      injection N as _ N.
      exists (p ++ q). split; [now left |]. right. rewrite tip_app_right by easy.
      destruct (I v Hw N) as [H | [H | H]].
      * elim (Far v); [| easy]. rewrite H. now left.
      * now rewrite H.
      * elim (proj2 (Other _ v H (or_introl eq_refl)) Hh).
    + rewrite Kept in N by easy. destruct (E w a Hw N) as [r [[<- | [<- | Hr]] H]].
      * exists (p ++ q). split; [now left |]. left. rewrite head_app by easy.
        destruct H as [H | H]; [easy | now elim Nu].
      * exists (p ++ q). split; [now left |]. right. rewrite tip_app_right by easy.
        destruct H as [H | H]; [now elim Nv | easy].
      * exists r. split; [now right | easy].
Qed.

(** A used edge from the tip of a path to its head, which are not the same, leaves the
    paths as they are. *)
Lemma paths_closed : forall n c m p ps,
  paths n c m (p :: ps) -> tip p <> head p ->
  let u := tip p in
  let v := head p in
  paths n (PositiveMap.add u (v :: neighbours c u) (PositiveMap.add v (u :: neighbours c v) c))
    m (p :: ps).
Proof.
  intros n c m p ps P Ne u v. assert (P' := P). destruct P as [D S T R I E].
  assert (Sp : p <> []) by (apply S; now left).
  assert (Alone : forall w, In w p -> In w (all_vertices n) -> neighbours c w <> []).
  { intros w Hw Hn N. destruct (I w Hn N) as [H | H]; [now subst p |].
    apply (paths_disjoint _ _ _ _ [w] _ w P'); simpl; auto. }
  assert (Ht : In u p) by now apply tip_in.
  assert (Hh : In v p) by now apply head_in.
  constructor; auto.
  - intros r x y Hr H. rewrite !neighbours_pushed. destruct (T r x y Hr H). tauto.
  - intros w Hw N. rewrite !neighbours_add in N.
    destruct (w =? u)%positive; [easy |]. destruct (w =? v)%positive; [easy | auto].
  - intros w a Hw N. rewrite !neighbours_add in N.
    destruct (Pos.eqb_spec w u) as [-> | Nu]; [injection N as _ N; now elim (Alone u) |].
    destruct (Pos.eqb_spec w v) as [-> | Nv]; [injection N as _ N; now elim (Alone v) | eauto].
Qed.
