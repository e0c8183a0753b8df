(** * Why the question in normal form is the same question

    A Hamiltonian cycle of the graph, its vertices replaced by their numbers, is a
    Hamiltonian cycle of the question; a Hamiltonian path of at least two vertices,
    numbered, becomes one when the apex is put behind it. So if the question is
    refuted, or something asked for is missing, there is no such path or cycle. *)

From Coq Require Import Bool List Permutation PArith Arith Lia.
From Certify Require Import Statement Steps Question Edges Normal NormalFacts.
Import ListNotations.

Section Sound.

Context {V : Type} {named : Named V}.
Variable Q : query V.

(** ** Cycles *)

Lemma cycle_kept : forall h, no_repeats (vertices Q) = true -> ham_cycle Q h ->
  exists q, normal_cycle Q = Asks q /\ exists c, cycle q c.
Proof.
  intros h Hrepeats (Hlen & Hperm & Hedge & Hrequired).
  pose proof (no_repeats_spec _ Hrepeats) as Honce.
  destruct (numbered_order Q h Hperm) as (p & -> & Hp & Hfst & Hdup).
  rewrite map_length in Hlen. rewrite cycle_steps_map in Hedge, Hrequired.
  set (track := cycle_steps p) in *.
  set (all := rows Q (fun _ _ more => more) (numbered Q)).
  assert (Hwithin : forall x y, In (x, y) track ->
            In x (numbered Q) /\ In y (numbered Q) /\ fst x <> fst y).
  { intros x y Hin.
    destruct (cycle_steps_differ _ p x y (NoDup_map_inv _ _ Hdup) ltac:(lia) Hin)
      as (Hx & Hy & _).
    repeat split; try now apply (Permutation_in _ Hp).
    apply (in_map (on_both fst)) in Hin. unfold track in Hin.
    rewrite <- cycle_steps_map in Hin.
    apply (cycle_steps_differ _ (map fst p)) in Hin; [tauto | assumption |].
    rewrite map_length. lia. }
  assert (Hcomplete := rows_edge Q (fun _ _ more => more) (fun _ _ _ => incl_refl _)).
  fold all in Hcomplete.
  destruct (track_found Q Honce track Hwithin Hedge Hrequired all Hcomplete) as [wanted Hwanted].
  pose proof (fun i j => track_wanted Q Honce track Hwithin Hedge Hrequired all Hcomplete
                           wanted i j Hwanted) as Hused.
  destruct (ask_all (length (vertices Q)) all wanted) as [q Hq].
  { intros [i j] Hin. now apply Hused. }
  exists q. unfold normal_cycle. rewrite Hrepeats, Hwanted. fold all.
  split; [assumption|].
  destruct (ask_question _ _ _ _ Hq) as (Horder & Hall & Hneeded).
  exists (map fst p). unfold cycle, joined, used.
  rewrite Horder, Hall, cycle_steps_map, map_length. fold track.
  repeat split; try assumption.
  - apply (track_joined Q track Hwithin Hedge all Hcomplete).
  - intros u v Hin. now apply Hused, Hneeded.
Qed.

Theorem normal_cycle_refuted : forall q,
  normal_cycle Q = Asks q -> refuted q -> ~ exists h, ham_cycle Q h.
Proof.
  intros q Hnormal Hrefuted [h Hham].
  destruct (no_repeats (vertices Q)) eqn:Hrepeats.
  - destruct (cycle_kept h Hrepeats Hham) as (q' & Hq' & c & Hc).
    rewrite Hnormal in Hq'. injection Hq' as <-. apply Hrefuted. now exists c.
  - unfold normal_cycle in Hnormal. rewrite Hrepeats in Hnormal. discriminate.
Qed.

Theorem normal_cycle_missing :
  normal_cycle Q = Missing -> ~ exists h, ham_cycle Q h.
Proof.
  intros Hnormal [h Hham].
  destruct (no_repeats (vertices Q)) eqn:Hrepeats.
  - destruct (cycle_kept h Hrepeats Hham) as (q & Hq & _). congruence.
  - unfold normal_cycle in Hnormal. rewrite Hrepeats in Hnormal. discriminate.
Qed.

(** ** Paths *)

Lemma starts_hd : forall (A : Type) (x s : A) rest, starts (x :: rest) s -> s = x.
Proof. intros A x s rest [r Heq]. now injection Heq. Qed.

Lemma stops_last : forall (A : Type) (most : list A) y t, stops (most ++ [y]) t -> t = y.
Proof. intros A most y t [r Heq]. now apply app_inj_tail in Heq. Qed.

