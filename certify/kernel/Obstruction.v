(** * Kind obstruction: a few vertices that no Hamiltonian cycle can pass

    The forms and conditions are those of FORMAT.md, section 6; [absent] is not here, as an
    absent query has no question. *)

From Coq Require Import Bool List Permutation PArith ZArith FMapPositive Lia.
From Certify Require Import Statement Steps Question Edges Facts Totals Sets Pieces.
Import ListNotations.

Inductive obstruction :=
  | Small
  | Leaf (v : vertex)
  | Crowded (v a b c : vertex)
  | Ring (l : list vertex)
  | Separator (s : list vertex)
  | Independent (s : list vertex).

(** ** The checks *)

(** The needed edges as a map of neighbours. *)
Definition must (Q : question) : PositiveMap.t (list vertex) :=
  adjacency {| order := order Q; edges := needed Q; needed := [] |}.

Definition two (l : list vertex) : bool :=
  match l with
  | [_; _] => true
  | _ => false
  end.

Definition among (v : vertex) (l : list vertex) : bool := existsb (Pos.eqb v) l.

(** An edge is forced when it is needed or has an end with two edges only. *)
Definition forced (near must : PositiveMap.t (list vertex)) (u v : vertex) : bool :=
  among v (neighbours near u)
  && (among v (neighbours must u) || two (neighbours near u) || two (neighbours near v)).

(** The cycle has two edges at every vertex. *)
Definition check_leaf (Q : question) (v : vertex) : bool :=
  (v <=? last_vertex Q)%positive && (length (neighbours (adjacency Q) v) <=? 1).

(** It has only two, and these three are all forced. *)
Definition check_crowded (Q : question) (v a b c : vertex) : bool :=
  let near := adjacency Q in
  let must := must Q in
  (v <=? last_vertex Q)%positive && (a <? b)%positive && (b <? c)%positive
  && forallb (forced near must v) [a; b; c].

(** Forced edges close a cycle before all vertices are on it. *)
Definition check_ring (Q : question) (l : list vertex) : bool :=
  let near := adjacency Q in
  let must := must Q in
  distinct l && (3 <=? length l) && (length l <? order Q)
  && forallb (fun e => forced near must (fst e) (snd e)) (cycle_steps l).

Definition both_in (set : PositiveMap.t unit) (e : vertex * vertex) : bool :=
  PositiveMap.mem (fst e) set && PositiveMap.mem (snd e) set.

Definition none_in (set : PositiveMap.t unit) (e : vertex * vertex) : bool :=
  negb (PositiveMap.mem (fst e) set) && negb (PositiveMap.mem (snd e) set).

(** Each piece that is left without the set is entered and left, only by way of the set. *)
Definition check_separator (Q : question) (s : list vertex) : bool :=
  let set := members s in
  let label := labels Q set in
  let pieces := length (filter (names_piece set label) (count_up (order Q) 1%positive)) in
  let inside := count (both_in set) (needed Q) in
  vertex_set (last_vertex Q) s && (length s <? order Q)
  && forallb (keeps_label set label) (edges Q)
  && (length s <? pieces + inside)
  && match s with [] => 2 <=? pieces | _ => true end.

(** Edges at independent vertices are all different, and there are [order Q] in all. *)
Definition check_independent (Q : question) (s : list vertex) : bool :=
  let set := members s in
  let elsewhere := count (none_in set) (needed Q) in
  vertex_set (last_vertex Q) s
  && forallb (fun e => negb (both_in set e)) (edges Q)
  && (order Q <? 2 * length s + elsewhere).

Definition check_obstruction (Q : question) (o : obstruction) : bool :=
  match o with
  | Small => order Q <? 3
  | Leaf v => (3 <=? order Q) && check_leaf Q v
  | Crowded v a b c => (3 <=? order Q) && check_crowded Q v a b c
  | Ring l => (3 <=? order Q) && check_ring Q l
  | Separator s => (3 <=? order Q) && check_separator Q s
  | Independent s => (3 <=? order Q) && check_independent Q s
  end.

(** ** Why they are right *)

Lemma among_spec : forall v l, among v l = true <-> In v l.
Proof.
  intros v l. unfold among. rewrite existsb_exists. split.
  - intros (w & listed & same). now apply Pos.eqb_eq in same as ->.
  - intros listed. exists v. now rewrite Pos.eqb_refl.
Qed.

Section Sound.

Variable Q : question.
Hypothesis fine : well_formed Q = true.
Hypothesis three : 3 <= order Q.

Lemma vertex_fine : forall v,
  (v <=? last_vertex Q)%positive = true <-> In v (all_vertices (order Q)).
Proof. intros v. apply last_vertex_spec. lia. Qed.

Lemma must_spec : forall u v,
  In v (neighbours (must Q) u) <-> In (u, v) (needed Q) \/ In (v, u) (needed Q).
