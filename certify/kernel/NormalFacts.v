(** * What the normal form keeps

    Lemmas for NormalSound.v: steps of paths and cycles, numbers of vertices, edges of
    the question, and what becomes of a path or cycle whose vertices are numbered. *)

From Coq Require Import Bool List Permutation PArith Arith Lia.
From Certify Require Import Statement Steps Question Edges Normal.
Import ListNotations.
Open Scope lazy_bool_scope.

(** ** Steps of paths and cycles *)

Notation on_both f := (fun e => (f (fst e), f (snd e))).

Lemma path_steps_split : forall (A : Type) (h : list A) u v,
  In (u, v) (path_steps h) -> exists before after, h = before ++ u :: v :: after.
Proof.
  intros A h u v. induction h as [|x [|y h] IH]; cbn [path_steps In]; [tauto..|].
  intros [Heq | Hin].
  - injection Heq as -> ->. now exists [], h.
  - destruct (IH Hin) as (before & after & Heq). exists (x :: before), after.
    now rewrite Heq.
Qed.

(** The last step of a cycle goes from its last vertex to its first. *)
Lemma cycle_steps_close : forall (A : Type) first rest (most : list A) final,
  first :: rest = most ++ [final] ->
  cycle_steps (first :: rest) = path_steps (first :: rest) ++ [(final, first)].
Proof.
  intros A first rest most final Heq. unfold cycle_steps.
  rewrite Heq, <- app_assoc. apply (path_steps_app most final [first]).
Qed.

Lemma path_steps_differ : forall (A : Type) (h : list A) u v,
  NoDup h -> In (u, v) (path_steps h) -> In u h /\ In v h /\ u <> v.
Proof.
  intros A h u v Hdup Hin. destruct (path_steps_split A h u v Hin) as (b & a & ->).
  rewrite !in_app_iff. simpl. repeat split; auto. intros ->.
  apply NoDup_remove_2 in Hdup. apply Hdup. rewrite in_app_iff. simpl. auto.
Qed.

Lemma cycle_steps_differ : forall (A : Type) (h : list A) u v,
  NoDup h -> 3 <= length h -> In (u, v) (cycle_steps h) -> In u h /\ In v h /\ u <> v.
Proof.
  intros A h u v Hdup Hlen Hin. repeat split; try apply (cycle_steps_in h u v Hin).
  intros ->. now apply (one_way h v v Hdup Hlen).
Qed.

(** ** Lists *)

Lemma holds_spec : forall (A : Type) (test : A -> bool) l,
  holds test l = true <-> exists x, In x l /\ test x = true.
Proof.
  intros A test l. rewrite <- existsb_exists. induction l as [|x l IH]; simpl; [tauto|].
  now rewrite <- orb_lazy_alt, !orb_true_iff, IH.
Qed.

Lemma holds_same : forall (A : Type) (name : Named A) (x : A) l,
  holds (same x) l = true <-> In x l.
Proof.
  intros A name x l. rewrite holds_spec. setoid_rewrite (same_spec x). firstorder congruence.
Qed.

Lemma holds_pair : forall e l, holds (pair_eqb e) l = true <-> In e l.
Proof.
  intros e l. rewrite holds_spec. setoid_rewrite pair_eqb_spec. firstorder congruence.
Qed.

Lemma collect_some : forall (A B : Type) (f : A -> option B) l ys,
  collect f l = Some ys -> forall y, In y ys <-> exists x, In x l /\ f x = Some y.