(** The given ends are ends of the path; and where a path ends, it may end. *)
Lemma ends_met : forall x rest most y, x :: rest = most ++ [y] -> has_ends Q (x :: rest) ->
  (forall s, In s (ends Q) -> s = x \/ s = y) /\ may_end Q x = true /\ may_end Q y = true.
Proof.
  intros x rest most y Heq. unfold has_ends, may_end.
  assert (Hlast : forall t, stops (x :: rest) t -> t = y).
  { intros t. rewrite Heq. apply stops_last. }
  pose proof (starts_hd V x) as Hfirst.
  destruct (ends Q) as [|s [|t [|? ?]]]; simpl In; [tauto| | |tauto].
  - intros Hends. split; [|tauto]. intros s' [<- | []].
    destruct Hends as [Hstart | Hstop]; [left | right]; eauto.
  - intros Hends.
    assert (Hboth : (s = x /\ t = y) \/ (t = x /\ s = y)) by (intuition eauto).
    split; [intuition congruence|].
    split; apply holds_spec; setoid_rewrite same_spec; simpl;
      destruct Hboth as [[-> ->] | [-> ->]]; eauto.
Qed.

(** The cycle through the apex takes the steps of the path and two more. *)
Lemma apex_steps : forall (A : Type) (x : A) rest most y apex, x :: rest = most ++ [y] ->
  cycle_steps ((x :: rest) ++ [apex]) = path_steps (x :: rest) ++ [(y, apex); (apex, x)].
Proof.
  intros A x rest most y apex Heq. cbn [app].
  rewrite (cycle_steps_close _ x (rest ++ [apex]) (x :: rest) apex eq_refl), app_comm_cons.
  rewrite Heq, <- app_assoc. cbn [app]. now rewrite path_steps_app, <- app_assoc.
Qed.

Notation apex := (Pos.of_succ_nat (length (vertices Q))).
Notation all := (rows Q (join_apex Q apex) (numbered Q)).

Lemma join_more : forall i u more, incl more (join_apex Q apex i u more).
Proof. intros i u more e He. unfold join_apex. destruct (may_end Q u); simpl; auto. Qed.

Lemma apex_joined : forall p, In p (numbered Q) -> may_end Q (snd p) = true ->
  In (fst p, apex) all.
Proof.
  intros [i u] Hin Hmay. apply (rows_close Q (join_apex Q apex) join_more i u _ Hin).
  intros more. unfold join_apex. simpl in Hmay. rewrite Hmay. now left.
Qed.

Lemma tips_found : forall x y, NoDup (vertices Q) -> In x (numbered Q) -> In y (numbered Q) ->
  (forall s, In s (ends Q) -> s = snd x \/ s = snd y) ->
  exists tips, collect (place Q) (ends Q) = Some tips /\
    forall i, In i tips -> i = fst x \/ i = fst y.
Proof.
  intros x y Honce Hx Hy Hgiven.
  assert (Hplace : forall s, In s (ends Q) ->
            place Q s = Some (fst x) \/ place Q s = Some (fst y)).
  { intros s Hs. destruct (Hgiven s Hs) as [-> | ->]; [left | right]; now apply place_number. }
  destruct (collect (place Q) (ends Q)) as [tips|] eqn:Hcollect.
  - exists tips. split; [reflexivity|]. intros i Hi.
    apply (collect_some _ _ _ _ _ Hcollect) in Hi. destruct Hi as (s & Hs & Hi).
    destruct (Hplace s Hs); [left | right]; congruence.
  - apply collect_none in Hcollect. destruct Hcollect as (s & Hs & Hnone).
    destruct (Hplace s Hs); congruence.
Qed.

Lemma path_kept : forall h, no_repeats (vertices Q) = true -> ham_path Q h ->
  normal_path Q = OneVertex \/
  exists q, normal_path Q = Asks q /\ exists c, cycle q c.