Proof.
  intros u v. destruct (well_formed_spec Q fine) as (up & _ & _ & part & _).
  assert (up' : ascending (needed Q)) by (intros x y listed; apply up, part, listed).
  rewrite <- (other_in u v (needed Q) up').
  pose proof (neighbours_list {| order := order Q; edges := needed Q; needed := [] |} u up')
    as same.
  split; apply Permutation_in; [exact same | exact (Permutation_sym same)].
Qed.

Section Cycle.

Variable h : list vertex.
Hypothesis ham : cycle Q h.

(** A vertex with two edges uses both. *)
Lemma two_used : forall u v, In v (neighbours (adjacency Q) u) ->
  two (neighbours (adjacency Q) u) = true -> used h u v.
Proof.
  intros u v listed only.
  assert (visited : In u (all_vertices (order Q))).
  { apply (neighbours_joined Q fine) in listed. now apply (joined_vertices Q fine) in listed. }
  pose proof (degree_neighbours Q fine h ham u visited) as both. unfold count in both.
  destruct (neighbours (adjacency Q) u) as [| a [| b [| c l]]]; try discriminate only.
  cbn [filter] in both. apply (uses_spec Q fine h ham).
  destruct (uses h (u, a)) eqn:first, (uses h (u, b)) eqn:second; cbn in both; try lia.
  destruct listed as [<- | [<- | []]]; assumption.
Qed.

Lemma forced_used : forall u v, forced (adjacency Q) (must Q) u v = true -> used h u v.
Proof.
  intros u v why. unfold forced in why. rewrite andb_true_iff, !orb_true_iff, !among_spec in why.
  destruct why as [listed [[needed | here] | there]].
  - destruct ham as (_ & _ & _ & all_needed). apply must_spec in needed as [needed | needed];
      apply all_needed in needed; unfold used in *; tauto.
  - now apply two_used.
  - apply (used_sym Q fine h ham), two_used; [| exact there].
    apply (neighbours_joined Q fine). apply (neighbours_joined Q fine) in listed.
    now apply joined_sym.
Qed.

Lemma leaf_sound : forall v, check_leaf Q v = true -> False.
Proof.
  intros v why. unfold check_leaf in why.
  apply andb_true_iff in why as [visited few]. apply vertex_fine in visited.
  pose proof (degree_neighbours Q fine h ham v visited) as both. unfold count in both.
  destruct (neighbours (adjacency Q) v) as [| a [| b l]]; try discriminate.
  cbn [filter] in both. now destruct (uses h (v, a)).
Qed.

Lemma crowded_sound : forall v a b c, check_crowded Q v a b c = true -> False.
Proof.
  intros v a b c why. unfold check_crowded in why. cbn zeta in why. cbn [forallb] in why.
  rewrite !andb_true_iff in why.
  destruct why as [[[visited first] second] (a_forced & b_forced & c_forced & _)].
  apply vertex_fine in visited. apply Pos.ltb_lt in first, second.
  apply forced_used in a_forced, b_forced, c_forced.
  destruct (degree Q fine h ham v visited) as (x & y & _ & only).
  apply only in a_forced, b_forced, c_forced.
  destruct a_forced as [-> | ->], b_forced as [-> | ->], c_forced as [-> | ->]; lia.
Qed.

Lemma ring_sound : forall l, check_ring Q l = true -> False.
Proof.
  intros l why. unfold check_ring in why. cbn zeta in why. rewrite !andb_true_iff in why.
  destruct why as [[[different long] short] all_forced].
  apply distinct_spec in different. apply Nat.leb_le in long. apply Nat.ltb_lt in short.
  rewrite forallb_forall in all_forced.
  enough (length l = order Q) by lia.
  apply (no_shorter_cycle Q fine h ham); [exact different | exact long |].
  intros u v step. apply all_forced in step. now apply forced_used.
Qed.

(** With [c] pieces and [r] needed edges inside the set: for each used edge, the number of
    pieces it leaves, and 2 if it is needed and inside the set, make at most the number of its
    ends in the set. Added up along the cycle: [2c + 2r <= 2 * length s]. *)
Lemma separator_sound : forall s, check_separator Q s = true -> False.
Proof.
  intros s why. unfold check_separator in why. cbn zeta in why.
  set (set := members s) in *. set (label := labels Q set) in *.
  set (roots := filter (names_piece set label) (count_up (order Q) 1%positive)) in *.
  rewrite !andb_true_iff in why. destruct why as [[[[good small] steady] many] whole].
  apply vertex_set_spec in good as [different range]; [| lia].
  apply Nat.ltb_lt in small, many. rewrite forallb_forall in steady.
  assert (roots_distinct : NoDup roots).
  { apply NoDup_filter. rewrite count_up_all. apply all_vertices_distinct. }
  assert (root : forall r, In r roots ->
            In r (all_vertices (order Q)) /\ piece set label r r = true).
  { intros r listed. apply filter_In in listed. now rewrite count_up_all in listed. }
  assert (member : forall v, PositiveMap.mem v set = true <-> In v s) by apply members_spec.
  (* The cycle leaves each piece, as something is outside: another root, or the set. *)
  assert (left_twice : forall r, In r roots ->
            (2 <= total Q h (fun e => Z.b2z (leaves (piece set label r) e)))%Z).
  { intros r listed. destruct (root r listed) as [r_in r_side].
    assert (exists v, In v (all_vertices (order Q)) /\ piece set label r v = false)
      as (v & v_in & v_side).
    { destruct s as [| v s'].
      - apply Nat.leb_le in whole.
        destruct roots as [| r1 [| r2 rest]]; cbn [length] in whole; try lia.
        inversion_clear roots_distinct as [| ? ? fresh _].
        assert (apart : r1 <> r2) by (intros ->; apply fresh; now left).
        destruct (Pos.eq_dec r r1) as [-> | differ].
        + exists r2. destruct (root r2) as [r2_in r2_side]; [right; now left |].
          split; [exact r2_in | now apply (other_piece set label r1 r2)].
        + exists r1. destruct (root r1) as [r1_in r1_side]; [now left |].
          split; [exact r1_in | apply (other_piece set label r r1); congruence].
      - exists v. split; [apply range; now left |]. unfold piece.
        assert (PositiveMap.mem v set = true) as -> by (apply member; now left). reflexivity. }
    now apply (total_leaves Q fine h ham _ r v). }
  assert (ends : (sum (fun r => total Q h (fun e => Z.b2z (leaves (piece set label r) e))) roots
                  + 2 * total Q h (fun e =>
                          Z.b2z (both_in set e && existsb (pair_eqb e) (needed Q)))
                  <= sum (fun w => total Q h (fun e => Z.b2z (touches w e))) s)%Z).
  { rewrite <- !total_sum, <- total_times, <- total_plus.
    apply total_le. intros [u v] listed _.
    assert (differ : u <> v) by (apply (joined_differ Q fine); now left).
    rewrite (sum_touches s u v (fun w => PositiveMap.mem w set) different member differ).
    apply (pieces_left set label roots); [exact roots_distinct | now apply steady]. }
  pose proof (total_needed Q fine h ham (both_in set)) as used_inside.
  assert (two_each : sum (fun w => total Q h (fun e => Z.b2z (touches w e))) s
                     = (2 * Z.of_nat (length s))%Z).
  { rewrite <- sum_constant. apply sum_ext. intros w listed.
    now apply (total_touches Q fine h ham), range. }
  assert (all_left : (2 * Z.of_nat (length roots)
            <= sum (fun r => total Q h (fun e => Z.b2z (leaves (piece set label r) e))) roots)%Z).
  { rewrite <- sum_constant. now apply sum_le. }
  lia.
Qed.

(** For each used edge, the number of its ends in the set, and 1 if it is needed and has none,
    is at most 1. Added up: [2 * length s + r <= order Q]. *)
Lemma independent_sound : forall s, check_independent Q s = true -> False.
Proof.
  intros s why. unfold check_independent in why. cbn zeta in why.
  set (set := members s) in *.
  rewrite !andb_true_iff in why. destruct why as [[good apart] many].
  apply vertex_set_spec in good as [different range]; [| lia].
  apply Nat.ltb_lt in many. rewrite forallb_forall in apart.
  assert (ends : (sum (fun w => total Q h (fun e => Z.b2z (touches w e))) s
                  + total Q h (fun e => Z.b2z (none_in set e && existsb (pair_eqb e) (needed Q)))
                  <= total Q h (fun _ => 1))%Z).
  { rewrite <- total_sum, <- total_plus. apply total_le. intros [u v] listed _.
    assert (differ : u <> v) by (apply (joined_differ Q fine); now left).
    rewrite (sum_touches s u v (fun w => PositiveMap.mem w set) different (members_spec s) differ).
    apply apart in listed. unfold none_in, both_in in *. cbn [fst snd] in *.
    destruct (PositiveMap.mem u set), (PositiveMap.mem v set), (existsb _ _); easy. }
  rewrite (total_one Q fine h ham) in ends.
  pose proof (total_needed Q fine h ham (none_in set)) as used_elsewhere.
  assert (two_each : sum (fun w => total Q h (fun e => Z.b2z (touches w e))) s
                     = (2 * Z.of_nat (length s))%Z).
  { rewrite <- sum_constant. apply sum_ext. intros w listed.
    now apply (total_touches Q fine h ham), range. }
  lia.
Qed.

End Cycle.

End Sound.

Theorem check_obstruction_sound : forall Q o,
  well_formed Q = true -> check_obstruction Q o = true -> refuted Q.
Proof.
  intros Q o fine why. destruct o; cbn [check_obstruction] in why;
    [now apply small_refuted, Nat.ltb_lt | ..];
    apply andb_true_iff in why as [three why]; apply Nat.leb_le in three; intros (h & ham).
  - now apply (leaf_sound Q fine three h ham v).
  - now apply (crowded_sound Q fine three h ham v a b c).
  - now apply (ring_sound Q fine three h ham l).
  - now apply (separator_sound Q fine three h ham s).
  - now apply (independent_sound Q fine three h ham s).
Qed.