Proof.
  intros A B f l. induction l as [|x l IH]; simpl; intros ys Heq y.
  - injection Heq as <-. firstorder.
  - destruct (f x) as [y'|] eqn:Hx; [|discriminate].
    destruct (collect f l) as [ys'|]; [|discriminate]. injection Heq as <-.
    simpl. rewrite (IH ys' eq_refl y). split.
    + intros [<- | (x' & Hin & Hf)]; eauto.
    + intros (x' & [<- | Hin] & Hf); [left; congruence | eauto].
Qed.

Lemma collect_none : forall (A B : Type) (f : A -> option B) l,
  collect f l = None -> exists x, In x l /\ f x = None.
Proof.
  intros A B f l. induction l as [|x l IH]; simpl; [discriminate|].
  destruct (f x) eqn:Hx; [|eauto].
  destruct (collect f l); [discriminate|]. intros _.
  destruct (IH eq_refl) as (x' & Hin & Hf). eauto.
Qed.

Lemma ordered_either : forall i j, ordered (i, j) = (i, j) \/ ordered (i, j) = (j, i).
Proof. intros i j. destruct (ordered_cases i j); tauto. Qed.

Lemma ordered_sym : forall i j, i <> j -> ordered (i, j) = ordered (j, i).
Proof.
  intros i j Hij.
  destruct (ordered_cases i j) as [[Hless ->] | [Hless ->]],
    (ordered_cases j i) as [[Hmore ->] | [Hmore ->]]; reflexivity || lia.
Qed.

(** ** Numbers of vertices *)

Section Numbers.

Context {V : Type} {named : Named V}.

Lemma number_snd : forall (l : list V) i, map snd (number i l) = l.
Proof. induction l as [|v l IH]; intros i; simpl; [|rewrite IH]; reflexivity. Qed.

Lemma number_fst : forall (l : list V) k, 1 <= k ->
  map fst (number (Pos.of_nat k) l) = map Pos.of_nat (seq k (length l)).
Proof.
  induction l as [|v l IH]; intros k Hk; simpl; [reflexivity|].
  rewrite <- Nat2Pos.inj_succ by lia. now rewrite IH by lia.
Qed.

Lemma number_above : forall (l : list V) i0 i u, In (i, u) (number i0 l) -> (i0 <= i)%positive.
Proof.
  induction l as [|v l IH]; intros i0 i u; simpl; [tauto|].
  intros [Heq | Hin].
  - injection Heq as <- <-. lia.
  - specialize (IH _ _ _ Hin). lia.
Qed.

Lemma all_vertices_succ : forall n,
  all_vertices (S n) = all_vertices n ++ [Pos.of_succ_nat n].
Proof.
  intros n. unfold all_vertices. rewrite seq_S, map_app. simpl.
  now rewrite Pos.of_nat_succ.
Qed.

Lemma no_repeats_spec : forall l : list V, no_repeats l = true -> NoDup l.
Proof.
  induction l as [|v l IH]; simpl; [constructor|].
  destruct (holds (same v) l) eqn:Hholds; simpl; [discriminate|]. intros Hl.
  constructor; [|auto]. intros Hin.
  apply (holds_same V named v l) in Hin. congruence.
Qed.

End Numbers.

(** ** The edges of the question *)

Section Query.

Context {V : Type} {named : Named V}.
Variable Q : query V.
Notation numbered := (numbered Q).

Lemma numbered_snd : map snd numbered = vertices Q.
Proof. apply number_snd. Qed.

Lemma numbered_fst : map fst numbered = all_vertices (length (vertices Q)).
Proof. apply (number_fst (vertices Q) 1). lia. Qed.

Lemma is_edge_spec : forall u v, is_edge Q u v = true <-> edge Q u v.
Proof.
  intros u v. unfold is_edge, edge.
  rewrite <- andb_lazy_alt, andb_true_iff, negb_true_iff, <- not_true_iff_false.
  rewrite <- orb_lazy_alt, orb_true_iff, !holds_same. tauto.
Qed.

Lemma edge_meets : forall u v, edge Q u v -> meets Q u v = true /\ meets Q v u = true.
Proof.
  intros u v Hedge. apply is_edge_spec in Hedge. unfold meets. rewrite Hedge.
  now destruct (is_edge Q v u).
Qed.

Lemma row_more : forall i u later more e, In e more -> In e (row Q i u later more).
Proof.
  intros i u later more e Hin. induction later as [|[j v] later IH]; simpl; [assumption|].
  destruct (meets Q u v); simpl; auto.
Qed.

Lemma row_meets : forall i u later more j v,
  In (j, v) later -> meets Q u v = true -> In (i, j) (row Q i u later more).
Proof.
  intros i u later more j v Hin Hmeets.
  induction later as [|[j' v'] later IH]; simpl in *; [tauto|].
  destruct Hin as [Heq | Hin].
  - injection Heq as -> ->. rewrite Hmeets. simpl. auto.
  - specialize (IH Hin). destruct (meets Q u v'); simpl; auto.
Qed.

Variable close : vertex -> V -> list (vertex * vertex) -> list (vertex * vertex).
Hypothesis close_more : forall i u more, incl more (close i u more).

Lemma rows_ascending : forall l i0 i u j v,
  In (i, u) (number i0 l) -> In (j, v) (number i0 l) -> (i < j)%positive ->
  meets Q u v = true -> In (i, j) (rows Q close (number i0 l)).
Proof.
  induction l as [|w l IH]; intros i0 i u j v Hi Hj Hij Hmeets; simpl in *; [tauto|].
  destruct Hi as [Heq | Hi].
  - injection Heq as <- <-. destruct Hj as [Heq | Hj].
    + injection Heq as <- <-. lia.
    + now apply row_meets with v.
  - pose proof (number_above l (Pos.succ i0) i u Hi). destruct Hj as [Heq | Hj].
    + injection Heq as <- <-. lia.
    + apply row_more, close_more. now apply (IH (Pos.succ i0) i u j v).
Qed.

(** Every two vertices that an edge of the graph joins are joined in the question. *)
Lemma rows_edge : forall p q, In p numbered -> In q numbered -> fst p <> fst q ->
  edge Q (snd p) (snd q) -> In (ordered (fst p, fst q)) (rows Q close numbered).
Proof.
  intros [i u] [j v] Hp Hq Hij Hedge. simpl in *. apply edge_meets in Hedge.
  unfold ordered. simpl. destruct (Pos.ltb_spec i j).
  - now apply rows_ascending with u v.
  - apply rows_ascending with v u; try tauto. lia.
Qed.

Lemma rows_close : forall i u e, In (i, u) numbered ->
  (forall more, In e (close i u more)) -> In e (rows Q close numbered).
Proof.
  unfold Normal.numbered. intros i u e. generalize 1%positive.
  induction (vertices Q) as [|w l IH]; intros i0 Hin Hclose; simpl in *; [tauto|].
  apply row_more. destruct Hin as [Heq | Hin].
  - injection Heq as -> ->. apply Hclose.
  - apply close_more. now apply IH.
Qed.

End Query.

(** ** Following a path or cycle, vertices together with their numbers *)

Section Track.

Context {V : Type} {named : Named V}.
Variable Q : query V.
Notation numbered := (numbered Q).
Hypothesis each_once : NoDup (vertices Q).

Lemma number_unique : forall p q, In p numbered -> In q numbered -> snd p = snd q -> p = q.
Proof.
  intros p q. rewrite <- (numbered_snd Q) in each_once. revert each_once.
  induction numbered as [|r l IH]; simpl; [tauto|].
  intros Hdup Hp Hq Heq. inversion Hdup as [|? ? Hnot Hrest]. subst.
  destruct Hp as [<- | Hp], Hq as [<- | Hq]; [reflexivity| | |auto].
  - destruct Hnot. rewrite Heq. now apply in_map.
  - destruct Hnot. rewrite <- Heq. now apply in_map.
Qed.

Lemma place_some : forall u i, place Q u = Some i -> In (i, u) numbered.
Proof.
  intros u i. unfold place. destruct (find _ numbered) as [[j v]|] eqn:Hfind; [|discriminate].
  intros Heq. injection Heq as <-. apply find_some in Hfind.
  destruct Hfind as [Hin Hsame]. apply same_spec in Hsame. simpl in Hsame. now subst.
Qed.

Lemma place_number : forall p, In p numbered -> place Q (snd p) = Some (fst p).
Proof.
  intros p Hp. destruct (place Q (snd p)) as [i|] eqn:Hplace.
  - apply place_some in Hplace. now rewrite (number_unique p _ Hp Hplace eq_refl).
  - unfold place in Hplace. destruct (find _ numbered) eqn:Hfind; [discriminate|].
    pose proof (find_none _ _ Hfind p Hp) as Hnot. simpl in Hnot.
    assert (Htrue : same (snd p) (snd p) = true) by now apply same_spec. congruence.
Qed.

(** The steps, as pairs of numbered vertices, and what [visits] says of them. *)
Variable track : list ((vertex * V) * (vertex * V)).
Hypothesis within : forall p q, In (p, q) track ->
  In p numbered /\ In q numbered /\ fst p <> fst q.
Hypothesis along : forall u v, In (u, v) (map (on_both snd) track) -> edge Q u v.
Hypothesis through : forall u v, In (u, v) (required Q) ->
  In (u, v) (map (on_both snd) track) \/ In (v, u) (map (on_both snd) track).

Variable all : list (vertex * vertex).
Hypothesis complete : forall p q, In p numbered -> In q numbered -> fst p <> fst q ->
  edge Q (snd p) (snd q) -> In (ordered (fst p, fst q)) all.

Lemma track_ordered : forall p q, In (p, q) track -> In (ordered (fst p, fst q)) all.
Proof.
  intros p q Hin. destruct (within p q Hin) as (Hp & Hq & Hdiffer).
  apply complete; try assumption. apply along. now apply (in_map (on_both snd) _ _ Hin).
Qed.

Lemma track_joined : forall i j, In (i, j) (map (on_both fst) track) ->
  In (i, j) all \/ In (j, i) all.
Proof.
  intros i j Hin. apply in_map_iff in Hin. destruct Hin as ([p q] & Heq & Hin).
  injection Heq as <- <-. apply track_ordered in Hin.
  destruct (ordered_either (fst p) (fst q)) as [Hord | Hord]; rewrite Hord in Hin; auto.
Qed.

Lemma track_required : forall e, In e (required Q) -> exists i j,
  place_pair Q e = Some (i, j) /\ In (i, j) all /\
  (In (i, j) (map (on_both fst) track) \/ In (j, i) (map (on_both fst) track)).
Proof.
  intros [u v] Hin.
  assert (Hstep : exists p q, In (p, q) track /\ place_pair Q (u, v) = Some (ordered (fst p, fst q))).
  { destruct (through u v Hin) as [Hmap | Hmap];
      apply in_map_iff in Hmap; destruct Hmap as ([p q] & Heq & Htrack);
      injection Heq as <- <-; exists p, q; split; try assumption;
      destruct (within p q Htrack) as (Hp & Hq & Hdiffer);
      unfold place_pair; simpl; rewrite (place_number p Hp), (place_number q Hq);
      [|rewrite ordered_sym by auto]; reflexivity. }
  destruct Hstep as (p & q & Htrack & Hplace).
  pose proof (track_ordered p q Htrack) as Hall.
  pose proof (in_map (on_both fst) _ _ Htrack) as Hused. simpl in Hused.
  destruct (ordered_either (fst p) (fst q)) as [Hord | Hord]; rewrite Hord in *.
  - exists (fst p), (fst q). auto.
  - exists (fst q), (fst p). auto.
Qed.

(** The required edges are found, and used. *)
Lemma track_found : exists wanted, collect (place_pair Q) (required Q) = Some wanted.
Proof.
  destruct (collect (place_pair Q) (required Q)) as [wanted|] eqn:Hcollect; [now exists wanted|].
  apply collect_none in Hcollect. destruct Hcollect as (e & Hin & Hnone).
  destruct (track_required e Hin) as (i & j & Hsome & _). congruence.
Qed.

Lemma track_wanted : forall wanted i j,
  collect (place_pair Q) (required Q) = Some wanted -> In (i, j) wanted ->
  In (i, j) all /\
  (In (i, j) (map (on_both fst) track) \/ In (j, i) (map (on_both fst) track)).
Proof.
  intros wanted i j Hcollect Hin. apply (collect_some _ _ _ _ _ Hcollect) in Hin.
  destruct Hin as (e & Hrequired & Hplace).
  destruct (track_required e Hrequired) as (i' & j' & Hplace' & Hrest).
  rewrite Hplace in Hplace'. injection Hplace' as <- <-. exact Hrest.
Qed.

End Track.

Lemma ask_all : forall n all wanted, (forall e, In e wanted -> In e all) ->
  exists q, ask n all wanted = Asks q.
Proof.
  intros n all wanted Hall. unfold ask.
  replace (forallb (fun e => holds (pair_eqb e) all) wanted) with true; [eauto|].
  symmetry. apply forallb_forall. intros e He. now apply holds_pair, Hall.
Qed.

Lemma ask_question : forall n all wanted q, ask n all wanted = Asks q ->
  order q = n /\ edges q = all /\ forall e, In e (needed q) -> In e wanted.
Proof.
  intros n all wanted q. unfold ask. destruct (forallb _ wanted); [|discriminate].
  intros Heq. injection Heq as <-. simpl. repeat split.
  intros e He. apply filter_In in He. now apply holds_pair.
Qed.

(** A path or cycle of the graph, with the numbers of its vertices. *)
Lemma numbered_order : forall {V} (Q : query V) h, Permutation h (vertices Q) ->
  exists p, h = map snd p /\ Permutation p (numbered Q) /\
            Permutation (map fst p) (all_vertices (length (vertices Q))) /\
            NoDup (map fst p).
Proof.
  intros V Q h Hperm. rewrite <- (numbered_snd Q) in Hperm at 1.
  destruct (Permutation_map_inv _ _ Hperm) as (p & -> & Hp). exists p.
  assert (Hfst : Permutation (map fst p) (all_vertices (length (vertices Q)))).
  { rewrite <- (numbered_fst Q). now apply Permutation_map, Permutation_sym. }
  repeat split; [now apply Permutation_sym | assumption |].
  apply (Permutation_NoDup (Permutation_sym Hfst)), all_vertices_distinct.
Qed.