Proof.
  intros h Hrepeats (Hsome & (Hperm & Hedge & Hrequired) & Hends).
  pose proof (no_repeats_spec _ Hrepeats) as Honce.
  destruct (numbered_order Q h Hperm) as (p & -> & Hp & Hfst & Hdup).
  rewrite path_steps_map in Hedge, Hrequired.
  assert (Hwithin : forall a b, In (a, b) (path_steps p) ->
            In a (numbered Q) /\ In b (numbered Q) /\ fst a <> fst b).
  { intros a b Hin.
    destruct (path_steps_differ _ _ a b (NoDup_map_inv _ _ Hdup) Hin) as (Ha & Hb & _).
    repeat split; try now apply (Permutation_in _ Hp).
    apply (in_map (on_both fst)) in Hin. rewrite <- path_steps_map in Hin.
    now apply path_steps_differ in Hin. }
  assert (Hcomplete := rows_edge Q (join_apex Q apex) join_more).
  destruct (track_found Q Honce (path_steps p) Hwithin Hedge Hrequired all Hcomplete)
    as [wanted Hwanted].
  pose proof (fun i j => track_wanted Q Honce (path_steps p) Hwithin Hedge Hrequired all
                           Hcomplete wanted i j Hwanted) as Hused.
  destruct p as [|x rest]; [contradiction|].
  destruct (exists_last (l := x :: rest)) as (most & y & Hlast); [discriminate|].
  assert (Hx : In x (numbered Q)) by (apply (Permutation_in _ Hp); now left).
  assert (Hy : In y (numbered Q)).
  { apply (Permutation_in _ Hp). rewrite Hlast, in_app_iff. simpl. auto. }
  destruct (ends_met (snd x) (map snd rest) (map snd most) (snd y))
    as (Hgiven & Hmayx & Hmayy); [|exact Hends|].
  { apply (f_equal (map snd)) in Hlast. now rewrite map_app in Hlast. }
  destruct (tips_found x y Honce Hx Hy Hgiven) as (tips & Hcollect & Htips).
  destruct (ask_all (S (length (vertices Q))) all (map (fun i => (i, apex)) tips ++ wanted))
    as [q Hq].
  { intros [i j] Hin. apply in_app_iff in Hin. destruct Hin as [Hin | Hin].
    - apply in_map_iff in Hin. destruct Hin as (i' & Heq & Hin). injection Heq as <- <-.
      destruct (Htips i' Hin) as [-> | ->]; now apply apex_joined.
    - now apply Hused. }
  assert (Hcount : length (vertices Q) = S (length rest)).
  { apply Permutation_length in Hperm. now rewrite map_length in Hperm. }
  unfold normal_path. rewrite Hrepeats, Hwanted, Hcollect, Hq.
  destruct rest as [|z rest]; [left; now rewrite Hcount | right].
  exists q. split; [now rewrite Hcount|].
  destruct (ask_question _ _ _ _ Hq) as (Horder & Hall & Hneeded).
  exists (map fst (x :: z :: rest) ++ @cons vertex apex []). unfold cycle, joined, used.
  apply (f_equal (map fst)) in Hlast. rewrite map_app in Hlast.
  assert (Hsteps := apex_steps vertex (fst x) (map fst (z :: rest)) _ _ apex Hlast).
  change (fst x :: map fst (z :: rest)) with (map fst (x :: z :: rest)) in Hsteps.
  rewrite Horder, Hall, Hsteps, path_steps_map. repeat split.
  - rewrite app_length, map_length. simpl. lia.
  - rewrite all_vertices_succ. now apply Permutation_app_tail.
  - intros u v Hin. apply in_app_iff in Hin. destruct Hin as [Hin | [Heq | [Heq | []]]].
    + now apply (track_joined Q (path_steps (x :: z :: rest)) Hwithin Hedge all Hcomplete).
    + injection Heq as <- <-. left. now apply apex_joined.
    + injection Heq as <- <-. right. now apply apex_joined.
  - intros u v Hin. apply Hneeded in Hin. rewrite !in_app_iff. apply in_app_iff in Hin.
    destruct Hin as [Hin | Hin].
    + apply in_map_iff in Hin. destruct Hin as (i & Heq & Hin). injection Heq as <- <-.
      simpl. destruct (Htips i Hin) as [-> | ->]; auto 6.
    + destruct (Hused u v Hin) as [_ [Hstep | Hstep]]; auto.
Qed.

Theorem normal_path_refuted : forall q,
  normal_path Q = Asks q -> refuted q -> ~ exists h, ham_path Q h.
Proof.
  intros q Hnormal Hrefuted [h Hham].
  destruct (no_repeats (vertices Q)) eqn:Hrepeats.
  - destruct (path_kept h Hrepeats Hham) as [Hone | (q' & Hq' & c & Hc)]; [congruence|].
    rewrite Hnormal in Hq'. injection Hq' as <-. apply Hrefuted. now exists c.
  - unfold normal_path in Hnormal. rewrite Hrepeats in Hnormal. discriminate.
Qed.

Theorem normal_path_missing :
  normal_path Q = Missing -> ~ exists h, ham_path Q h.
Proof.
  intros Hnormal [h Hham].
  destruct (no_repeats (vertices Q)) eqn:Hrepeats.
  - destruct (path_kept h Hrepeats Hham) as [Hone | (q & Hq & _)]; congruence.
  - unfold normal_path in Hnormal. rewrite Hrepeats in Hnormal. discriminate.
Qed.

End Sound.
